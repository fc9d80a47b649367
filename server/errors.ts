import { PROBLEM_STATUS, type FieldError, type ProblemCode } from '#shared/http/problem'

interface More {
  /** One entry per field at fault. */
  errors?: FieldError[]
  /** Further members of the problem document, such as `nearest`. */
  body?: Record<string, unknown>
  retryAfterSeconds?: number
  /** What was written before the refusal stays written (the refusal itself is a fact worth keeping). */
  keep?: true
}

/** A refusal a person can understand: a code from the closed list and a sentence that says what to do next. */
export class AppError extends Error {
  readonly code: ProblemCode
  readonly more: More

  constructor(code: ProblemCode, detail: string, more: More = {}) {
    super(detail)
    this.code = code
    this.more = more
  }

  get status() {
    return PROBLEM_STATUS[this.code]
  }
}

export const notFound = (what = 'That') =>
  new AppError('not-found', `${what} is not here, or not yours to see.`)

export const invalidField = (path: string, message: string) =>
  new AppError('invalid', message, { errors: [{ path, message }] })
