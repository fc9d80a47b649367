import type { Request, Response } from 'express'
import { eq, lt } from 'drizzle-orm'
import type { Endpoint } from '#shared/http/endpoint'
import { addMinutes } from '#shared/time/instant'
import { idempotencyKeys } from '../db/schema/people.ts'
import { write, type Db, type Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { AppError, invalidField } from '../errors.ts'
import { digest } from '../ids.ts'

const KEPT_HOURS = 48

interface Once {
  deps: Deps
  spec: Endpoint
  req: Request
  res: Response
  run: () => unknown
  send: (answer: unknown) => void
}

/**
 * Answers a creating request once per `Idempotency-Key`. A `sync` handler runs in one transaction with the record of its
 * answer: either both are there or neither. Refusals are not recorded, so the same key may be tried again.
 */
export async function answerOnce({ deps, spec, req, res, run, send }: Once) {
  const key = req.get('idempotency-key')
  if (key !== undefined && (key.length === 0 || key.length > 255))
    throw invalidField('Idempotency-Key', 'Use 1 to 255 characters.')
  const record = key === undefined ? undefined : recordFor(spec, req, res, key)
  if (spec.creates === 'async') {
    if (record && replay(deps.db, record, res)) return
    if (record) begin(deps, record)
    try {
      const answer = await run()
      if (record) finish(deps.db, record, spec, answer)
      send(answer)
    } catch (error) {
      if (record) deps.db.delete(idempotencyKeys).where(eq(idempotencyKeys.id, record.id)).run()
      throw error
    }
    return
  }
  const outcome = write(deps.db, (tx) => {
    if (record && replay(tx, record, res)) return { replayed: true as const }
    try {
      const answer = run()
      if (answer instanceof Promise)
        throw new Error(`${spec.path}: a sync creating handler returned a promise`)
      if (record) {
        begin(deps, record, tx)
        finish(tx, record, spec, answer)
      }
      return { answer }
    } catch (error) {
      if (error instanceof AppError && error.more.keep) return { refusal: error }
      throw error
    }
  })
  if (outcome.refusal) throw outcome.refusal
  if ('answer' in outcome) send(outcome.answer)
}

interface KeyRecord {
  id: string
  requestDigest: string
}

function recordFor(spec: Endpoint, req: Request, res: Response, key: string): KeyRecord {
  const user = res.locals.user
  const bytes = req.file ? digest(req.file.buffer.toString('base64')) : ''
  return {
    id: digest(JSON.stringify([user?.id ?? req.ip, spec.method, spec.path, key])),
    requestDigest: digest(JSON.stringify([req.originalUrl, req.body ?? null, bytes])),
  }
}

/** Sends the first answer again; true when there was one. */
function replay(db: Db | Tx, record: KeyRecord, res: Response): boolean {
  const first = db.select().from(idempotencyKeys).where(eq(idempotencyKeys.id, record.id)).get()
  if (!first) return false
  if (first.requestDigest !== record.requestDigest)
    throw new AppError(
      'idempotency-key-reused',
      'This Idempotency-Key came with another request before. Make a new one.',
    )
  if (first.status === null)
    throw new AppError(
      'wrong-state',
      'The first request with this key is still running. Try again in a moment.',
    )
  res.setHeader('Idempotency-Replayed', 'true').setHeader('Cache-Control', 'no-store')
  res.status(first.status)
  if (first.body === null) res.end()
  else {
    const body = JSON.parse(first.body) as { version?: unknown }
    if (typeof body.version === 'number') res.setHeader('ETag', `"${body.version}"`)
    res.json(body)
  }
  return true
}

function begin(deps: Deps, record: KeyRecord, db: Db | Tx = deps.db) {
  db.insert(idempotencyKeys)
    .values({ ...record, createdAt: deps.clock.now() })
    .run()
}

function finish(db: Db | Tx, record: KeyRecord, spec: Endpoint, answer: unknown) {
  db.update(idempotencyKeys)
    .set({
      status: spec.status ?? 200,
      body: spec.reply === null ? null : JSON.stringify(spec.reply.parse(answer)),
    })
    .where(eq(idempotencyKeys.id, record.id))
    .run()
}

/** Drops keys older than 48 hours; run by the daily sweep. */
export function sweepIdempotencyKeys(deps: Deps) {
  const before = addMinutes(deps.clock.now(), -KEPT_HOURS * 60)
  deps.db.delete(idempotencyKeys).where(lt(idempotencyKeys.createdAt, before)).run()
}
