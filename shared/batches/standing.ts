import { abv, fermentableFloor, type GravityReading, type Strength } from '../brewing/index.ts'

export interface BatchReading extends GravityReading {
  at: string
  /** Corrected. */
  gravity: number
  temperatureC?: number
}

export interface Standing {
  /** What it started from: measured, or the first reading. */
  og: number | undefined
  /** Latest reading. */
  gravity: number | undefined
  readAt: string | undefined
  /** Share of the expected drop that is done, 0 to 1. */
  drop: number | undefined
  strength: Strength | undefined
}

/** Where a batch stands by its latest reading. `readings` in any order. */
export function standingOf(
  og: number | undefined,
  expectedFg: number | undefined,
  readings: readonly BatchReading[],
): Standing {
  const ordered = [...readings].sort((a, b) => (a.at < b.at ? -1 : 1))
  const last = ordered.at(-1)
  const from = og ?? ordered[0]?.gravity
  return {
    og: from,
    gravity: last?.gravity,
    readAt: last?.at,
    drop: last && dropDone(from, expectedFg, last.gravity),
    strength: last && strengthBetween(from, last.gravity),
  }
}

/** 1.088 to 1.010 with 0.998 expected is 0.87 of the drop. Between 0 and 1; undefined where nothing is expected to fall. */
export function dropDone(og: number | undefined, fg: number | undefined, gravity: number) {
  if (og === undefined || fg === undefined || og - fg < 0.001) return undefined
  return Math.min(1, Math.max(0, (og - gravity) / (og - fg)))
}

/** Strength between two gravities, or undefined where they cannot belong to one drink. */
export function strengthBetween(og: number | undefined, gravity: number): Strength | undefined {
  if (og === undefined || og < 1 || og > 1.2 || gravity > og + 0.002) return undefined
  if (gravity < fermentableFloor(og) - 0.005) return undefined
  return abv({ og, fg: Math.min(og, gravity) })
}
