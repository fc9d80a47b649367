import { and, desc, eq, lt, ne, sql } from 'drizzle-orm'
import type { Db, Tx } from '../db/open.ts'
import { members } from '../db/schema/people.ts'
import { auditTrail } from '../db/schema/space.ts'
import { write } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { decodeCursor, pageFrom } from '../http/cursor.ts'
import { digest } from '../ids.ts'

interface Fact {
  actorId: string | undefined
  /** `POST /loans/:id/approve`. */
  action: string
  subject?: string
  /** `done`, or the code of the refusal. */
  outcome: string
}

const hashOf = (previous: string, row: { seq: number; at: string } & Record<string, unknown>) =>
  digest(
    JSON.stringify([
      previous,
      row.seq,
      row.at,
      row.actorId ?? null,
      row.action,
      row.subject ?? null,
      row.outcome,
    ]),
  )

/** Adds a line to the trail. Each line's hash covers the line before it, so that none can be changed or taken out unseen. */
export function recordAudit(deps: Deps, fact: Fact) {
  write(deps.db, (tx) => {
    const last = lastEntry(tx)
    const row = {
      seq: (last?.seq ?? 0) + 1,
      at: deps.clock.now(),
      actorId: fact.actorId ?? null,
      action: fact.action,
      subject: fact.subject ?? null,
      outcome: fact.outcome,
    }
    tx.insert(auditTrail)
      .values({ ...row, hash: hashOf(last?.hash ?? '', row) })
      .run()
  })
}

const lastEntry = (db: Db | Tx) =>
  db
    .select({ seq: auditTrail.seq, hash: auditTrail.hash })
    .from(auditTrail)
    .orderBy(desc(auditTrail.seq))
    .limit(1)
    .get()

interface AuditQuery {
  limit: number
  cursor?: string
  q?: string
  actorId?: string
  outcome?: 'done' | 'refused'
}

/** The trail, newest first, with the names people have now. */
export function listAudit(deps: Deps, { limit, cursor, q, actorId, outcome }: AuditQuery) {
  const [before] = cursor ? decodeCursor(cursor, 1) : []
  const rows = deps.db
    .select({
      seq: auditTrail.seq,
      at: auditTrail.at,
      actorId: auditTrail.actorId,
      actorName: members.name,
      action: auditTrail.action,
      subject: auditTrail.subject,
      outcome: auditTrail.outcome,
    })
    .from(auditTrail)
    .leftJoin(members, eq(members.id, auditTrail.actorId))
    .where(
      and(
        before === undefined ? undefined : lt(auditTrail.seq, Number(before)),
        actorId ? eq(auditTrail.actorId, actorId) : undefined,
        outcome === 'done' ? eq(auditTrail.outcome, 'done') : undefined,
        outcome === 'refused' ? ne(auditTrail.outcome, 'done') : undefined,
        q
          ? sql`(instr(lower(${auditTrail.action}), ${q.toLowerCase()}) > 0
              OR instr(lower(coalesce(${members.name}, '')), ${q.toLowerCase()}) > 0
              OR ${auditTrail.subject} = ${q})`
          : undefined,
      ),
    )
    .orderBy(desc(auditTrail.seq))
    .limit(limit + 1)
    .all()
  return pageFrom(rows, limit, (row) => [row.seq])
}

/** Walks the whole chain; says at which line it breaks, or null. */
export function checkAudit(db: Db) {
  let previous = ''
  let entries = 0
  for (const row of db.select().from(auditTrail).orderBy(auditTrail.seq).all()) {
    entries += 1
    if (row.seq !== entries || row.hash !== hashOf(previous, row)) return { entries, brokenAt: row.seq }
    previous = row.hash
  }
  return { entries, brokenAt: null }
}
