import { z } from 'zod'

/** Every machine-readable reason a request can be refused for, with the HTTP status it travels under (RFC 9457). */
export const PROBLEM_STATUS = {
  invalid: 400,
  'signed-out': 401,
  forbidden: 403,
  suspended: 403,
  'needs-induction': 403,
  'not-found': 404,
  'not-available': 409,
  'over-limit': 409,
  'wrong-state': 409,
  'not-clean': 409,
  'blocked-by-fault': 409,
  'not-enough': 409,
  stale: 412,
  'too-large': 413,
  'wrong-media-type': 415,
  'idempotency-key-reused': 422,
  'needs-version': 428,
  'too-many': 429,
  unavailable: 503,
} as const

export type ProblemCode = keyof typeof PROBLEM_STATUS
export const PROBLEM_CODES = Object.keys(PROBLEM_STATUS) as [ProblemCode, ...ProblemCode[]]

export const PROBLEM_TITLE: Record<ProblemCode, string> = {
  invalid: 'Something in the request is not right',
  'signed-out': 'Sign in first',
  forbidden: 'That is not yours to do',
  suspended: 'Your membership is paused',
  'needs-induction': 'You need an induction first',
  'not-found': 'Not here',
  'not-available': 'Not free then',
  'over-limit': 'Over a limit',
  'wrong-state': 'It has moved on',
  'not-clean': 'Not clean',
  'blocked-by-fault': 'Out of service',
  'not-enough': 'Not enough left',
  stale: 'Someone changed it first',
  'too-large': 'Too large',
  'wrong-media-type': 'Wrong kind of file',
  'idempotency-key-reused': 'Key used for something else',
  'needs-version': 'Version missing',
  'too-many': 'Too many tries',
  unavailable: 'Not working just now',
}

export const FieldError = z.object({ path: z.string(), message: z.string() })
export type FieldError = z.output<typeof FieldError>

/** The problem document. Some refusals carry more (a nearest free window, alternatives): those members pass through. */
export const Problem = z.looseObject({
  type: z.string(),
  title: z.string(),
  status: z.int(),
  code: z.string(),
  detail: z.string(),
  instance: z.string().optional(),
  errors: z.array(FieldError).optional(),
})
export type Problem = z.output<typeof Problem>
