/** Minutes to wait after the first, second … failed try of a letter. */
const WAITS = [1, 5, 15, 30, 60] as const
const HOURLY = 60

/** `retryMinutes(1)` is 1: the wait after the first failed try. From the fifth on it is an hour. */
export const retryMinutes = (tries: number): number => WAITS[tries - 1] ?? HOURLY

/** So many failures of the relay in a row, and it is left alone for so long. */
export const RELAY_FAILURES = 5
export const RELAY_REST_SECONDS = 60

/** Letters on their way at the same time. */
export const LETTERS_AT_ONCE = 5
