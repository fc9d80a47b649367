import { and, eq, gt, isNull } from 'drizzle-orm'
import type { Role, TokenPurpose } from '#shared/people/vocabulary'
import { addMinutes } from '#shared/time/instant'
import { tokens } from '../db/schema/accounts.ts'
import type { Db, Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { digest, newId, newToken } from '../ids.ts'

/** How long each kind of link holds, in minutes. */
const LIFE: Record<TokenPurpose, number> = {
  invitation: 72 * 60,
  'password-reset': 30,
  'email-change': 24 * 60,
  'first-admin': 24 * 60,
}

interface Issue {
  purpose: TokenPurpose
  email: string
  memberId?: string
  name?: string
  role?: Role
  createdBy?: string
}

/** Makes a link's secret, keeps its digest, and voids the earlier ones for the same thing. */
export function issueToken(tx: Tx, deps: Pick<Deps, 'clock'>, issue: Issue) {
  const now = deps.clock.now()
  const same = issue.memberId ? eq(tokens.memberId, issue.memberId) : eq(tokens.email, issue.email)
  tx.update(tokens)
    .set({ usedAt: now })
    .where(and(same, eq(tokens.purpose, issue.purpose), isNull(tokens.usedAt)))
    .run()
  const secret = newToken()
  const row = {
    ...issue,
    id: newId(),
    digest: digest(secret),
    createdAt: now,
    expiresAt: addMinutes(now, LIFE[issue.purpose]),
  }
  tx.insert(tokens).values(row).run()
  return { secret, id: row.id, expiresAt: row.expiresAt }
}

/** The unused, unexpired token behind a link, if there is one. */
export const findToken = (db: Db | Tx, deps: Deps, purposes: TokenPurpose[], secret: string) => {
  const row = db
    .select()
    .from(tokens)
    .where(
      and(eq(tokens.digest, digest(secret)), isNull(tokens.usedAt), gt(tokens.expiresAt, deps.clock.now())),
    )
    .get()
  return row && purposes.includes(row.purpose) ? row : undefined
}

/** Uses a token up; false when another request was first. */
export const spendToken = (tx: Tx, deps: Deps, id: string) =>
  tx
    .update(tokens)
    .set({ usedAt: deps.clock.now() })
    .where(and(eq(tokens.id, id), isNull(tokens.usedAt)))
    .run().changes === 1
