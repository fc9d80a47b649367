import type { CalendarDay } from '#shared/time/day'

/** What a packet is asked about: a batch of one's own, or a volume and a gravity, on a day. */
export interface YeastQuestion {
  batchId: string | undefined
  volumeLitres: number
  og: number
  on: CalendarDay
}
