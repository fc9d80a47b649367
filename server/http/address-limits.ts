import { rateLimit } from 'express-rate-limit'
import type { RequestHandler } from 'express'
import { AppError } from '../errors.ts'

const HOUR = 60 * 60_000

/** So many requests from one address in a while, then 429 with when to come back. Counted in memory, per process. */
const limitPerAddress = (limit: number, windowMs: number, words: string): RequestHandler =>
  rateLimit({
    windowMs,
    limit,
    standardHeaders: false,
    legacyHeaders: false,
    skip: (req) => req.method === 'GET',
    handler: () => {
      throw new AppError('too-many', words, { retryAfterSeconds: windowMs / 1000 })
    },
  })

/** A sign-in may fail 30 times in a quarter of an hour; per account it is counted in the database. */
export const signInLimit = (): RequestHandler =>
  rateLimit({
    windowMs: HOUR / 4,
    limit: 30,
    skip: (req) => req.method !== 'POST',
    skipSuccessfulRequests: true,
    standardHeaders: false,
    legacyHeaders: false,
    handler: () => {
      throw new AppError('too-many', 'Too many tries from here. Wait a quarter of an hour, then try again.', {
        retryAfterSeconds: 900,
      })
    },
  })

/** Asking for links and using them. */
export const linkLimit = (): RequestHandler =>
  limitPerAddress(10, HOUR, 'That is often enough for an hour. Wait a little, then try again.')
