import { and, asc, eq, gt, inArray, sql } from 'drizzle-orm'
import { limitBreaches, breachSentence } from '#shared/loans/limits'
import { type Waiting, type WaitingRequest, WAITINGS_MAX } from '#shared/loans/waiting-contract'
import type { Page } from '#shared/http/paging'
import { roleCovers } from '#shared/people/vocabulary'
import { addDays } from '#shared/time/day'
import { kinds } from '../../db/schema/kit.ts'
import { waitings } from '../../db/schema/loans.ts'
import { members } from '../../db/schema/people.ts'
import { write, type Db, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, invalidField, notFound } from '../../errors.ts'
import { decodeCursor, pageFrom } from '../../http/cursor.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { newId } from '../../ids.ts'
import { offerNext } from './offers.ts'
import { rollLoans } from './round.ts'

const IN_LINE = ['waiting', 'offered'] as const

const selectWaitings = (db: Db | Tx) =>
  db
    .select({ waiting: waitings, kindName: kinds.name, memberName: members.name })
    .from(waitings)
    .innerJoin(kinds, eq(kinds.id, waitings.kindId))
    .innerJoin(members, eq(members.id, waitings.memberId))

type Row = ReturnType<ReturnType<typeof selectWaitings>['all']>[number]

const asWaiting = ({ waiting, ...names }: Row): Waiting => ({
  ...waiting,
  ...names,
  from: waiting.fromOn,
  to: waiting.toOn,
})

interface WaitingQuery {
  limit: number
  cursor?: string | undefined
  kindId?: string | undefined
  member: 'me' | 'all'
}

/** Who waits and has been offered something, first in line first. */
export function listWaitings(deps: Deps, user: SignedIn, query: WaitingQuery): Page<Waiting> {
  const isSteward = user.status === 'active' && roleCovers(user.role, 'steward')
  if (query.member === 'all' && !isSteward)
    throw new AppError('forbidden', 'Only a steward can see who else is waiting.')
  const after = query.cursor ? (decodeCursor(query.cursor, 2) as [string, string]) : undefined
  const rows = selectWaitings(deps.db)
    .where(
      and(
        inArray(waitings.state, IN_LINE),
        query.member === 'me' ? eq(waitings.memberId, user.id) : undefined,
        query.kindId === undefined ? undefined : eq(waitings.kindId, query.kindId),
        after && gt(sql`(${waitings.createdAt}, ${waitings.id})`, sql`(${after[0]}, ${after[1]})`),
      ),
    )
    .orderBy(asc(waitings.createdAt), asc(waitings.id))
    .limit(query.limit + 1)
    .all()
  const page = pageFrom(rows, query.limit, ({ waiting }) => [waiting.createdAt, waiting.id])
  return { ...page, items: page.items.map(asWaiting) }
}

/**
 * Puts a member in line. If the days are free after all, they are offered at once.
 * @throws AppError `not-found`, `over-limit`, `wrong-state` when they wait for the same already
 */
export function joinWaiting(deps: Deps, user: SignedIn, request: WaitingRequest): Waiting {
  const { kindId, from, to } = request
  const today = deps.clock.today()
  if (from < today) throw invalidField('from', 'That day has passed. Choose a later one.')
  return write(deps.db, (tx) => {
    rollLoans(tx, deps)
    const kind = tx.select().from(kinds).where(eq(kinds.id, kindId)).get()
    if (!kind || kind.retiredAt !== null) throw notFound('That kind')
    const [breach] = limitBreaches({ from, to }, kind, [], today)
    if (breach) throw new AppError('over-limit', breachSentence(breach))
    const wild = kind.wildOnly || (request.wild ?? false)
    const mine = tx
      .select()
      .from(waitings)
      .where(and(eq(waitings.memberId, user.id), inArray(waitings.state, IN_LINE)))
      .all()
    if (
      mine.some(
        (other) =>
          other.kindId === kindId && other.wild === wild && other.fromOn === from && other.toOn === to,
      )
    )
      throw new AppError('wrong-state', 'You are in line for this already.')
    if (mine.length >= WAITINGS_MAX)
      throw new AppError(
        'over-limit',
        `You can be in line for ${WAITINGS_MAX} things at once. Leave another line first.`,
      )
    const id = newId()
    const now = deps.clock.now()
    const row = { id, kindId, memberId: user.id, wild, fromOn: from, toOn: to }
    const blocksUntilOn = addDays(to, kind.turnaroundDays)
    tx.insert(waitings)
      .values({ ...row, blocksUntilOn, state: 'waiting', createdAt: now, updatedAt: now })
      .run()
    offerNext(tx, deps, { kindId, wild })
    return asWaiting(waitingRow(tx, id))
  })
}

/** Leaves the line, or lets an offer go to the next. @throws AppError `not-found` */
export function leaveWaiting(deps: Deps, user: SignedIn, id: string) {
  write(deps.db, (tx) => {
    const { waiting } = waitingRow(tx, id)
    const isSteward = user.status === 'active' && roleCovers(user.role, 'steward')
    if (waiting.memberId !== user.id && !isSteward) throw notFound('That place in line')
    if (waiting.state !== 'waiting' && waiting.state !== 'offered') return
    tx.update(waitings).set({ state: 'left', updatedAt: deps.clock.now() }).where(eq(waitings.id, id)).run()
    if (waiting.state === 'offered') offerNext(tx, deps, waiting)
  })
}

function waitingRow(db: Db | Tx, id: string): Row {
  const row = selectWaitings(db).where(eq(waitings.id, id)).get()
  if (!row) throw notFound('That place in line')
  return row
}
