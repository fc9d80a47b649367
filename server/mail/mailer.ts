import type { LetterFailure } from '#shared/notices/vocabulary'

/** A letter as it leaves: one recipient, everything decided. */
export interface OutgoingLetter {
  to: { name: string; address: string }
  subject: string
  text: string
  html: string
  messageId: string
  inReplyTo?: string
  /** Set on letters the member may stop: the address that does it in one click. */
  stopUrl?: string
}

/** What the worker sends through. Throws {@link SendError} and nothing else. */
export interface Mailer {
  send(letter: OutgoingLetter): Promise<void>
  /** Whether the relay answers and would take letters, found out without sending one. */
  probe(): Promise<boolean>
  close(): void
}

export class SendError extends Error {
  /** `relay`: nothing wrong with this letter, and others would fare the same. */
  readonly failure: LetterFailure
  /** Trying again would be refused again. */
  readonly permanent: boolean

  constructor(failure: LetterFailure, permanent: boolean, message: string) {
    super(message)
    this.failure = failure
    this.permanent = permanent
  }
}
