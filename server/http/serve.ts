import { Router, text, type Request, type RequestHandler, type Response } from 'express'
import multer from 'multer'
import type { z } from 'zod'
import type { Access, Endpoint, Endpoints, Given, Received } from '#shared/http/endpoint'
import type { FieldError } from '#shared/http/problem'
import { roleCovers } from '#shared/people/vocabulary'
import type { Deps } from '../deps.ts'
import { AppError, invalidField } from '../errors.ts'
import { auditor } from './auditor.ts'
import { answerOnce } from './idempotency.ts'
import type { SignedIn } from './sessions.ts'

/** Bytes to send in place of JSON. */
export interface FileReply {
  body: Buffer | string | NodeJS.ReadableStream
  type: string
  /** Saved under this name; shown in place when absent. */
  downloadName?: string
  etag?: string
  cacheControl?: string
}

export interface Upload {
  bytes: Buffer
}

type Versioned<E> = E extends { versioned: true } ? { version: number } : unknown
type Uploaded<E> = E extends { upload: string } ? { upload: Upload } : unknown
export type Call<E extends Endpoint> = {
  user: E['access'] extends 'anyone' ? SignedIn | undefined : SignedIn
  req: Request
  res: Response
} & Versioned<E> &
  Uploaded<E>

type Answer<E extends Endpoint> = E extends { file: string } ? FileReply : Given<E>
export type Handlers<C extends Endpoints> = {
  [K in keyof C]: (
    input: Received<C[K]>,
    call: Call<C[K]>,
  ) => C[K] extends { creates: 'sync' } ? Answer<C[K]> : Answer<C[K]> | Promise<Answer<C[K]>>
}

const uploads = multer({
  storage: multer.memoryStorage(),
  limits: { fileSize: 8 * 1024 * 1024, files: 1, fields: 8, parts: 9, fieldSize: 4096 },
})

const readText = text({ type: 'text/csv', limit: '8mb' })

/** Takes a file sent as the bare body for what the form's field would have brought; refuses it everywhere else. */
const bareFile =
  (spec: Endpoint): RequestHandler =>
  (req, res, next) => {
    if (!req.is('text/csv')) return next()
    if (spec.uploadType !== 'text/csv')
      throw new AppError('wrong-media-type', 'Send JSON, with Content-Type: application/json.')
    readText(req, res, (error?: unknown) => {
      if (error) return next(error)
      const body: unknown = req.body
      req.file = { buffer: Buffer.from(typeof body === 'string' ? body : '') } as Express.Multer.File
      req.body = undefined
      next()
    })
  }

/** Turns a contract and its handlers into routes: admit, validate, handle, cut the reply to its schema. */
export function serve<C extends Endpoints>(deps: Deps, endpoints: C, handlers: Handlers<C>): Router {
  const router = Router()
  for (const [name, spec] of Object.entries(endpoints)) {
    const handler = handlers[name] as unknown as (input: unknown, call: unknown) => unknown
    const audit = auditor(deps, spec)
    const steps: RequestHandler[] = [
      (req, res, next) => {
        audit.refusals(req, res.locals.user, () => admit(spec, res.locals.user))
        next()
      },
    ]
    if (spec.upload) steps.push(uploads.single(spec.upload))
    steps.push(bareFile(spec))
    steps.push(async (req, res) => {
      const input = validate(spec, req)
      const call = { user: res.locals.user, req, res, ...extras(spec, req) }
      const run = () => handler(input, call)
      const done = (answer: unknown) => {
        audit.done(req, res.locals.user)
        send(spec, res, answer)
      }
      if (spec.creates) await answerOnce({ deps, spec, req, res, run, send: done })
      else done(await run())
    })
    router[spec.method.toLowerCase() as 'get'](spec.path, ...steps)
  }
  return router
}

/** Every refusal of a person happens here, by the access the contract states. */
function admit(spec: Endpoint, user: SignedIn | undefined) {
  if (spec.access === 'anyone') return
  if (!user) throw new AppError('signed-out', 'Sign in, then try again.')
  if (user.status === 'suspended') {
    if (spec.access !== 'member' || (spec.method !== 'GET' && !spec.whileSuspended))
      throw new AppError(
        'suspended',
        'Your membership is paused. You can see and return your loans; talk to a steward about the rest.',
      )
    return
  }
  if (!roleCovers(user.role, spec.access satisfies Exclude<Access, 'anyone'>))
    throw new AppError('forbidden', `Only ${spec.access === 'admin' ? 'an admin' : 'a steward'} can do that.`)
}

function extras(spec: Endpoint, req: Request) {
  return {
    ...(spec.versioned && { version: ifMatch(req) }),
    ...(spec.upload && { upload: uploaded(spec.upload, req) }),
  }
}

function ifMatch(req: Request): number {
  const header = req.get('if-match')
  if (!header) throw new AppError('needs-version', 'Say which version you are changing, in If-Match.')
  const version = /^(?:W\/)?"?(\d{1,9})"?$/.exec(header.trim())?.[1]
  if (!version) throw new AppError('stale', 'That is not a version we gave out. Load it again.')
  return Number(version)
}

function uploaded(field: string, req: Request): Upload {
  if (!req.file) throw invalidField(field, 'Choose a file.')
  return { bytes: req.file.buffer }
}

const schemaError = (errors: FieldError[]) =>
  new AppError(
    'invalid',
    errors.length === 1 ? (errors[0]?.message ?? '') : 'Some fields need another look.',
    {
      errors,
    },
  )

function validate(spec: Endpoint, req: Request): Record<string, unknown> {
  const errors: FieldError[] = []
  const take = (schema: z.ZodType, value: unknown) => {
    const result = schema.safeParse(value)
    if (result.success) return result.data
    errors.push(...result.error.issues.flatMap(fieldErrors))
    return undefined
  }
  const input: Record<string, unknown> = {}
  if (spec.params) {
    // An id that cannot exist is an id that is not there.
    const params = spec.params.safeParse(req.params)
    if (!params.success) throw new AppError('not-found', 'That is not here, or not yours to see.')
    input.params = params.data
  }
  if (spec.query) input.query = take(spec.query.strict(), req.query)
  else refuseUnknown(req.query, errors)
  if (spec.body) input.body = take(spec.body, spec.upload ? { ...(req.body as object) } : (req.body ?? {}))
  else if (!spec.upload) refuseUnknown(req.body, errors)
  // One message a field: the first thing wrong with it is the thing to mend.
  const first = errors.filter((error, at) => errors.findIndex(({ path }) => path === error.path) === at)
  if (first.length > 0) throw schemaError(first)
  return input
}

function fieldErrors(issue: z.core.$ZodIssue): FieldError[] {
  const at = issue.path.map(String)
  if (issue.code === 'unrecognized_keys')
    return issue.keys.map((key) => ({ path: [...at, key].join('.'), message: 'There is no such field.' }))
  return [{ path: at.join('.') || 'body', message: issue.message }]
}

function refuseUnknown(value: unknown, errors: FieldError[]) {
  if (value === undefined || value === null) return
  if (typeof value !== 'object' || Array.isArray(value))
    errors.push({ path: 'body', message: 'Send an object or nothing.' })
  else for (const path of Object.keys(value)) errors.push({ path, message: 'There is no such field.' })
}

function send(spec: Endpoint, res: Response, answer: unknown) {
  res.setHeader('Cache-Control', spec.cache === 'revalidate' ? 'private, no-cache' : 'no-store')
  if (spec.file) return sendFile(res, answer as FileReply)
  res.status(spec.status ?? 200)
  if (spec.reply === null) return res.end()
  const body = spec.reply.parse(answer)
  const version = (body as { version?: unknown } | null)?.version
  if (typeof version === 'number') res.setHeader('ETag', `"${version}"`)
  return res.json(body)
}

function sendFile(res: Response, file: FileReply) {
  res.setHeader('Content-Type', file.type)
  res.setHeader('Content-Security-Policy', "default-src 'none'; sandbox")
  if (file.cacheControl) res.setHeader('Cache-Control', file.cacheControl)
  if (file.downloadName) res.attachment(file.downloadName).type(file.type)
  if (file.etag) {
    res.setHeader('ETag', file.etag)
    if (res.req.get('if-none-match') === file.etag) return res.status(304).end()
  }
  if (typeof file.body === 'string' || Buffer.isBuffer(file.body)) return res.end(file.body)
  return file.body.pipe(res)
}
