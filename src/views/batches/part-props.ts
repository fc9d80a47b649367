import type { Batch } from '#shared/batches/contract'
import type { CalendarDay } from '#shared/time/day'
import type { useBatch } from '@/composables/useBatch'

/** What every part of the batch page is given. */
export interface PartProps {
  book: ReturnType<typeof useBatch>
  batch: Batch
  today: CalendarDay
  timeZone: string
}
