import { z } from 'zod'

/** Field schemas that every contract shares: trimmed, bounded, and with messages a person can act on. */

export const Id = z
  .string()
  .min(1)
  .max(64)
  .regex(/^[A-Za-z0-9_-]+$/, 'That is not an id.')

/** One line of text: trimmed, no control or text-direction characters. */
export const line = (max: number) =>
  z
    .string()
    .trim()
    .min(1, 'Say something here.')
    .max(max, `Keep it to ${max} characters.`)
    .regex(/^[^\p{Cc}\p{Bidi_Control}]*$/u, 'Use plain text on one line.')

/** Several lines of text, trimmed; may be empty. */
export const prose = (max: number) => z.string().trim().max(max, `Keep it to ${max} characters.`)

export const Email = z
  .string()
  .trim()
  .max(254)
  .pipe(z.email('Write an e-mail address, like ada@example.org.'))
  .transform((text) => text.toLowerCase())

/** A finite number in a closed range. */
export const numberIn = (low: number, high: number) => z.number().min(low).max(high)
export const intIn = (low: number, high: number) => z.int().min(low).max(high)

/** Query strings are text: `?limit=20`, `?mine=true`. */
export const queryNumber = (low: number, high: number) =>
  z.coerce.number<string | number>().min(low).max(high)
export const queryFlag = z
  .enum(['true', 'false', '1', '0'])
  .transform((text) => text === 'true' || text === '1')

export const Version = z.int().min(1)
