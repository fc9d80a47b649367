import {
  FORGETTING_PER_MONTH,
  LAG_SPREAD,
  LOT_DEGRADED_RANGE,
  LOT_HEALTHY_BETA,
  LOT_PARTS,
  NOT_THE_YEAST,
  SLOW_AFTER_HOURS,
  USUAL_CELLS_PER_ML,
  WATCHED_HOURS,
} from './judgement.ts'
import { lagOf } from './lag.ts'
import { OutOfRange, oneOf, within } from './range.ts'

export const PITCH_OUTCOMES = ['started', 'slow', 'none'] as const
export type PitchOutcome = (typeof PITCH_OUTCOMES)[number]

/** What was thought of a lot before anyone pitched it. All optional; left out, a lot of unknown past. */
export interface LotPrior {
  /** Weights of the three parts; they are made to add up to 1. */
  healthy?: number
  degraded?: number
  dead?: number
  /** Shape of the healthy part, a Beta. */
  alpha?: number
  beta?: number
  /** Or its middle and band, as `packetViability` gives them. */
  estimate?: number
  low?: number
  high?: number
  /** Months since the outcomes were seen: belief drifts back towards the prior. */
  monthsSince?: number
}

/** What became of one pitch. */
export interface LotOutcome {
  outcome: PitchOutcome
  /** When it started, or how long it was watched in vain. */
  hoursToActivity?: number | null
  /** Cells pitched per mL, alive or not; 5e6 unless said. */
  cellsPerMl?: number
}

export interface LotBelief {
  mean: number
  low: number
  high: number
  /** Probability that the lot is dead. */
  dead: number
  /** Viability and its probability; the first entry is the dead part. */
  grid: { viability: number; probability: number }[]
}

// Half the nodes spread evenly in the logarithm, so that a lot at 1 % is seen as clearly as one at 70 %; the other half evenly.
const NODES = 400
const nodes = new Float64Array(NODES)
const widths = new Float64Array(NODES)
const logs = new Float64Array(NODES)
{
  const logNodes = NODES / 2
  const split = 0.3
  const edges: number[] = []
  for (let i = 0; i <= logNodes; i++) edges.push(1e-4 * (split / 1e-4) ** (i / logNodes))
  for (let i = 1; i <= NODES - logNodes; i++) edges.push(split + ((1 - split) * i) / (NODES - logNodes))
  for (let i = 0; i < NODES; i++) {
    const from = edges[i] ?? 0
    const to = edges[i + 1] ?? 1
    nodes[i] = (from + to) / 2
    widths[i] = to - from
    logs[i] = Math.log(nodes[i] ?? 1)
  }
}

/** Abramowitz and Stegun 7.1.26, good to 1.5e-7. */
function normalBelow(z: number): number {
  const t = 1 / (1 + 0.3275911 * (Math.abs(z) / Math.SQRT2))
  const poly =
    t * (0.254829592 + t * (-0.284496736 + t * (1.421413741 + t * (-1.453152027 + t * 1.061405429))))
  const half = 0.5 * poly * Math.exp((-z * z) / 2)
  return z > 0 ? 1 - half : half
}

const density = (z: number): number => Math.exp((-z * z) / 2)

/** Likelihood of an outcome for a viability; `alive` is 0 for a dead lot. */
function likelihood(outcome: LotOutcome, viability: number): number {
  const hours = outcome.hoursToActivity ?? undefined
  const cells = outcome.cellsPerMl ?? USUAL_CELLS_PER_ML
  const alive = viability > 0
  const z = (at: number): number => (Math.log(at) - Math.log(lagOf(cells, viability))) / LAG_SPREAD
  // A dead lot never starts of itself; what did start then was wild yeast, rare and at any time.
  switch (outcome.outcome) {
    case 'started':
      if (!alive) return 1e-6
      return (
        (1 - NOT_THE_YEAST) * (hours === undefined ? normalBelow(z(SLOW_AFTER_HOURS * 2)) : density(z(hours)))
      )
    case 'slow':
      if (!alive) return 1e-6
      if (hours !== undefined) return (1 - NOT_THE_YEAST) * density(z(hours))
      return (
        (1 - NOT_THE_YEAST) *
        Math.max(1e-9, normalBelow(z(4 * WATCHED_HOURS)) - normalBelow(z(SLOW_AFTER_HOURS)))
      )
    case 'none':
      if (!alive) return 1
      return NOT_THE_YEAST + (1 - NOT_THE_YEAST) * (1 - normalBelow(z(hours ?? WATCHED_HOURS)))
  }
}

/** Beta with a given middle, and a spread from a band of about 80 %. */
function shape(prior: LotPrior): { alpha: number; beta: number } {
  if (prior.alpha !== undefined || prior.beta !== undefined) {
    return {
      alpha: within('alpha', prior.alpha ?? LOT_HEALTHY_BETA.alpha, 0.1, 1000),
      beta: within('beta', prior.beta ?? LOT_HEALTHY_BETA.beta, 0.1, 1000),
    }
  }
  if (prior.estimate === undefined) return LOT_HEALTHY_BETA
  const middle = Math.min(0.985, Math.max(0.015, within('estimate', prior.estimate, 0, 1)))
  const low = within('low', prior.low ?? middle - 0.2, -1, 1)
  const high = within('high', prior.high ?? middle + 0.2, 0, 2)
  const sd = Math.max(0.02, (high - low) / 2.5632)
  const strength = Math.min(200, Math.max(1.5, (middle * (1 - middle)) / (sd * sd) - 1))
  return { alpha: middle * strength, beta: (1 - middle) * strength }
}

function priorWeights(prior: LotPrior): { grid: Float64Array; dead: number } {
  const healthy = within('healthy', prior.healthy ?? LOT_PARTS.healthy, 0, 1)
  const degraded = within('degraded', prior.degraded ?? LOT_PARTS.degraded, 0, 1)
  const dead = within('dead', prior.dead ?? LOT_PARTS.dead, 0, 1)
  const all = healthy + degraded + dead
  if (all <= 0) throw new OutOfRange('healthy', healthy, 0, 1, 'the three parts cannot all be 0')
  const { alpha, beta } = shape(prior)
  const grid = new Float64Array(NODES)
  let betaSum = 0
  let logSum = 0
  for (let i = 0; i < NODES; i++) {
    const v = nodes[i] ?? 0
    const w = widths[i] ?? 0
    grid[i] = w * Math.exp((alpha - 1) * (logs[i] ?? 0) + (beta - 1) * Math.log1p(-v))
    betaSum += grid[i] ?? 0
    if (v <= LOT_DEGRADED_RANGE.high) logSum += w / v
  }
  for (let i = 0; i < NODES; i++) {
    const v = nodes[i] ?? 0
    const flat = v <= LOT_DEGRADED_RANGE.high ? (widths[i] ?? 0) / v / logSum : 0
    grid[i] = (healthy * (grid[i] ?? 0)) / betaSum / all + (degraded * flat) / all
  }
  return { grid, dead: dead / all }
}

function checkOutcome(outcome: LotOutcome, index: number): void {
  oneOf(`outcomes[${index}].outcome`, outcome.outcome, PITCH_OUTCOMES)
  within(`outcomes[${index}].hoursToActivity`, outcome.hoursToActivity ?? 24, 0.5, 1000)
  within(`outcomes[${index}].cellsPerMl`, outcome.cellsPerMl ?? USUAL_CELLS_PER_ML, 1e3, 1e9)
}

/**
 * What to think of a lot once some of its packets have been pitched.
 *
 * The belief is a grid over viability with three parts: healthy, degraded and dead. Without the dead part, "it never
 * started" would teach nothing. A start is weighed by how near it came to the lag expected; a failure leaves 2 % to
 * causes that are not the yeast.
 *
 * @param prior weights (0 to 1), the healthy part's shape or a `packetViability`, and months since
 * @param outcomes each `{ outcome, hoursToActivity?, cellsPerMl? }`: 0.5 to 1000 h, 1e3 to 1e9 cells/mL
 * @returns mean viability with a band of about 80 %, probability that the lot is dead, and the grid
 * @throws RangeError outside those ranges
 * Source: Bayes on the lag model of `hoursToActivity`. From the default prior, one that never started within 72 h gives
 * P(dead) 0.56 and mean 0.25; one that started at 24 h gives mean 0.35.
 */
export function lotBelief(prior: LotPrior, outcomes: readonly LotOutcome[]): LotBelief {
  outcomes.forEach(checkOutcome)
  const before = priorWeights(prior)
  const months = within('monthsSince', prior.monthsSince ?? 0, 0, 240)
  const after = Float64Array.from(before.grid)
  let dead = before.dead
  for (const outcome of outcomes) {
    let sum = 0
    for (let i = 0; i < NODES; i++) {
      after[i] = (after[i] ?? 0) * likelihood(outcome, nodes[i] ?? 0)
      sum += after[i] ?? 0
    }
    dead *= likelihood(outcome, 0)
    sum += dead
    // Rescaled each time: forty failures in a row would otherwise run to zero.
    for (let i = 0; i < NODES; i++) after[i] = (after[i] ?? 0) / sum
    dead /= sum
  }
  const kept = (1 - FORGETTING_PER_MONTH) ** months
  for (let i = 0; i < NODES; i++) after[i] = kept * (after[i] ?? 0) + (1 - kept) * (before.grid[i] ?? 0)
  return summary(after, kept * dead + (1 - kept) * before.dead)
}

function summary(weights: Float64Array, dead: number): LotBelief {
  let mean = 0
  let passed = dead
  let low = dead >= 0.1 ? 0 : -1
  let high = dead >= 0.9 ? 0 : -1
  const grid: LotBelief['grid'] = [{ viability: 0, probability: dead }]
  for (let i = 0; i < NODES; i++) {
    const viability = nodes[i] ?? 0
    const probability = weights[i] ?? 0
    mean += viability * probability
    passed += probability
    if (low < 0 && passed >= 0.1) low = viability
    if (high < 0 && passed >= 0.9) high = viability
    grid.push({ viability, probability })
  }
  if (high < 0) high = 1
  return { mean, low: Math.min(low, mean), high: Math.max(high, mean), dead, grid }
}
