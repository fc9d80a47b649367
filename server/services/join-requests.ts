import { and, asc, eq, sql } from 'drizzle-orm'
import type { JoinRequestStatus } from '#shared/people/vocabulary'
import { joinRequests } from '../db/schema/accounts.ts'
import { members } from '../db/schema/people.ts'
import { write, type Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { AppError, notFound } from '../errors.ts'
import { decodeCursor, pageFrom } from '../http/cursor.ts'
import type { SignedIn } from '../http/sessions.ts'
import { newId } from '../ids.ts'
import { accountLetter } from './account-letters.ts'
import { inviteWithin } from './accounts.ts'

interface Asked {
  name: string
  email: string
  note?: string
}

/** Keeps a request to join. Says nothing of whether the address is known: a member's is dropped, a second one replaces. */
export function askToJoin(deps: Deps, { name, email, note }: Asked) {
  write(deps.db, (tx) => {
    if (tx.select({ id: members.id }).from(members).where(eq(members.email, email)).get()) return
    const waiting = and(eq(joinRequests.email, email), eq(joinRequests.status, 'waiting'))
    const values = { name, note: note || null, askedAt: deps.clock.now() }
    if (tx.update(joinRequests).set(values).where(waiting).run().changes > 0) return
    tx.insert(joinRequests)
      .values({ ...values, id: newId(), email, status: 'waiting' })
      .run()
  })
}

export function listJoinRequests(
  deps: Deps,
  { limit, cursor, status }: { limit: number; cursor?: string; status?: JoinRequestStatus },
) {
  const [at, id] = cursor ? decodeCursor(cursor, 2).map(String) : ['', '']
  const rows = deps.db
    .select()
    .from(joinRequests)
    .where(and(status && eq(joinRequests.status, status), cursor ? after(at ?? '', id ?? '') : undefined))
    .orderBy(asc(joinRequests.askedAt), asc(joinRequests.id))
    .limit(limit + 1)
    .all()
  return pageFrom(rows, limit, (row) => [row.askedAt, row.id])
}

const after = (at: string, id: string) => sql`(${joinRequests.askedAt}, ${joinRequests.id}) > (${at}, ${id})`

export function welcome(deps: Deps, by: SignedIn, id: string) {
  return write(deps.db, (tx) => {
    const request = waitingRequest(tx, id)
    inviteWithin(tx, deps, by, { email: request.email, name: request.name, role: 'member' })
    return answer(tx, deps, by, id, 'welcomed')
  })
}

export function turnDown(deps: Deps, by: SignedIn, id: string, reason: string) {
  return write(deps.db, (tx) => {
    const request = waitingRequest(tx, id)
    accountLetter(tx, deps, {
      kind: 'account-declined',
      toAddress: request.email,
      name: request.name,
      facts: { reason },
      dedupeKey: `join-declined:${id}`,
    })
    return answer(tx, deps, by, id, 'declined')
  })
}

function waitingRequest(tx: Tx, id: string) {
  const request = tx.select().from(joinRequests).where(eq(joinRequests.id, id)).get()
  if (!request) throw notFound('That request')
  if (request.status !== 'waiting')
    throw new AppError('wrong-state', `Somebody answered this already: ${request.status}.`)
  return request
}

function answer(tx: Tx, deps: Deps, by: SignedIn, id: string, status: JoinRequestStatus) {
  return tx
    .update(joinRequests)
    .set({ status, answeredAt: deps.clock.now(), answeredBy: by.id })
    .where(eq(joinRequests.id, id))
    .returning()
    .get()
}
