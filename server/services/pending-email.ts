import { and, eq, gt, isNull } from 'drizzle-orm'
import { tokens } from '../db/schema/accounts.ts'
import type { Deps } from '../deps.ts'

/** An address that waits for its link to be used. */
export const pendingEmail = (deps: Deps, memberId: string) =>
  deps.db
    .select({ email: tokens.email })
    .from(tokens)
    .where(
      and(
        eq(tokens.memberId, memberId),
        eq(tokens.purpose, 'email-change'),
        isNull(tokens.usedAt),
        gt(tokens.expiresAt, deps.clock.now()),
      ),
    )
    .get()?.email ?? null
