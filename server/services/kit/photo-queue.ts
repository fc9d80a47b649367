import { AppError } from '../../errors.ts'

/** Decoding is heavy on memory: one at a time, a short queue, then "try again". */
const AT_ONCE = 1
const QUEUE = 24
let running = 0
const waiting: (() => void)[] = []

export async function inTurn<T>(work: () => Promise<T>): Promise<T> {
  if (running >= AT_ONCE) {
    if (waiting.length >= QUEUE)
      throw new AppError('unavailable', 'Many photos are coming in just now. Try again in a moment.', {
        retryAfterSeconds: 5,
      })
    await new Promise<void>((resolve) => waiting.push(resolve))
  }
  running += 1
  try {
    return await work()
  } finally {
    running -= 1
    waiting.shift()?.()
  }
}
