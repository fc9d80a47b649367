import type { ReturnCondition } from '#shared/loans/vocabulary'

/** What a steward says of an item that comes back. */
export interface CheckIn {
  condition: ReturnCondition
  hygiene: 'clean' | 'dirty'
  wild: boolean
  note?: string
  photos: File[]
}
