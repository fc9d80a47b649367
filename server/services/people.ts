import { and, asc, count, eq, ne, or, sql } from 'drizzle-orm'
import type { Me, Member } from '#shared/people/contract'
import type { MemberStatus, Role } from '#shared/people/vocabulary'
import { loans } from '../db/schema/loans.ts'
import { members, sessions } from '../db/schema/people.ts'
import { write, type Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { AppError, notFound } from '../errors.ts'
import { decodeCursor, pageFrom } from '../http/cursor.ts'
import type { SignedIn } from '../http/sessions.ts'
import { newId } from '../ids.ts'
import { hasFeed } from './feed.ts'
import { pendingEmail } from './pending-email.ts'

interface NewMember {
  name: string
  email: string
  role: Role
  passwordHash: string | null
  phone?: string
}

/** Adds a member and gives back their id. The address is kept in lower case; it can belong to one member only. */
export function addMember(deps: Deps, member: NewMember, db: Deps['db'] | Tx = deps.db): string {
  const id = newId()
  const now = deps.clock.now()
  db.insert(members)
    .values({
      ...member,
      id,
      email: member.email.toLowerCase(),
      phone: member.phone ?? null,
      status: 'active',
      createdAt: now,
      updatedAt: now,
    })
    .run()
  return id
}

/** A member's own account, as they see it. */
export function meOf(deps: Deps, id: string): Me {
  const row = deps.db.select().from(members).where(eq(members.id, id)).get()
  if (!row) throw notFound('That member')
  return {
    ...row,
    memberSince: row.createdAt,
    pendingEmail: pendingEmail(deps, id),
    secondFactor: false,
    calendarFeed: hasFeed(deps, id),
    erasedOn: row.eraseOn,
  }
}

export function editMe(
  deps: Deps,
  id: string,
  version: number,
  change: { name?: string; phone?: string | null },
): Me {
  changeMember(deps, id, version, change)
  return meOf(deps, id)
}

/** Changes a member's row if it is still the version that was seen. */
function changeMember(
  deps: Deps,
  id: string,
  version: number,
  change: Partial<Pick<typeof members.$inferInsert, 'name' | 'phone' | 'role' | 'status'>>,
  db: Deps['db'] | Tx = deps.db,
) {
  const { changes } = db
    .update(members)
    .set({ ...change, version: version + 1, updatedAt: deps.clock.now() })
    .where(and(eq(members.id, id), eq(members.version, version)))
    .run()
  if (changes === 0)
    throw new AppError('stale', 'Somebody changed this meanwhile. Load it again, then make your change.')
}

interface MemberQuery {
  limit: number
  cursor?: string
  q?: string
  role?: Role
  status?: MemberStatus
}

const memberColumns = {
  id: members.id,
  name: members.name,
  email: members.email,
  phone: members.phone,
  role: members.role,
  status: members.status,
  memberSince: members.createdAt,
  version: members.version,
  loansOut: sql<number>`(SELECT count(*) FROM ${loans} WHERE ${loans.memberId} = ${members.id} AND ${loans.status} = 'out')`,
}
const overdueOn = (today: string) =>
  sql<number>`(SELECT count(*) FROM ${loans} WHERE ${loans.memberId} = ${members.id} AND ${loans.status} = 'out' AND ${loans.toOn} < ${today})`

/** Members by name, for stewards. */
export function listMembers(deps: Deps, { limit, cursor, q, role, status }: MemberQuery) {
  const [name, id] = cursor ? decodeCursor(cursor, 2).map(String) : []
  const rows = deps.db
    .select({ ...memberColumns, overdue: overdueOn(deps.clock.today()) })
    .from(members)
    .where(
      and(
        role && eq(members.role, role),
        status ? eq(members.status, status) : ne(members.status, 'left'),
        q ? or(contains(members.name, q), contains(members.email, q)) : undefined,
        cursor ? sql`(${members.name}, ${members.id}) > (${name}, ${id})` : undefined,
      ),
    )
    .orderBy(asc(members.name), asc(members.id))
    .limit(limit + 1)
    .all()
  return pageFrom(rows, limit, (row) => [row.name, row.id])
}

const contains = (column: typeof members.name | typeof members.email, q: string) =>
  sql`instr(lower(${column}), ${q.toLowerCase()}) > 0`

export function getMember(deps: Deps, id: string): Member {
  const row = deps.db
    .select({ ...memberColumns, overdue: overdueOn(deps.clock.today()) })
    .from(members)
    .where(and(eq(members.id, id), ne(members.status, 'left')))
    .get()
  if (!row) throw notFound('That member')
  return row
}

/** Sets a member's role or suspends them. The last admin stays one: somebody must be able to open the door. */
export function editMember(
  deps: Deps,
  by: SignedIn,
  id: string,
  version: number,
  change: { role?: Role; status?: 'active' | 'suspended' },
): Member {
  write(deps.db, (tx) => {
    const before = getMember(deps, id)
    const losesAdmin =
      before.role === 'admin' && ((change.role && change.role !== 'admin') || change.status === 'suspended')
    if (losesAdmin && otherAdmins(tx, id) === 0)
      throw new AppError('wrong-state', 'This is the only admin. Make somebody else an admin first.')
    if (id === by.id && change.status === 'suspended')
      throw new AppError('forbidden', 'You cannot suspend yourself. Ask another admin.')
    changeMember(deps, id, version, change, tx)
    // A new role counts from the next request; what a session may do longest depends on it, so sessions end.
    if (change.role && change.role !== before.role) tx.delete(sessions).where(eq(sessions.memberId, id)).run()
  })
  return getMember(deps, id)
}

const otherAdmins = (tx: Tx, id: string) =>
  tx
    .select({ admins: count() })
    .from(members)
    .where(and(eq(members.role, 'admin'), eq(members.status, 'active'), ne(members.id, id)))
    .get()?.admins ?? 0
