import { and, asc, eq, gt, ne, sql } from 'drizzle-orm'
import { alias } from 'drizzle-orm/sqlite-core'
import type { Page } from '#shared/http/paging'
import { inductionExpiry, isInducted } from '#shared/kit/induction'
import type { Induction } from '#shared/kit/kind-contract'
import type { CalendarDay } from '#shared/time/day'
import { inductions, kinds } from '../../db/schema/kit.ts'
import { members } from '../../db/schema/people.ts'
import { write, type Db, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, invalidField, notFound } from '../../errors.ts'
import { decodeCursor, pageFrom } from '../../http/cursor.ts'
import type { SignedIn } from '../../http/sessions.ts'

const giver = alias(members, 'giver')

const selectInductions = (db: Db | Tx) =>
  db
    .select({ induction: inductions, memberName: members.name, givenByName: giver.name })
    .from(inductions)
    .innerJoin(members, eq(members.id, inductions.memberId))
    .innerJoin(giver, eq(giver.id, inductions.givenBy))

type Row = ReturnType<ReturnType<typeof selectInductions>['all']>[number]

const asReply = ({ induction, ...names }: Row, today: CalendarDay): Induction => ({
  ...induction,
  ...names,
  valid: isInducted(induction, today),
})

/** Who had the induction of a kind, by name. */
export function listInductions(
  deps: Deps,
  kindId: string,
  query: { limit: number; cursor?: string | undefined },
): Page<Induction> {
  if (!deps.db.select({ id: kinds.id }).from(kinds).where(eq(kinds.id, kindId)).get())
    throw notFound('That kind of kit')
  const after = query.cursor ? decodeCursor(query.cursor, 2) : undefined
  const rows = selectInductions(deps.db)
    .where(
      and(
        eq(inductions.kindId, kindId),
        after && gt(sql`(${members.name}, ${members.id})`, sql`(${after[0]}, ${after[1]})`),
      ),
    )
    .orderBy(asc(members.name), asc(members.id))
    .limit(query.limit + 1)
    .all()
    .map((row) => asReply(row, deps.clock.today()))
  return pageFrom(rows, query.limit, (row) => [row.memberName, row.memberId])
}

/**
 * Records an induction, or renews it.
 * @throws AppError `not-found` for a member or kind that is not there, `wrong-state` for a kind that needs none
 */
export function giveInduction(
  deps: Deps,
  user: Pick<SignedIn, 'id'>,
  memberId: string,
  kindId: string,
  givenOn: CalendarDay = deps.clock.today(),
): Induction {
  if (givenOn > deps.clock.today()) throw invalidField('givenOn', 'That day has not come yet.')
  return write(deps.db, (tx) => {
    const kind = tx.select().from(kinds).where(eq(kinds.id, kindId)).get()
    const member = tx
      .select({ id: members.id })
      .from(members)
      .where(and(eq(members.id, memberId), ne(members.status, 'left')))
      .get()
    if (!kind) throw notFound('That kind of kit')
    if (!member) throw notFound('That member')
    if (!kind.needsInduction) throw new AppError('wrong-state', `${kind.name} needs no induction.`)
    const given = {
      givenBy: user.id,
      givenOn,
      expiresOn: inductionExpiry(givenOn, kind.inductionMonths) ?? null,
    }
    tx.insert(inductions)
      .values({ memberId, kindId, ...given })
      .onConflictDoUpdate({ target: [inductions.memberId, inductions.kindId], set: given })
      .run()
    const row = selectInductions(tx).where(isOf(memberId, kindId)).get()
    if (!row) throw notFound('That induction')
    return asReply(row, deps.clock.today())
  })
}

/** @throws AppError `not-found` */
export function takeInduction(deps: Deps, memberId: string, kindId: string) {
  const gone = deps.db.delete(inductions).where(isOf(memberId, kindId)).run()
  if (gone.changes === 0) throw notFound('That induction')
}

const isOf = (memberId: string, kindId: string) =>
  and(eq(inductions.memberId, memberId), eq(inductions.kindId, kindId))
