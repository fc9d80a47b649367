import {
  bottleCount,
  bottlePressureBar,
  bottlingGate,
  primingGrams,
  residualCo2Volumes,
  tabletsPerBottle,
  type BottlingGate,
  type Primer,
} from '../brewing/index.ts'
import type { BatchReading } from './standing.ts'
import type { BatchPrimer, BottleKind } from './vocabulary.ts'

export interface BottlingWish {
  bottleKind: BottleKind
  bottleMl: number
  /** Null: bottled still. */
  targetVolumesCo2: number | null
  primer: BatchPrimer
  /** Mass of one priming tablet, from its pack. */
  tabletGrams: number
}

export interface BottlingFacts {
  readings: readonly BatchReading[]
  og: number | undefined
  expectedFg: number
  volumeLitres: number
  /** How often it was racked: each costs a little. */
  rackings: number
  fruit: boolean
  on: string
}

export interface BottlingPlan {
  gate: BottlingGate
  bottles: number
  leftLitres: number
  /** Null where nothing is added. */
  priming: {
    primer: Exclude<BatchPrimer, 'none'>
    grams: number
    low: number
    high: number
    gramsPerLitre: number
    /** Tablets in each bottle; null for sugar. */
    tablets: number | null
    reasons: string[]
  } | null
  /** The warmest it has been since it finished, as far as the readings know. */
  warmestC: number
  /** CO2 if only the priming ferments, and its pressure in a cellar and on a hot day. */
  volumes: number
  barInCellar: number
  barOnHotDay: number
}

/** A cool cellar, and a hot day in a shed or a car. */
export const CELLAR_C = 12
export const HOT_DAY_C = 30
/** Left behind at each racking: firm lees, or pulp (common practice). */
const LOSS = { lees: 0.03, pulp: 0.07 }
/** Without a single temperature, a room. */
const ROOM_C = 20

/** Everything the bottling page shows: whether it may be bottled, what to add, how many bottles, how hard they press. */
export function bottlingPlan(facts: BottlingFacts, wish: BottlingWish): BottlingPlan {
  const warmestC = warmestSince(facts.readings)
  const count = expectedBottles(facts, wish.bottleMl)
  const litres = Math.max(0.001, facts.volumeLitres * (1 - lossOf(facts)) ** facts.rackings)
  const priming = primingOf(wish, litres, warmestC)
  const added = priming ? { kind: sugarOf(priming.primer), gramsPerLitre: priming.gramsPerLitre } : undefined
  const volumes = Math.max(residualCo2Volumes(warmestC), priming ? priming.volumes : 0)
  return {
    gate: bottlingGate({
      readings: facts.readings,
      expectedFg: facts.expectedFg,
      bottle: wish.bottleKind,
      primer: added ?? { kind: 'none' },
      on: facts.on,
      ...(facts.og !== undefined && { og: facts.og }),
      warmestC,
    }),
    bottles: count.bottles,
    leftLitres: count.leftLitres,
    priming: priming && {
      primer: priming.primer,
      grams: priming.grams,
      low: priming.low,
      high: priming.high,
      gramsPerLitre: priming.gramsPerLitre,
      tablets: priming.tablets,
      reasons: priming.reasons,
    },
    warmestC,
    volumes,
    barInCellar: bottlePressureBar({ co2Volumes: volumes, temperatureC: CELLAR_C }),
    barOnHotDay: bottlePressureBar({ co2Volumes: volumes, temperatureC: HOT_DAY_C }),
  }
}

/** Whole bottles to count on: for closures, and for a plan made before there is anything to bottle. */
export function expectedBottles(
  facts: Pick<BottlingFacts, 'volumeLitres' | 'rackings' | 'fruit'>,
  bottleMl: number,
) {
  return bottleCount({
    volumeLitres: facts.volumeLitres,
    rackings: Math.min(10, facts.rackings),
    lossFraction: lossOf(facts),
    bottleMl,
  })
}

const lossOf = ({ fruit }: { fruit: boolean }) => (fruit ? LOSS.pulp : LOSS.lees)

/** Of the last six readings: gas lost when it was warm does not come back. */
function warmestSince(readings: readonly BatchReading[]): number {
  const recent = [...readings]
    .sort((a, b) => (a.at < b.at ? -1 : 1))
    .slice(-6)
    .flatMap((reading) => reading.temperatureC ?? [])
  return recent.length === 0 ? ROOM_C : Math.min(40, Math.max(0, ...recent))
}

function primingOf(wish: BottlingWish, litres: number, temperatureC: number) {
  if (wish.targetVolumesCo2 === null || wish.primer === 'none') return null
  const targetVolumes = Math.min(5, wish.targetVolumesCo2)
  if (wish.primer === 'tablets') {
    const bottleMl = Math.min(5000, wish.bottleMl)
    const dose = tabletsPerBottle({ bottleMl, tabletGrams: wish.tabletGrams, targetVolumes, temperatureC })
    const gramsPerLitre = dose.gramsPerBottle / (bottleMl / 1000)
    const grams = gramsPerLitre * litres
    return {
      primer: wish.primer,
      grams,
      low: grams,
      high: grams,
      gramsPerLitre,
      tablets: dose.count,
      volumes: dose.volumes,
      reasons: dose.reasons,
    }
  }
  const dose = primingGrams({ volumeLitres: litres, targetVolumes, temperatureC, primer: wish.primer })
  return { ...dose, primer: wish.primer, tablets: null, volumes: targetVolumes }
}

/** Tablets are pressed table sugar. */
const sugarOf = (primer: Exclude<BatchPrimer, 'none'>): Primer => (primer === 'tablets' ? 'sucrose' : primer)
