import argon2 from 'argon2'
import { AppError } from '../errors.ts'

/** RFC 9106 section 4, second recommended option. */
const COST = { type: argon2.argon2id, memoryCost: 65_536, timeCost: 3, parallelism: 4 } as const

/** Verified in place of a hash that is not there, so that an unknown address takes as long as a known one. */
const DECOY =
  '$argon2id$v=19$m=65536,t=3,p=4$YmFybWhvdXNlLWRlY295IQ$0000000000000000000000000000000000000000000'

/** Hashing is heavy on memory and on the thread pool: few at once, a short queue, then "try again". */
const AT_ONCE = 2
const QUEUE = 20
let running = 0
const waiting: (() => void)[] = []

async function inTurn<T>(work: () => Promise<T>): Promise<T> {
  if (running >= AT_ONCE) {
    if (waiting.length >= QUEUE)
      throw new AppError('unavailable', 'Many people are signing in just now. Try again in a moment.', {
        retryAfterSeconds: 2,
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

const normal = (password: string) => password.normalize('NFC')

export const hashPassword = (password: string) => inTurn(() => argon2.hash(normal(password), COST))

/** Takes as long for a missing hash as for a wrong password. */
export const passwordMatches = (hash: string | null, password: string) =>
  inTurn(async () => (await argon2.verify(hash ?? DECOY, normal(password))) && hash !== null)

export const needsRehash = (hash: string) => argon2.needsRehash(hash, COST)
