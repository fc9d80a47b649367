import { shareLeft, placeOf, type Shape } from '#shared/brewing/ferment-grid'

export function normal(random: () => number): number {
  return Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(2 * Math.PI * random())
}

/** An invented ferment: its true course, and what its maker believes of it. */
export interface Ferment {
  shape: Shape
  rate: number
  delay: number
  og: number
  fg: number
  expectedFg: number
}

// Rates per day near 20 °C: cider, fed mead, unfed mead, ale (reference ranges, from memory), doubled for each 10 °C.
const RATES = [
  [0.4, 0.9],
  [0.3, 0.7],
  [0.08, 0.2],
  [0.9, 1.8],
] as const

export function inventFerment(random: () => number, kinds: readonly number[] = [0, 1, 2, 3]): Ferment {
  const between = (low: number, high: number): number => low + (high - low) * random()
  const range = RATES[kinds[Math.floor(random() * kinds.length)] ?? 0] ?? RATES[0]
  const shape: Shape = random() < 0.5 ? 'logistic' : 'gompertz'
  const rate = between(range[0], range[1]) * 2 ** ((between(15, 25) - 20) / 10)
  const fg = between(0.993, 1.012)
  return {
    shape,
    rate,
    delay: shape === 'logistic' ? between(2.2, 4.2) : 1 + rate * between(0.3, 2),
    og: between(1.045, 1.12),
    fg,
    expectedFg: fg + 0.002 * normal(random),
  }
}

export function trueGravity(ferment: Ferment, days: number): number {
  return (
    ferment.fg + (ferment.og - ferment.fg) * shareLeft(ferment.shape, ferment.rate * days - ferment.delay)
  )
}

/** Days until it is within a point of its end. */
export function trueFinish(ferment: Ferment): number {
  return (placeOf(ferment.shape, 0.001 / (ferment.og - ferment.fg)) + ferment.delay) / ferment.rate
}

/** Day on which a share of the fall is still to come. */
export function dayOfShare(ferment: Ferment, share: number): number {
  return Math.max(0, (placeOf(ferment.shape, share) + ferment.delay) / ferment.rate)
}

/** Day zero of every invented ferment, in days since 1970: 1 March 2026. */
export const DAY_ZERO = Date.UTC(2026, 2, 1) / 86_400_000
export const instantOf = (days: number): string => new Date((DAY_ZERO + days) * 86_400_000).toISOString()
export const dayOf = (days: number): string => instantOf(days).slice(0, 10)
