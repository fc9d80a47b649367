import type { MoveReason } from '#shared/larder/vocabulary'

/** What a person is about to do to a lot; without a lot, a draw that takes first expiring first from as many as it needs. */
export interface MoveDraft {
  reason: MoveReason
  quantity: number
  lotId?: string
  batchId?: string
  note?: string
  costMinor?: number
}

export const REASON_WORDS: Record<MoveReason, string> = {
  draw: 'Take',
  'top-up': 'Top up',
  waste: 'Write off',
  recount: 'Recount',
}
