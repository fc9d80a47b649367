import { brixFromGravity, gravityFromBrix } from '#shared/brewing/sucrose-density'

export const GRAVITY_UNITS = ['sg', 'bx'] as const
export type GravityUnit = (typeof GRAVITY_UNITS)[number]

/** Specific gravity of a reading in a unit (SG or °Bx). Throws `RangeError` outside -8 to 62 °Bx. */
export const toGravity = (reading: number, unit: GravityUnit): number =>
  unit === 'sg' ? reading : gravityFromBrix(reading)

/** A reading in a unit, of a specific gravity; the inverse of `toGravity`. Throws `RangeError` outside 0.970–1.300. */
export const fromGravity = (sg: number, unit: GravityUnit): number =>
  unit === 'sg' ? sg : brixFromGravity(sg)

/** Gravity typed without its point is common: 1066 and 66 both mean 1.066. Other numbers come back as they are. */
export function gravityAsMeant(typed: number): number {
  if (Number.isInteger(typed) && typed >= 970 && typed <= 1200) return typed / 1000
  if (Number.isInteger(typed) && typed >= 5 && typed <= 160) return 1 + typed / 1000
  return typed
}
