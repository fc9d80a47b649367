/** `requested`, `approved` and `out` are live: they hold a place. The rest are over. */
export const LOAN_STATUSES = [
  'requested',
  'approved',
  'out',
  'returned',
  'declined',
  'cancelled',
  'lapsed',
] as const
export type LoanStatus = (typeof LOAN_STATUSES)[number]

export const LIVE_LOAN_STATUSES = ['requested', 'approved', 'out'] as const satisfies LoanStatus[]
export type LiveLoanStatus = (typeof LIVE_LOAN_STATUSES)[number]

/** What takes a place on the shelf: the live ones, and what came back and is not clean yet. */
export type HoldingLoanStatus = LiveLoanStatus | 'returned'

export const LOAN_ACTIONS = [
  'approve',
  'decline',
  'cancel',
  'check-out',
  'check-in',
  'extend',
  'lapse',
] as const
export type LoanAction = (typeof LOAN_ACTIONS)[number]

/** Who acts on a loan. `house` is the daily round, which acts for nobody. */
export const LOAN_ACTORS = ['borrower', 'suspended-borrower', 'stranger', 'steward', 'house'] as const
export type LoanActor = (typeof LOAN_ACTORS)[number]

export const RETURN_CONDITIONS = ['ok', 'damaged', 'lost'] as const
export type ReturnCondition = (typeof RETURN_CONDITIONS)[number]

/** Why a booking may find nothing on the shelf. */
export const RISK_REASONS = ['overdue', 'out-of-service'] as const
export type RiskReason = (typeof RISK_REASONS)[number]

export const LOAN_LIMITS = ['max-loan-days', 'max-ahead-days', 'max-per-member'] as const
export type LoanLimit = (typeof LOAN_LIMITS)[number]

/** `offered` holds a place until a set moment; then the next in line is asked. */
export const WAITING_STATES = ['waiting', 'offered', 'taken', 'expired', 'left'] as const

/** What is counted when a booking is refused, so that the committee sees demand it cannot meet. */
export const REFUSAL_REASONS = ['not-available', 'over-limit', 'needs-induction'] as const
export type RefusalReason = (typeof REFUSAL_REASONS)[number]

/** The history of a loan, one word for each thing that can happen to it. */
export const LOAN_EVENTS = [
  'requested',
  'approved',
  'declined',
  'cancelled',
  'checked-out',
  'checked-in',
  'extended',
  'extension-requested',
  'extension-declined',
  'lapsed',
  'at-risk',
  'safe-again',
] as const
export type LoanEvent = (typeof LOAN_EVENTS)[number]

/** Days after the collection day on which an approved loan may still be collected; then it lapses. */
export const GRACE_DAYS = 1

/** How long the first in line may take before the next is asked. */
export const OFFER_HOURS = 24
