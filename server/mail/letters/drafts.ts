import type { NoticeKind } from '#shared/notices/vocabulary'
import { batchOutlastsLoan, batchStepDue } from './batches.ts'
import { stewardDigest } from './digest.ts'
import type { Draft } from './letter.ts'
import {
  loanApproved,
  loanAtRisk,
  loanCancelled,
  loanCollect,
  loanDeclined,
  loanDue,
  loanExtended,
  loanExtensionDeclined,
  loanLapsed,
  loanOverdue,
  loanSafeAgain,
  waitingOffer,
} from './loans.ts'
import { packetLotFlagged, packetNearBestBefore, packetOutcomeWanted } from './packets.ts'

/** The letter of each kind. Its first argument is what a service has to know to queue one. */
const DRAFTS = {
  'loan-approved': loanApproved,
  'loan-declined': loanDeclined,
  'loan-cancelled': loanCancelled,
  'loan-lapsed': loanLapsed,
  'loan-collect-tomorrow': loanCollect,
  'loan-due-soon': loanDue,
  'loan-due-today': loanDue,
  'loan-overdue': loanOverdue,
  'loan-at-risk': loanAtRisk,
  'loan-safe-again': loanSafeAgain,
  'loan-extended': loanExtended,
  'loan-extension-declined': loanExtensionDeclined,
  'waiting-offer': waitingOffer,
  'batch-step-due': batchStepDue,
  'batch-outlasts-loan': batchOutlastsLoan,
  'packet-near-best-before': packetNearBestBefore,
  'packet-outcome-wanted': packetOutcomeWanted,
  'packet-lot-flagged': packetLotFlagged,
  'steward-digest': stewardDigest,
} as const satisfies Record<NoticeKind, (facts: never, zone: string) => Draft>

export type NoticeFacts = { [K in NoticeKind]: Parameters<(typeof DRAFTS)[K]>[0] }

export const draftOf = <K extends NoticeKind>(kind: K, facts: NoticeFacts[K], zone: string): Draft =>
  (DRAFTS[kind] as unknown as (facts: NoticeFacts[K], zone: string) => Draft)(facts, zone)
