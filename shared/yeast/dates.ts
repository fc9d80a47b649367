import type { YeastForm } from '../brewing/vocabulary.ts'
import { type CalendarDay, daysBetween } from '../time/day.ts'
import { NEAR_DAYS } from './judgement.ts'
import type { DateState } from './vocabulary.ts'

/**
 * How a packet stands to its best-before day: `near` in the last 30 days of dry yeast, 14 of liquid; `past` from the day
 * after. Undefined for what has no such day.
 */
export function dateState(
  packet: { form: YeastForm; bestBefore: CalendarDay | null },
  on: CalendarDay,
): DateState | undefined {
  if (!packet.bestBefore) return undefined
  const days = daysBetween(on, packet.bestBefore)
  if (days < 0) return 'past'
  return days <= NEAR_DAYS[packet.form] ? 'near' : 'ahead'
}

interface DatedPacket {
  form: YeastForm
  madeOn: CalendarDay | null
  bestBefore: CalendarDay | null
  openedOn: CalendarDay | null
}

/** What is wrong with a packet's days, one message a field; nothing when they agree. */
export function dateFaults(packet: DatedPacket, today: CalendarDay): { path: string; message: string }[] {
  const { form, madeOn, bestBefore, openedOn } = packet
  const faults: { path: string; message: string }[] = []
  const add = (path: string, message: string) => void faults.push({ path, message })
  if (!madeOn && !bestBefore)
    add(
      form === 'slurry' ? 'madeOn' : 'bestBefore',
      form === 'slurry'
        ? 'Give the day it was harvested.'
        : 'Give the best-before day, or the day it was made.',
    )
  if (madeOn && madeOn > today) add('madeOn', 'It cannot have been made after today.')
  if (madeOn && bestBefore && bestBefore < madeOn)
    add('bestBefore', 'The best-before day is before the day it was made.')
  if (openedOn && openedOn > today) add('openedOn', 'It cannot have been opened after today.')
  if (openedOn && madeOn && openedOn < madeOn) add('openedOn', 'It was opened before it was made.')
  return faults
}
