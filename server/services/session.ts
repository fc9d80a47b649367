import { eq } from 'drizzle-orm'
import { SignedInMember } from '#shared/session/contract'
import { members } from '../db/schema/people.ts'
import type { Deps } from '../deps.ts'
import { AppError } from '../errors.ts'
import { countFailure, forgetFailures, refuseWhileThrottled } from '../http/sign-in-throttle.ts'
import { recordAudit } from './audit.ts'
import { hashPassword, needsRehash, passwordMatches } from './passwords.ts'

/**
 * The member these credentials belong to.
 * @throws AppError `signed-out` with the same words for an unknown address and a wrong password; `too-many`
 */
export async function checkCredentials(deps: Deps, email: string, password: string): Promise<SignedInMember> {
  const address = email.toLowerCase()
  const key = `sign-in:${address}`
  refuseWhileThrottled(deps, key)
  const row = deps.db.select().from(members).where(eq(members.email, address)).get()
  const member = row?.status === 'left' ? undefined : row
  if (!(await passwordMatches(member?.passwordHash ?? null, password)) || !member) {
    countFailure(deps, key)
    recordAudit(deps, { actorId: member?.id, action: 'POST /session', outcome: 'signed-out' })
    throw new AppError(
      'signed-out',
      'That e-mail address and password do not go together. Check both and try again.',
    )
  }
  forgetFailures(deps, key)
  if (member.passwordHash && needsRehash(member.passwordHash)) {
    const passwordHash = await hashPassword(password)
    deps.db.update(members).set({ passwordHash }).where(eq(members.id, member.id)).run()
  }
  return SignedInMember.parse(member)
}
