import type { CalendarDay } from '#shared/time/day'
import { longDay } from './days.ts'
import type { Draft } from './letter.ts'

export interface DigestFacts {
  on: CalendarDay
  /** Only what is there: `['To approve', 3]`. Never all zero. */
  counts: [what: string, count: number][]
}

export const stewardDigest = ({ on, counts }: DigestFacts): Draft => ({
  subject: `The desk, ${longDay(on)}: ${counts.reduce((sum, [, count]) => sum + count, 0)} waiting`,
  paragraphs: ['This is waiting for a steward today.'],
  facts: counts.map(([what, count]) => [what, String(count)]),
  act: { label: 'Open the desk', path: '/desk' },
})
