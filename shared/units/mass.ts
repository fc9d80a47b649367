export const MASS_UNITS = ['g', 'kg', 'oz', 'lb'] as const
export type MassUnit = (typeof MASS_UNITS)[number]

/** Avoirdupois pound, exact by definition; 16 ounces to it. */
export const GRAMS_PER_POUND = 453.59237

const GRAMS: Record<MassUnit, number> = { g: 1, kg: 1000, oz: GRAMS_PER_POUND / 16, lb: GRAMS_PER_POUND }

/** Grams of an amount in a unit. `toGrams(1, 'oz')` is 28.35. */
export const toGrams = (amount: number, unit: MassUnit): number => amount * GRAMS[unit]

/** An amount in a unit, of grams; the inverse of `toGrams`. */
export const fromGrams = (grams: number, unit: MassUnit): number => grams / GRAMS[unit]
