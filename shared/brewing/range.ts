/** A RangeError that also carries its parts, so that a screen can show it beside the right field. */
export class OutOfRange extends RangeError {
  readonly argument: string
  readonly value: unknown
  readonly low: number | undefined
  readonly high: number | undefined
  /** What is needed, where a range does not say it all. */
  readonly note: string | undefined

  constructor(argument: string, value: unknown, low?: number, high?: number, note?: string) {
    super(`${argument} is ${show(value)}: ${note ?? allowed(low, high)}`)
    this.name = 'RangeError'
    this.argument = argument
    this.value = value
    this.low = low
    this.high = high
    this.note = note
  }
}

function show(value: unknown): string {
  if (typeof value === 'string') return `"${value}"`
  if (typeof value === 'number' || value === undefined || value === null) return String(value)
  return JSON.stringify(value)
}

function allowed(low?: number, high?: number): string {
  if (low !== undefined && high !== undefined) return `allowed ${low} to ${high}`
  if (low !== undefined) return `allowed ${low} or more`
  if (high !== undefined) return `allowed ${high} or less`
  return 'a finite number is needed'
}

/**
 * Gives the value back when it is a finite number between `low` and `high`, both included.
 * Throws `RangeError` naming the argument, the value and the range.
 */
export function within(argument: string, value: number, low: number, high: number): number {
  if (typeof value !== 'number' || !Number.isFinite(value) || value < low || value > high) {
    throw new OutOfRange(argument, value, low, high)
  }
  return value
}

/** As `within`, for whole numbers. */
export function wholeWithin(argument: string, value: number, low: number, high: number): number {
  within(argument, value, low, high)
  if (!Number.isInteger(value)) {
    throw new OutOfRange(argument, value, low, high, `a whole number from ${low} to ${high} is needed`)
  }
  return value
}

/** Gives the value back when it is one of the words of the list. Throws `RangeError` naming them. */
export function oneOf<const T extends string>(argument: string, value: string, words: readonly T[]): T {
  const found = words.find((word) => word === value)
  if (found === undefined) {
    throw new OutOfRange(argument, value, undefined, undefined, `allowed ${words.join(', ')}`)
  }
  return found
}
