/** Litres in an imperial gallon (Weights and Measures Act 1985, exact) and in its eighth, the pint. */
export const LITRES_PER_GALLON = 4.54609
export const LITRES_PER_PINT = LITRES_PER_GALLON / 8
/** 231 cubic inches, exact: only for reading recipes from elsewhere. */
export const LITRES_PER_US_GALLON = 3.785411784

export const VOLUME_UNITS = ['L', 'gal'] as const
export type VolumeUnit = (typeof VOLUME_UNITS)[number]

const LITRES: Record<VolumeUnit, number> = { L: 1, gal: LITRES_PER_GALLON }

/** Litres of an amount in a unit. `toLitres(1, 'gal')` is 4.54609. */
export const toLitres = (amount: number, unit: VolumeUnit): number => amount * LITRES[unit]

/** An amount in a unit, of litres; the inverse of `toLitres`. */
export const fromLitres = (litres: number, unit: VolumeUnit): number => litres / LITRES[unit]
