import { type LotOutcome, lotBelief } from '../brewing/lot-belief.ts'
import type { YeastForm } from '../brewing/vocabulary.ts'
import { type CalendarDay, daysBetween } from '../time/day.ts'
import {
  FAILURES_TO_FLAG,
  GIVEN_UP_HOURS,
  MOST_CELLS_COUNTED_PER_ML,
  MUST_RANGE_C,
  NARROWEST_BAND,
  SLOWER_PER_TEN_DEGREES,
  SPRINKLED_YIELD,
  STARTS_BELIEVED,
} from './judgement.ts'
import type { LotState, Outcome } from './vocabulary.ts'

/** What became of one pitch of a lot, with what was thought of its packet then. */
export interface LotReport {
  outcome: Outcome
  /** Until the first sign, or how long it was watched in vain. */
  hoursToActivity: number | null
  /** From the pitch to the report. */
  hoursUntilReport: number
  pitchedOn: CalendarDay
  form: YeastForm
  /** Share of the packet the storage model took to be alive then. */
  survival: number
  /** Cells pitched per mL, alive or not. */
  cellsPerMl: number
  rehydrated: boolean
  mustTemperatureC: number | null
  /** A steward cleared the lot after this failure: it had another cause. */
  setAside: boolean
}

/** How a lot compares with an ordinary one, from what its pitches did. All are 1 while nothing is known. */
export interface LotStanding {
  /** What the storage estimate is multiplied by when under 1; over 1, how far it moves towards the top of its band. */
  factor: number
  low: number
  high: number
  /** How much of the storage band's width is left: lots differ, and reports say how this one does. */
  width: number
  /** Probability that the lot is dead. */
  dead: number
}

const between = (low: number, value: number, high: number) => Math.min(high, Math.max(low, value))

/** An ordinary lot, before anyone reports. */
const ORDINARY = lotBelief({}, [])

/**
 * A report as the lot model reads it: in the time it would have taken at 20 °C, with the cells that the packet's own age
 * had left. So an old packet that failed says less about its lot than a fresh one.
 */
function asSeen(report: LotReport): LotOutcome {
  const { low, high, usual } = MUST_RANGE_C
  const must = between(low, report.mustTemperatureC ?? usual, high)
  const hours = report.hoursToActivity ?? (report.outcome === 'none' ? givenUpAfter(report) : undefined)
  const woken = report.form !== 'dry' || report.rehydrated ? 1 : SPRINKLED_YIELD
  const cells = Math.min(report.cellsPerMl, MOST_CELLS_COUNTED_PER_ML) * report.survival * woken
  return {
    outcome: report.outcome,
    cellsPerMl: between(1e3, cells, 1e9),
    ...(hours !== undefined && {
      hoursToActivity: between(0.5, hours * SLOWER_PER_TEN_DEGREES ** ((must - usual) / 10), 1000),
    }),
  }
}

const givenUpAfter = (report: LotReport) => Math.max(GIVEN_UP_HOURS, report.hoursUntilReport)

/**
 * What the reports of a lot say about its packets on a day.
 *
 * Bayes over the lot (`lotBelief`, the sheet's prior of sound, degraded and dead lots), against an ordinary lot. A lot
 * that failed keeps a mark in proportion to its failures, however well one packet started after. Good news fades with
 * the months since; bad news does not, for yeast does not come back to life.
 */
export function lotStanding(reports: readonly LotReport[], on: CalendarDay): LotStanding {
  const counted = reports.filter((report) => !report.setAside)
  if (counted.length === 0) return { factor: 1, low: 1, high: 1, width: 1, dead: ORDINARY.dead }
  const seen = counted.map(asSeen)
  const latest = counted.reduce(
    (day, { pitchedOn }) => (pitchedOn > day ? pitchedOn : day),
    '' as CalendarDay,
  )
  const monthsSince = between(0, daysBetween(latest, on) / 30.44, 240)
  const belief = lotBelief({}, seen)
  const faded = lotBelief({ monthsSince }, seen)
  const failures = counted.filter(({ outcome }) => outcome === 'none').length
  const share = Math.min(belief.mean, faded.mean) / ORDINARY.mean
  return {
    factor: failures > 0 ? Math.min(share, markOf(counted)) : share,
    low: belief.low / ORDINARY.mean,
    high: belief.high / ORDINARY.mean,
    width: Math.max(NARROWEST_BAND, 1 / Math.sqrt(1 + counted.length)),
    dead: belief.dead,
  }
}

/** Share of packets that start, by a Beta on "it started", against what is believed of any lot. A slow one counts half. */
function markOf(reports: readonly LotReport[]): number {
  const { yes, no } = STARTS_BELIEVED
  const points = { started: 1, slow: 0.5, none: 0 } as const
  const started = reports.reduce((sum, { outcome }) => sum + points[outcome], 0)
  return (yes + started) / (yes + no + reports.length) / (yes / (yes + no))
}

export interface Evidence {
  pitches: number
  started: number
  slow: number
  none: number
}

/** Counts of what a lot did; `pitches` has those nobody reported yet in it. */
export function evidenceOf(reports: readonly { outcome: Outcome }[], pitches: number): Evidence {
  const count = (outcome: Outcome) => reports.filter((report) => report.outcome === outcome).length
  return { pitches, started: count('started'), slow: count('slow'), none: count('none') }
}

/**
 * The state a lot is in after a report: two failures flag it. Only a steward takes a flag away or withdraws it; a failure
 * that was taken back takes the flag with it.
 */
export function lotStateAfter(
  state: LotState,
  reports: readonly Pick<LotReport, 'outcome' | 'setAside'>[],
): LotState {
  if (state === 'withdrawn') return state
  const failures = reports.filter(({ outcome, setAside }) => outcome === 'none' && !setAside).length
  return failures >= FAILURES_TO_FLAG ? 'flagged' : 'sound'
}
