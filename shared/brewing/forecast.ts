import {
  fitNodes,
  gravityAt,
  MOST_POINTS,
  placeOf,
  type Expectation,
  type Node,
  type Point,
} from './ferment-grid.ts'
import {
  DONE_SG,
  FEWEST_READINGS,
  FINISH_STRETCH,
  DAY_SHARE,
  FIT_ERROR_SG,
  LAG_SHARE,
  NEAR_EXPECTED_SG,
  OUTLIER_ERRORS,
  SHORTEST_SPAN_DAYS,
  SLOWING_SHARE,
  STABLE_CHANGE_SG,
  STABLE_DAYS,
  STUCK_ABOVE_SG,
  STUCK_ODDS,
  STUCK_SPAN_DAYS,
  WIDEST_BAND_DAYS,
} from './judgement.ts'
import { OutOfRange, within } from './range.ts'
import { dayNumber, dayOfNumber, instantDays } from './span.ts'
import type { GravityReading } from './vocabulary.ts'

export const FERMENT_STATUSES = ['lag', 'active', 'slowing', 'finished', 'stuck', 'unknown'] as const
export type FermentStatus = (typeof FERMENT_STATUSES)[number]

export interface FermentForecast {
  status: FermentStatus
  /** Where it is expected to end; where it stands, if it is stuck. */
  finalGravity: number
  finalGravityBand: { low: number; high: number }
  /** Days on which it comes within a point of its end, as a band of about 80 %. Absent where nothing can be said. */
  finishOn: { early: string; likely: string; late: string } | undefined
  /** Gravity of the fitted curve at an instant. */
  curve: (at: string) => number
  /** The same as a band of about 80 % for the true gravity. */
  band: (at: string) => { low: number; high: number }
  /** Root mean square distance of the readings from the curve, SG. */
  residual: number
  reasons: string[]
}

export interface FermentInput {
  readings: readonly GravityReading[]
  og: number
  expectedFg: number
  on: string
  /** When yeast went in; the first reading unless said. */
  pitchedAt?: string
}

function pointsOf(input: FermentInput, start: number, until: number): Point[] {
  return input.readings
    .map((reading, index) => ({
      t: instantDays(`readings[${index}].at`, reading.at) - start,
      gravity: within(`readings[${index}].gravity`, reading.gravity, 0.96, 1.2),
      weight: 1,
    }))
    .filter((point) => point.t + start < until)
    .sort((a, b) => a.t - b.t)
    .slice(-MOST_POINTS)
}

/** Readings far off the curve are given less weight, so that one slip of the eye does not move the date. */
function reweigh(points: readonly Point[], best: Node): Point[] {
  return points.map((point) => {
    const errors = Math.abs(point.gravity - gravityAt(best, point.t)) / FIT_ERROR_SG
    return { ...point, weight: errors > OUTLIER_ERRORS ? (OUTLIER_ERRORS / errors) ** 2 : 1 }
  })
}

function fit(points: readonly Point[], expected: Expectation): { nodes: Node[]; points: readonly Point[] } {
  const first = fitNodes(points, expected)
  const weighed = reweigh(points, first[0] as Node)
  if (points.length < 5 || weighed.every((point) => point.weight === 1)) return { nodes: first, points }
  return { nodes: fitNodes(weighed, expected), points: weighed }
}

/** Value below which a share of the weight lies; values need no order. */
function quantile(pairs: readonly (readonly [value: number, weight: number])[], share: number): number {
  const ordered = [...pairs].sort((a, b) => a[0] - b[0])
  let passed = 0
  for (const [value, weight] of ordered) {
    passed += weight
    if (passed >= share) return value
  }
  return ordered[ordered.length - 1]?.[0] ?? Number.NaN
}

const finishOf = (node: Node): number => {
  const fall = node.og - node.fg
  if (fall <= 2 * DONE_SG) return 0
  return (placeOf(node.shape, DONE_SG / fall) + node.delay) / node.rate
}

function finishBand(nodes: readonly Node[]): { early: number; likely: number; late: number } {
  const pairs = nodes.map((node) => [finishOf(node), node.weight] as const)
  const likely = quantile(pairs, 0.5)
  return {
    early: likely - FINISH_STRETCH.early * (likely - quantile(pairs, 0.1)),
    likely,
    late: likely + FINISH_STRETCH.late * (quantile(pairs, 0.9) - likely),
  }
}

/** Log likelihood of readings under one node, its clock stopped at `halt`. */
function logLikelihood(node: Node, points: readonly Point[], halt: number): number {
  let sum = 0
  for (const point of points) {
    const z = (point.gravity - gravityAt(node, Math.min(point.t, halt))) / FIT_ERROR_SG
    sum -= 0.5 * Math.min(z * z, 25)
  }
  return sum
}

/**
 * How much likelier the last readings are if the ferment stopped than if it went on as the readings before them foretell.
 */
function oddsOfHalt(points: readonly Point[], expected: Expectation): number {
  const last = points[points.length - 1] as Point
  let most = 0
  for (let from = points.length - 3; from >= 0; from--) {
    const halt = (points[from] as Point).t
    const span = last.t - halt
    if (span < STUCK_SPAN_DAYS.least) continue
    if (span > STUCK_SPAN_DAYS.most) break
    const after = points.slice(from + 1)
    // Clearly still falling since then: no need to fit.
    const fell = (points[from] as Point).gravity - after.reduce((sum, p) => sum + p.gravity, 0) / after.length
    if (fell > 3 * FIT_ERROR_SG) continue
    const nodes = fitNodes(points.slice(0, from + 1), expected)
    let goesOn = 0
    let halted = 0
    for (const node of nodes) {
      goesOn += node.weight * Math.exp(logLikelihood(node, after, Number.POSITIVE_INFINITY))
      halted += node.weight * Math.exp(logLikelihood(node, after, halt))
    }
    most = Math.max(most, halted / Math.max(goesOn, 1e-300))
  }
  return most
}

/** Fall by least squares over the last stretch of at least seven days, and where that stretch ends. */
function lastWeek(points: readonly Point[]): { fall: number; level: number } | undefined {
  const last = points[points.length - 1]
  if (!last) return undefined
  const start = points.findLastIndex((point) => point.t <= last.t - STABLE_DAYS + 1 / 24)
  if (start < 0) return undefined
  const week = points.slice(start)
  const n = week.length
  const meanT = week.reduce((sum, point) => sum + point.t, 0) / n
  const meanY = week.reduce((sum, point) => sum + point.gravity, 0) / n
  const sxx = week.reduce((sum, point) => sum + (point.t - meanT) ** 2, 0)
  const sxy = week.reduce((sum, point) => sum + (point.t - meanT) * (point.gravity - meanY), 0)
  const slope = sxy / sxx
  return { fall: -slope * (last.t - (week[0] as Point).t), level: meanY }
}

function statusOf(points: readonly Point[], nodes: readonly Node[], expected: Expectation): FermentStatus {
  const last = points[points.length - 1] as Point
  const recent = points.slice(-3)
  const level = recent.reduce((sum, point) => sum + point.gravity, 0) / recent.length
  const week = lastWeek(points)
  const settled = week !== undefined && Math.abs(week.fall) <= STABLE_CHANGE_SG + 1e-9
  if (settled && week.level <= expected.expectedFg + NEAR_EXPECTED_SG + 1e-9) return 'finished'
  if (level > expected.expectedFg + STUCK_ABOVE_SG) {
    const odds = oddsOfHalt(points, expected)
    if (odds > STUCK_ODDS || (settled && odds > 5)) return 'stuck'
    // Flat for so long that the curves themselves end here: there is no ferment going on to compare it with.
    const end = nodes.reduce((sum, node) => sum + node.weight * node.fg, 0)
    const begun = level < expected.og - LAG_SHARE * (expected.og - expected.expectedFg)
    if (settled && begun && end > expected.expectedFg + STUCK_ABOVE_SG) return 'stuck'
  }
  const fall = Math.max(1e-9, expected.og - expected.expectedFg)
  const now = nodes.reduce((sum, node) => sum + node.weight * gravityAt(node, last.t), 0)
  const gone = (expected.og - now) / fall
  if (gone < LAG_SHARE) return 'lag'
  return gone < SLOWING_SHARE ? 'active' : 'slowing'
}

/**
 * Where a ferment stands, where it will end, and when.
 *
 * Two curves, a logistic and a Gompertz, are fitted by weighted least squares over a grid of rate and delay, with og,
 * expected end and usual rates as priors. The date is a band over both. It says `unknown` from fewer than three readings
 * or less than a day; `stuck` when it lies flat well above its expected end and that is far likelier than a slow ferment.
 *
 * @param readings corrected, `{ at, gravity (0.960–1.200) }`; those after `on` are left out
 * @param og 1.000 to 1.200
 * @param expectedFg 0.970 to 1.100, at most og
 * @param on the day that is asked about
 * @param pitchedAt instant yeast went in; the first reading unless said
 * @returns status, final gravity with a band, finish days with a band, the curve, and the residual
 * @throws RangeError outside those ranges
 * Source: Speers, Rogers and Smith 2003 (logistic); Zwietering's Gompertz and the rate priors from memory.
 */
export function fitFermentation(input: FermentInput): FermentForecast {
  const og = within('og', input.og, 1, 1.2)
  const expectedFg = within('expectedFg', input.expectedFg, 0.97, 1.1)
  if (expectedFg > og) throw new OutOfRange('expectedFg', expectedFg, 0.97, og)
  const expected = { og, expectedFg }
  const today = dayNumber('on', input.on)
  const instants = input.readings.map((reading, index) => instantDays(`readings[${index}].at`, reading.at))
  const start =
    input.pitchedAt === undefined
      ? Math.min(...(instants.length === 0 ? [today] : instants))
      : instantDays('pitchedAt', input.pitchedAt)
  const raw = pointsOf(input, start, today + 1)
  const { nodes, points } = fit(raw, expected)
  const best = nodes[0] as Node
  const at = (instant: string): number => instantDays('at', instant) - start
  const span = (points[points.length - 1]?.t ?? 0) - (points[0]?.t ?? 0)
  const little = points.length < FEWEST_READINGS || span < SHORTEST_SPAN_DAYS
  const status = little ? 'unknown' : statusOf(points, nodes, expected)
  const stuckAt = points.slice(-3).reduce((sum, point) => sum + point.gravity, 0) / Math.min(3, points.length)
  const ends = nodes.map((node) => [node.fg, node.weight] as const)
  const finish = finishBand(nodes)
  const tellable =
    status !== 'unknown' && status !== 'stuck' && finish.late - finish.early <= WIDEST_BAND_DAYS
  return {
    status,
    finalGravity: status === 'stuck' ? stuckAt : ends.reduce((sum, [fg, weight]) => sum + fg * weight, 0),
    finalGravityBand:
      status === 'stuck'
        ? { low: stuckAt - FIT_ERROR_SG, high: stuckAt + FIT_ERROR_SG }
        : { low: quantile(ends, 0.1) - FIT_ERROR_SG, high: quantile(ends, 0.9) + FIT_ERROR_SG },
    finishOn: tellable
      ? {
          early: dayOfNumber(start + Math.min(finish.likely, finish.early + DAY_SHARE)),
          likely: dayOfNumber(start + finish.likely),
          late: dayOfNumber(start + Math.max(finish.likely, finish.late - DAY_SHARE)),
        }
      : undefined,
    curve: (instant) => gravityAt(best, at(instant)),
    band: (instant) => {
      const t = at(instant)
      const pairs = nodes.map((node) => [gravityAt(node, t), node.weight] as const)
      return { low: quantile(pairs, 0.1), high: quantile(pairs, 0.9) }
    },
    residual: Math.sqrt(
      points.reduce((sum, point) => sum + (point.gravity - gravityAt(best, point.t)) ** 2, 0) /
        Math.max(1, points.length),
    ),
    reasons: reasonsFor(status, little, tellable),
  }
}

function reasonsFor(status: FermentStatus, little: boolean, tellable: boolean): string[] {
  if (little) return ['Three readings over a day or more are needed before anything can be said.']
  switch (status) {
    case 'lag':
      return ['It has hardly begun to fall. A date would be a guess.']
    case 'finished':
      return ['No more than a point of change over a week, near where it was expected to end.']
    case 'stuck':
      return [
        'It lies flat well above where it should end. Look at warmth, nitrogen, strength, acidity and sulphite.',
      ]
    case 'active':
    case 'slowing':
    case 'unknown':
      return [
        tellable
          ? 'Fitted to two shapes of ferment; the band covers both. Take a reading near the end to narrow it.'
          : 'The readings do not yet say when it will end. Take another in two or three days.',
      ]
  }
}
