import type { ErrorRequestHandler } from 'express'
import { MulterError } from 'multer'
import { ZodError } from 'zod'
import { PROBLEM_STATUS, PROBLEM_TITLE, type Problem, type ProblemCode } from '#shared/http/problem'
import type { Deps } from '../deps.ts'
import { AppError } from '../errors.ts'
import { newId } from '../ids.ts'

/** The one place where an error becomes a reply: a problem document (RFC 9457), never a stack trace. */
export const errorHandler =
  (deps: Deps): ErrorRequestHandler =>
  (error: unknown, req, res, next) => {
    if (res.headersSent) return next(error)
    const instance = newId()
    const refusal = asRefusal(error)
    if (!refusal)
      deps.log.error({ err: error, instance, method: req.method, path: req.path }, 'unexpected error')
    const code = refusal?.code ?? 'unavailable'
    const status = refusal ? refusal.status : 500
    const problem: Problem = {
      ...refusal?.more.body,
      type: `/api/docs#${code}`,
      title: PROBLEM_TITLE[code],
      status,
      code,
      detail: refusal?.message ?? 'Something went wrong on our side. Nothing was changed; try again.',
      instance,
      ...(code === 'invalid' && {
        errors: refusal?.more.errors ?? [{ path: 'body', message: refusal?.message ?? '' }],
      }),
    }
    if (refusal?.more.retryAfterSeconds) res.setHeader('Retry-After', refusal.more.retryAfterSeconds)
    res.status(status).setHeader('Cache-Control', 'no-store')
    // Once a body was cut short the connection cannot be read on.
    if (!req.complete) res.setHeader('Connection', 'close')
    res.type('application/problem+json').send(JSON.stringify(problem))
  }

/** What is the caller's doing, as a refusal; undefined for what is ours. */
function asRefusal(error: unknown): AppError | undefined {
  if (error instanceof AppError) return error
  if (error instanceof MulterError)
    return error.code === 'LIMIT_FILE_SIZE'
      ? new AppError('too-large', 'That file is over 8 MiB. Choose a smaller one.')
      : new AppError('invalid', 'Send one file, in the field the form names.')
  if (error instanceof ZodError) return undefined
  const sqlite = sqliteCode(error)
  if (sqlite === 'SQLITE_BUSY' || sqlite === 'SQLITE_FULL')
    return new AppError('unavailable', 'The database is busy. Nothing was changed; try again.', {
      retryAfterSeconds: 2,
    })
  const status = (error as { status?: unknown } | null)?.status
  if (typeof status === 'number' && status >= 400 && status < 500)
    return new AppError(codeFor(status), wordsFor(status))
  if (
    error instanceof Error &&
    /^(Multipart|Unexpected end of form|Malformed part|Boundary)/i.test(error.message)
  )
    return new AppError('invalid', 'That form did not arrive whole. Send it again.')
  return undefined
}

/** SQLite's own name for what went wrong, looking through the query builder's wrapper. */
function sqliteCode(error: unknown): string | undefined {
  const { code, cause } = (error ?? {}) as { code?: unknown; cause?: unknown }
  if (typeof code === 'string' && code.startsWith('SQLITE_')) return code
  return cause === undefined ? undefined : sqliteCode(cause)
}

function codeFor(status: number): ProblemCode {
  const entry = Object.entries(PROBLEM_STATUS).find(([, value]) => value === status)
  return (entry?.[0] as ProblemCode | undefined) ?? 'invalid'
}

function wordsFor(status: number): string {
  if (status === 413) return 'That is too much at once. Send less.'
  if (status === 415) return 'Send JSON, as application/json.'
  return 'That request could not be read. Check that it is valid JSON.'
}
