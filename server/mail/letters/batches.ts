import type { CalendarDay } from '#shared/time/day'
import { longDay } from './days.ts'
import type { Draft } from './letter.ts'

export interface BatchFacts {
  batchId: string
  batchName: string
}

export const batchStepDue = (step: BatchFacts & { stepName: string; on: CalendarDay }): Draft => ({
  subject: `${step.batchName}: ${step.stepName}, ${longDay(step.on)}`,
  paragraphs: [
    `${step.batchName} has a step planned for ${longDay(step.on)}: ${step.stepName}.`,
    'Done already, or not yet ready? Say so on the batch page and the later steps move with it.',
  ],
  act: { label: 'Open the batch', path: `/batches/${step.batchId}` },
})

export const batchOutlastsLoan = (
  facts: BatchFacts & {
    kindName: string
    to: CalendarDay
    likelyOn: CalendarDay
    keepTo: CalendarDay
    /** Keeping it until then delays nobody and is within the limits. */
    atOnce: boolean
  },
): Draft => ({
  subject: `${facts.batchName} looks slower than its loan`,
  paragraphs: [
    `By its readings, ${facts.batchName} is likely done about ${longDay(facts.likelyOn)}. ` +
      `The ${facts.kindName} it is in is due back on ${longDay(facts.to)}.`,
    facts.atOnce
      ? `You can keep it until ${longDay(facts.keepTo)}: ask on the batch page and it is yours at once.`
      : `Ask to keep it until ${longDay(facts.keepTo)}. Someone else may need it, so a steward decides; the sooner you ask, the better.`,
  ],
  act: { label: 'Ask for more days', path: `/batches/${facts.batchId}` },
})
