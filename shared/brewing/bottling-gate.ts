import { CO2_YIELD, GRAMS_PER_VOLUME, bottlePressureBar, residualCo2Volumes } from './carbonation.ts'
import {
  BELOW_FLOOR_SG,
  BOTTLE_LIMIT_BAR_30C,
  BOTTLE_LIMIT_VOLUMES,
  COLD_BEER_C,
  COLD_REST_C,
  DRY_FLOOR_SG,
  FRESH_READING_DAYS,
  NEAR_EXPECTED_SG,
  QUIET_BUBBLES_PER_MINUTE,
  STABLE_CHANGE_SG,
  STABLE_DAYS,
  STILL_TOLERANCE_VOLUMES,
  WARM_STORE_C,
} from './judgement.ts'
import { oneOf, within } from './range.ts'
import { CO2_GRAMS_PER_LITRE_POINT } from './room.ts'
import { dayNumber, dayOfNumber, instantDays } from './span.ts'
import { fermentableFloor } from './strength.ts'
import { BOTTLES, PRIMERS, type Bottle, type GravityReading, type Primer } from './vocabulary.ts'

export const GATE_BLOCKS = [
  'too-few-readings',
  'not-long-enough',
  'still-falling',
  'readings-disagree',
  'above-expected',
  'below-floor',
  'cold-rest',
  'pressure',
] as const
export type GateBlockCode = (typeof GATE_BLOCKS)[number]

export interface GateBlock {
  code: GateBlockCode
  /** What is so. */
  fact: string
  /** Why that matters, and what to do. */
  why: string
}

export interface BottlingGateInput {
  readings: readonly GravityReading[]
  expectedFg: number
  bottle: Bottle
  primer: { kind: Primer; gramsPerLitre: number } | { kind: 'none' }
  on: string
  /** Original gravity: with it, the floor of the sum is known better. */
  og?: number
  /** The warmest it has been since it finished; the warmest reading unless said. */
  warmestC?: number
  /** Where it fermented: a batch far colder than that may only be resting. */
  fermentationTemperatureC?: number
  /** Sugar added for sweetness, as sucrose: all of it can ferment in the bottle. */
  sweeteningGramsPerLitre?: number
  /** Whether it was dosed against a new start. It changes no number here: sorbate stops no ferment under way. */
  stabilised?: boolean
  bubblesPerMinute?: number
  headspaceFraction?: number
}

export interface BottlingGate {
  ready: boolean
  blocks: GateBlock[]
  cautions: string[]
  /** CO2 if all that can ferment does. */
  worstCaseVolumes: number
  worstCaseBarAt30C: number
  /** Points of gravity the worst case counts as still to come. */
  pointsToCome: number
  /** Most volumes this bottle is trusted with. */
  limitVolumes: number
  /** First day on which the readings could be long enough, where that is what is missing. */
  earliestOn: string | undefined
}

interface Seen {
  day: number
  gravity: number
  temperatureC: number | undefined
}

const EPSILON = 1e-9
const points = (sg: number): string => (sg * 1000).toFixed(1).replace(/\.0$/, '')

function sorted(input: BottlingGateInput, endOfDay: number): Seen[] {
  return input.readings
    .map((reading, index) => ({
      day: instantDays(`readings[${index}].at`, reading.at),
      gravity: within(`readings[${index}].gravity`, reading.gravity, 0.96, 1.2),
      temperatureC:
        reading.temperatureC === undefined
          ? undefined
          : within(`readings[${index}].temperatureC`, reading.temperatureC, -5, 60),
    }))
    .filter((reading) => reading.day < endOfDay)
    .sort((a, b) => a.day - b.day)
}

/** Readings of the last stretch that is at least seven days long, if there is one. */
function lastStretch(seen: readonly Seen[]): Seen[] {
  const last = seen[seen.length - 1]
  if (!last) return []
  const start = seen.findLastIndex((reading) => reading.day <= last.day - STABLE_DAYS + 1 / 24)
  return start < 0 ? [] : seen.slice(start)
}

/**
 * Whether a batch can go into bottles, and if not, why not.
 *
 * It is ready when its corrected gravity has changed by no more than 1 point over at least 7 days, stands within 3
 * points of the gravity expected, and the bottle holds the worst case: the gas in it, that of the priming sugar, and
 * that of every point still to ferment. Bubbles never count.
 *
 * @param readings corrected, `{ at, gravity (0.960–1.200), temperatureC? }`; those after `on` are left out
 * @param expectedFg 0.970 to 1.100
 * @param bottle `beer`, `sparkling`, `still-wine`, `swing-top` or `pet`
 * @param primer `{ kind, gramsPerLitre (0–60) }` or `{ kind: 'none' }`
 * @param on the day that is asked about
 * @param og warmestC fermentationTemperatureC sweeteningGramsPerLitre stabilised bubblesPerMinute headspaceFraction
 * narrow the answer where they are known
 * @returns blocks with their reasons, cautions, and the worst case in volumes and in bar at 30 °C
 * @throws RangeError outside those ranges
 * Source: 0.5 volumes a point (Balling over the density balance), Weiss 1974; limits are judgement, with reasons there.
 */
export function bottlingGate(input: BottlingGateInput): BottlingGate {
  const bottle = oneOf('bottle', input.bottle, BOTTLES)
  const expectedFg = within('expectedFg', input.expectedFg, 0.97, 1.1)
  const today = dayNumber('on', input.on)
  const seen = sorted(input, today + 1)
  const last = seen[seen.length - 1]
  const stretch = lastStretch(seen)
  const blocks: GateBlock[] = [
    ...stabilityBlocks(seen, stretch),
    ...gravityBlocks(last, expectedFg, input.og),
    ...coldBlocks(stretch, bottle, input.fermentationTemperatureC),
  ]
  const stable = blocks.every((block) => block.code === 'above-expected')
  const pointsToCome = toCome(last, expectedFg, stable, input.og)
  const warmest = warmestOf(input, seen)
  const worstCaseVolumes =
    residualCo2Volumes(warmest) + (added(input) + pointsToCome * CO2_GRAMS_PER_LITRE_POINT) / GRAMS_PER_VOLUME
  const worstCaseBarAt30C = bottlePressureBar({
    co2Volumes: Math.min(50, worstCaseVolumes),
    temperatureC: WARM_STORE_C,
    headspaceFraction: input.headspaceFraction,
  })
  const pressure = pressureBlock(bottle, worstCaseVolumes, worstCaseBarAt30C, residualCo2Volumes(warmest))
  if (pressure) blocks.push(pressure)
  return {
    ready: blocks.length === 0,
    blocks,
    cautions: cautions(input, seen, today, bottle),
    worstCaseVolumes,
    worstCaseBarAt30C,
    pointsToCome,
    limitVolumes: limitOf(bottle, residualCo2Volumes(warmest)),
    earliestOn: earliest(seen, stretch, today),
  }
}

function stabilityBlocks(seen: readonly Seen[], stretch: readonly Seen[]): GateBlock[] {
  if (seen.length < 2) {
    return [
      {
        code: 'too-few-readings',
        fact: seen.length === 0 ? 'No gravity has been read' : 'Only one gravity has been read',
        why: 'Two readings at least 7 days apart show that it has stopped. Bubbles do not.',
      },
    ]
  }
  const last = seen[seen.length - 1] as Seen
  if (stretch.length === 0) {
    const first = seen[0] as Seen
    const fell = first.gravity - last.gravity
    if (fell > STABLE_CHANGE_SG + EPSILON) return [falling(fell, last.day - first.day)]
    return [
      {
        code: 'not-long-enough',
        fact: `The readings span ${Math.floor(last.day - first.day)} days`,
        why: 'A slow ferment and a finished one look alike for less than 7 days. Read it again later.',
      },
    ]
  }
  const values = stretch.map((reading) => reading.gravity)
  const highest = Math.max(...values)
  const lowest = Math.min(...values)
  if (highest - lowest <= STABLE_CHANGE_SG + EPSILON) return []
  const first = stretch[0] as Seen
  if (first.gravity - last.gravity > STABLE_CHANGE_SG / 2) {
    return [falling(first.gravity - last.gravity, last.day - first.day)]
  }
  return [
    {
      code: 'readings-disagree',
      fact: `The last readings differ by ${points(highest - lowest)} points`,
      why: 'Gravity does not rise again by itself. Degas the sample, check the hydrometer in water, and read again.',
    },
  ]
}

function falling(fell: number, days: number): GateBlock {
  return {
    code: 'still-falling',
    fact: `It fell ${points(fell)} points in ${Math.max(1, Math.round(days))} days`,
    why: 'Each point that goes on in the bottle adds half a volume of gas. Wait for 7 days within 1 point.',
  }
}

function gravityBlocks(last: Seen | undefined, expectedFg: number, og: number | undefined): GateBlock[] {
  if (!last) return []
  const floor = (og === undefined ? DRY_FLOOR_SG - 0.01 : fermentableFloor(og)) - BELOW_FLOOR_SG
  if (last.gravity < floor) {
    return [
      {
        code: 'below-floor',
        fact: `${last.gravity.toFixed(3)} is lower than this drink can go`,
        why: 'The reading or the original gravity is wrong, so nothing can be said about what is left. Check both.',
      },
    ]
  }
  if (last.gravity > expectedFg + NEAR_EXPECTED_SG + EPSILON) {
    return [
      {
        code: 'above-expected',
        fact: `It stands ${points(last.gravity - expectedFg)} points above what was expected`,
        why: 'A stuck ferment can start again in the bottle. Find out why it stopped, or correct what you expect.',
      },
    ]
  }
  return []
}

/** A batch that was chilled is no witness of its own end. */
function coldBlocks(stretch: readonly Seen[], bottle: Bottle, fermentedAtC: number | undefined): GateBlock[] {
  const known = stretch.flatMap((reading) => reading.temperatureC ?? [])
  if (known.length === 0) return []
  const warmest = Math.max(...known)
  const least =
    fermentedAtC === undefined
      ? COLD_BEER_C - COLD_REST_C
      : within('fermentationTemperatureC', fermentedAtC, 0, 40) - COLD_REST_C
  if (warmest >= least) return []
  return [
    {
      code: 'cold-rest',
      fact: `It has stood at ${warmest.toFixed(0)} °C or colder since`,
      why: `Cold stops yeast without finishing the sugar. Warm it for a week before you fill ${bottle === 'pet' ? 'bottles' : 'glass'}.`,
    },
  ]
}

/** Points that may still ferment. Where the end is not proven, it is taken as far as drinks go. */
function toCome(last: Seen | undefined, expectedFg: number, stable: boolean, og: number | undefined): number {
  const from = last?.gravity ?? og
  if (from === undefined) return 0
  const floor = og === undefined ? DRY_FLOOR_SG : fermentableFloor(og)
  const end = stable || from > expectedFg + STABLE_CHANGE_SG ? expectedFg : Math.min(expectedFg, floor)
  return Math.max(0, from - end) * 1000
}

function added(input: BottlingGateInput): number {
  const sweet =
    within('sweeteningGramsPerLitre', input.sweeteningGramsPerLitre ?? 0, 0, 300) * CO2_YIELD.sucrose
  if (input.primer.kind === 'none') return sweet
  const kind = oneOf('primer.kind', input.primer.kind, PRIMERS)
  return sweet + within('primer.gramsPerLitre', input.primer.gramsPerLitre, 0, 60) * CO2_YIELD[kind]
}

function warmestOf(input: BottlingGateInput, seen: readonly Seen[]): number {
  if (input.warmestC !== undefined) return within('warmestC', input.warmestC, 0, 40)
  const known = seen.slice(-6).flatMap((reading) => reading.temperatureC ?? [])
  return known.length === 0 ? 20 : Math.min(40, Math.max(0, ...known))
}

function limitOf(bottle: Bottle, residual: number): number {
  const limit = BOTTLE_LIMIT_VOLUMES[bottle]
  return limit === 0 ? residual + STILL_TOLERANCE_VOLUMES : limit
}

function pressureBlock(
  bottle: Bottle,
  volumes: number,
  bar: number,
  residual: number,
): GateBlock | undefined {
  const limit = limitOf(bottle, residual)
  if (volumes <= limit + EPSILON && bar <= BOTTLE_LIMIT_BAR_30C[bottle] + EPSILON) return undefined
  const still = BOTTLE_LIMIT_VOLUMES[bottle] === 0
  return {
    code: 'pressure',
    fact: `At worst ${volumes.toFixed(1)} volumes, ${bar.toFixed(1)} bar in a warm store`,
    why: still
      ? 'This glass has no known strength. It takes a drink with nothing left to ferment, and no priming.'
      : `This bottle is trusted with ${limit.toFixed(1)} volumes. Prime less, wait, or use a stronger bottle.`,
  }
}

function cautions(input: BottlingGateInput, seen: readonly Seen[], today: number, bottle: Bottle): string[] {
  const notes: string[] = []
  const last = seen[seen.length - 1]
  if (last && today - Math.floor(last.day) > FRESH_READING_DAYS) {
    notes.push('The last reading is over two weeks old. Read it once more on the day.')
  }
  if (
    input.bubblesPerMinute !== undefined &&
    within('bubblesPerMinute', input.bubblesPerMinute, 0, 600) > 0
  ) {
    notes.push(
      input.bubblesPerMinute < QUIET_BUBBLES_PER_MINUTE
        ? 'Under one bubble a minute is a sign to rack and clear, never to bottle.'
        : 'It still bubbles. That alone proves nothing, but look again.',
    )
  }
  if ((input.sweeteningGramsPerLitre ?? 0) > 0) {
    notes.push(
      input.stabilised === true
        ? 'Sorbate stops yeast from multiplying, not a ferment under way, and it needs sulphite beside it.'
        : 'Sugar added for sweetness ferments in the bottle unless the drink is stabilised.',
    )
  }
  if (input.stabilised === true && input.primer.kind !== 'none') {
    notes.push('A stabilised drink may never carbonate in the bottle.')
  }
  if (input.primer.kind !== 'none') {
    notes.push(
      'Keep the bottles warm, about two weeks, in a box with a lid, and chill one before you open it.',
    )
  }
  if (bottle !== 'pet')
    notes.push('Leave out glass that is scratched, chipped or of unknown age, and wear goggles.')
  return notes
}

function earliest(seen: readonly Seen[], stretch: readonly Seen[], today: number): string | undefined {
  const last = seen[seen.length - 1]
  if (!last) return dayOfNumber(today + STABLE_DAYS)
  if (stretch.length > 0 && stabilityBlocks(seen, stretch).length === 0) return undefined
  // The first of the readings that already agree with the last one starts the week.
  let start = last.day
  for (let i = seen.length - 1; i >= 0; i--) {
    const reading = seen[i] as Seen
    if (Math.abs(reading.gravity - last.gravity) > STABLE_CHANGE_SG + EPSILON) break
    start = reading.day
  }
  return dayOfNumber(Math.max(today, Math.floor(start) + STABLE_DAYS))
}
