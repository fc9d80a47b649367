import type { YeastForm } from '../brewing/vocabulary.ts'
import { addDays, type CalendarDay } from '../time/day.ts'
import { instantOn, type Instant } from '../time/instant.ts'
import { REMINDER_HOUR } from '../notices/vocabulary.ts'
import { NEAR_DAYS } from './judgement.ts'

/**
 * Whether a packet's owner is owed word, on a reminder day, that it nears its best-before: from 30 days ahead for dry
 * yeast (14 liquid, 7 slurry) to the day itself. Who put it in when it was near already knows.
 */
export function nearDateOwed(
  packet: { form: YeastForm; bestBefore: CalendarDay; addedOn: CalendarDay },
  on: CalendarDay,
): boolean {
  const nearOn = addDays(packet.bestBefore, -NEAR_DAYS[packet.form])
  return packet.addedOn < nearOn && nearOn <= on && on <= packet.bestBefore
}

/** How long after its time a pitch is still asked about: after downtime the news is old. */
const ASKED_FOR_DAYS = 7

/**
 * Whether it is time, on a reminder day, to ask how a pitch went: the first morning after the hours it should take. A pitch
 * due at 22:00 is asked about at 09:00.
 */
export function outcomeAsked(wantedAt: Instant, on: CalendarDay, zone: string): boolean {
  const morning = (day: CalendarDay) => instantOn(day, REMINDER_HOUR, 0, zone)
  return wantedAt <= morning(on) && wantedAt > morning(addDays(on, -ASKED_FOR_DAYS))
}
