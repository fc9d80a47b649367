import { addDays, day, daysBetween, type CalendarDay } from '../time/day.ts'
import type { BottlingGate } from '../brewing/index.ts'

/** `look`: blocks nothing, and is worth a moment before glass is filled. */
export const CHECK_STATES = ['block', 'look', 'pass'] as const
export type CheckState = (typeof CHECK_STATES)[number]

export interface GateCheck {
  state: CheckState
  fact: string
  why: string
}

/** A hydrometer last checked in water longer ago than this is worth another look (judgement: a season). */
const CHECKED_WITHIN_DAYS = 180

/**
 * The gate as a list to tick: what blocks first, each with its reason, then what is settled. The hydrometer is there to
 * be seen, and blocks nothing: its offset is already in the corrected gravity.
 */
export function gateChecks(
  gate: BottlingGate,
  hydrometer: { tag: string; offsetSg: number; calibratedOn: CalendarDay | null } | undefined,
  on: CalendarDay,
): GateCheck[] {
  const blocks = gate.blocks.map(({ fact, why }) => ({ state: 'block' as const, fact: sentence(fact), why }))
  const codes = gate.blocks.map((block) => block.code)
  const passes: GateCheck[] = []
  const moving = ['too-few-readings', 'not-long-enough', 'still-falling', 'readings-disagree'] as const
  if (!moving.some((code) => codes.includes(code)))
    passes.push({
      state: 'pass',
      fact: 'It has stopped.',
      why: 'No more than a point of change over a week.',
    })
  if (
    !codes.includes('above-expected') &&
    !codes.includes('below-floor') &&
    !codes.includes('too-few-readings')
  )
    passes.push({
      state: 'pass',
      fact: 'It is where it should end.',
      why: 'Within 3 points of what was expected.',
    })
  if (!codes.includes('pressure'))
    passes.push({
      state: 'pass',
      fact: 'The bottle bears it.',
      why: `At worst ${gate.worstCaseBarAt30C.toFixed(1)} bar at 30 °C; trusted with ${gate.limitVolumes.toFixed(1)} volumes.`,
    })
  return [...blocks, ...passes, ...(hydrometer ? [hydrometerCheck(hydrometer, on)] : [])]
}

function hydrometerCheck(
  { tag, offsetSg, calibratedOn }: { tag: string; offsetSg: number; calibratedOn: CalendarDay | null },
  on: CalendarDay,
): GateCheck {
  if (calibratedOn === null)
    return {
      state: 'look',
      fact: 'Hydrometer not checked.',
      why: `Float ${tag} in plain water once: it may be off.`,
    }
  const old = daysBetween(calibratedOn, on) > CHECKED_WITHIN_DAYS
  const points = Math.round(offsetSg * 1000)
  const reads =
    points === 0
      ? `${tag} reads true.`
      : `${tag} reads ${Math.abs(points)} ${Math.abs(points) === 1 ? 'point' : 'points'} ${points < 0 ? 'high' : 'low'}.`
  return old
    ? { state: 'look', fact: 'Hydrometer checked long ago.', why: `${reads} Float it in water again.` }
    : { state: 'pass', fact: 'Hydrometer checked.', why: reads }
}

/** The first day on which the gate could open, if nothing but time is missing; never in the past. */
export function gateOpensOn(
  gate: BottlingGate,
  finishLikely: CalendarDay | undefined,
  on: CalendarDay,
): CalendarDay | undefined {
  if (gate.ready) return undefined
  const byReadings = gate.earliestOn === undefined ? undefined : day(gate.earliestOn)
  const byForecast = finishLikely === undefined ? undefined : addDays(finishLikely, 7)
  const candidates = [byReadings, byForecast].filter((date) => date !== undefined && date > on)
  return candidates.sort().at(-1)
}

const sentence = (fact: string) => (/[.!?]$/.test(fact) ? fact : `${fact}.`)
