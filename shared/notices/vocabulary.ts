/** Every letter the house writes by itself. The part before the first hyphen is the domain it speaks of. */
export const NOTICE_KINDS = [
  'loan-approved',
  'loan-declined',
  'loan-cancelled',
  'loan-lapsed',
  'loan-collect-tomorrow',
  'loan-due-soon',
  'loan-due-today',
  'loan-overdue',
  'loan-at-risk',
  'loan-safe-again',
  'loan-extended',
  'loan-extension-declined',
  'waiting-offer',
  'batch-step-due',
  'batch-outlasts-loan',
  'packet-near-best-before',
  'packet-outcome-wanted',
  'packet-lot-flagged',
  'steward-digest',
] as const
export type NoticeKind = (typeof NOTICE_KINDS)[number]

/** What a member may switch off. Decisions, offers and everything about bringing kit back are always sent. */
export const OPTIONAL_NOTICES = [
  'loan-collect-tomorrow',
  'loan-safe-again',
  'batch-step-due',
  'batch-outlasts-loan',
  'packet-near-best-before',
  'packet-outcome-wanted',
  'packet-lot-flagged',
  'steward-digest',
] as const satisfies NoticeKind[]
export type OptionalNotice = (typeof OPTIONAL_NOTICES)[number]

export const isOptional = (kind: string): kind is OptionalNotice =>
  (OPTIONAL_NOTICES as readonly string[]).includes(kind)

/** Letters that a later one about the same loan makes pointless: of these only the newest is sent. */
export const LOAN_REMINDERS = [
  'loan-collect-tomorrow',
  'loan-due-soon',
  'loan-due-today',
  'loan-overdue',
] as const satisfies NoticeKind[]
export type LoanReminder = (typeof LOAN_REMINDERS)[number]

export const isLoanReminder = (kind: string): kind is LoanReminder =>
  (LOAN_REMINDERS as readonly string[]).includes(kind)

/** What each letter is called where people read about letters. */
export const NOTICE_NAMES: Record<NoticeKind, string> = {
  'loan-approved': 'Booking approved',
  'loan-declined': 'Booking declined',
  'loan-cancelled': 'Booking cancelled',
  'loan-lapsed': 'Booking not collected',
  'loan-collect-tomorrow': 'Collect tomorrow',
  'loan-due-soon': 'Due back in three days',
  'loan-due-today': 'Due back today',
  'loan-overdue': 'Late back',
  'loan-at-risk': 'Booking at risk',
  'loan-safe-again': 'Booking safe again',
  'loan-extended': 'Loan extended',
  'loan-extension-declined': 'Extension declined',
  'waiting-offer': 'Your turn in the waiting list',
  'batch-step-due': 'A step of your batch is due',
  'batch-outlasts-loan': 'Your batch outlasts its loan',
  'packet-near-best-before': 'Your packet nears its best-before',
  'packet-outcome-wanted': 'How did the yeast start?',
  'packet-lot-flagged': 'A yeast lot you have is flagged',
  'steward-digest': 'The desk each morning',
}

/** `failed`: refused for good. `dropped`: no longer worth sending, or overtaken by a newer letter. */
export const LETTER_STATUSES = ['queued', 'sent', 'failed', 'dropped'] as const
export type LetterStatus = (typeof LETTER_STATUSES)[number]

/** Whose fault a failed try was: the relay could not be reached or used, or it would not take this letter just then. */
export const LETTER_FAILURES = ['relay', 'letter'] as const
export type LetterFailure = (typeof LETTER_FAILURES)[number]

/** What a letter can be about; letters about one thing form a thread. */
export const LETTER_SUBJECTS = ['loan', 'waiting', 'batch', 'step', 'packet', 'pitch', 'member'] as const
export type LetterSubject = (typeof LETTER_SUBJECTS)[number]

/** Reminders and digests go out at this hour by the clock of the space. */
export const REMINDER_HOUR = 9

/** No letter is tried for longer than this. */
export const LETTER_LIFE_DAYS = 5
