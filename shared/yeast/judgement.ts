import type { DrinkUse, YeastForm } from '../brewing/vocabulary.ts'

/** What is judgement and not science in the fridge, each with its reason. The model of age and pitching is in `brewing/`. */

/** Said when nobody names a batch: one demijohn. */
export const USUAL_VOLUME_LITRES = 4.5
/** And a must of middling strength for what the yeast is meant for. Common practice. */
export const USUAL_OG: Record<DrinkUse, number> = {
  wine: 1.085,
  mead: 1.09,
  cider: 1.05,
  ale: 1.048,
  lager: 1.048,
  other: 1.06,
}

/** From how many days ahead a best-before day is said to be near: time to use it up, by form. */
export const NEAR_DAYS: Record<YeastForm, number> = { dry: 30, liquid: 14, slurry: 7 }

/**
 * A report counts as if no more than this was pitched: members look in a few times a day, so that a big pitch is seen to
 * start later than it does.
 */
export const MOST_CELLS_COUNTED_PER_ML = 5e6
/** Of dry yeast sprinkled straight into the must, less comes to life: cold water costs up to 60 %. Weak, a maker's word. */
export const SPRINKLED_YIELD = 0.6
/** Yeast is about twice as slow for each 10 °C it is colder. From memory; holds between these. */
export const SLOWER_PER_TEN_DEGREES = 2
export const MUST_RANGE_C = { low: 8, high: 30, usual: 20 } as const
/** "It never started" without hours: watched for this long at least. */
export const GIVEN_UP_HOURS = 72

/** A lot that failed keeps a mark, whatever started after: nine in ten packets are taken to start, and each report counts. */
export const STARTS_BELIEVED = { yes: 9, no: 1 } as const
/** Reports narrow the storage band to no less than this share of it (of its logarithm): packets of a lot still differ. */
export const NARROWEST_BAND = 0.5
/** Failures that flag a lot: one has many causes, two point at the lot. */
export const FAILURES_TO_FLAG = 2
/** A change under this share is not worth a word. */
export const NOTABLE_SHARE = 0.02

/** Hotter must than this kills yeast before it wakes. Common practice. */
export const TOO_HOT_FOR_YEAST_C = 35

/**
 * The proving test: a little of the packet in warm, sweet water, and minutes until it foams. Common practice, from memory.
 */
export const PROVING = {
  yeastGrams: 1,
  waterMl: 50,
  sugarGrams: 2,
  lowC: 35,
  highC: 40,
  soundMinutes: 15,
  lastMinutes: 30,
} as const

/** Up to how many other packets are named beside one that is in doubt. */
export const MOST_ALTERNATIVES = 4
/** Hour of the day a pitch is taken to happen when only a day is known. */
export const USUAL_PITCH_HOUR = 12
