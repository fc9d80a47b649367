import { and, eq, ne } from 'drizzle-orm'
import { passwordFault, passwordFaultInWords } from '#shared/people/passwords'
import { SignedInMember } from '#shared/session/contract'
import { members, sessions } from '../db/schema/people.ts'
import { write, type Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { AppError, invalidField, notFound } from '../errors.ts'
import type { SignedIn } from '../http/sessions.ts'
import { accountLetter } from './account-letters.ts'
import { isCommonPassword } from './common-passwords.ts'
import { hashPassword, passwordMatches } from './passwords.ts'
import { addMember } from './people.ts'
import { findToken, issueToken, spendToken } from './tokens.ts'

const LINK_GONE = 'This link has been used or has run out. Ask for a new one.'

/** @throws AppError `invalid` with the reason beside the field */
function insistOnGood(password: string, about: { name: string; email: string }) {
  const fault = passwordFault(password, about, isCommonPassword)
  if (fault) throw invalidField('password', passwordFaultInWords(fault))
}

/** Sends an invitation. Refuses an address that already belongs to a member. */
export function invite(
  deps: Deps,
  by: SignedIn,
  invitation: { email: string; name?: string; role: SignedIn['role'] },
) {
  return write(deps.db, (tx) => inviteWithin(tx, deps, by, invitation))
}

export function inviteWithin(
  tx: Tx,
  deps: Deps,
  by: SignedIn,
  { email, name, role }: { email: string; name?: string; role: SignedIn['role'] },
) {
  if (tx.select({ id: members.id }).from(members).where(eq(members.email, email)).get())
    throw invalidField('email', 'A member has that address already.')
  const issued = issueToken(tx, deps, { purpose: 'invitation', email, name, role, createdBy: by.id })
  accountLetter(tx, deps, {
    kind: 'account-invitation',
    toAddress: email,
    name: name ?? 'there',
    facts: { path: `/invitations/${issued.secret}`, by: by.name },
    dedupeKey: `invitation:${issued.id}`,
  })
  return { id: issued.id, email, name: name ?? null, role, expiresAt: issued.expiresAt }
}

/** Whom an invitation is for. */
export function invitationOf(deps: Deps, secret: string) {
  const token = findToken(deps.db, deps, ['invitation', 'first-admin'], secret)
  if (!token) throw new AppError('not-found', LINK_GONE)
  return { email: token.email, name: token.name }
}

/** Makes the account an invitation promises. The hash is made before the transaction; the link is spent inside it. */
export async function acceptInvitation(
  deps: Deps,
  secret: string,
  { name, password }: { name: string; password: string },
): Promise<SignedInMember> {
  const { email } = invitationOf(deps, secret)
  insistOnGood(password, { name, email })
  const passwordHash = await hashPassword(password)
  return write(deps.db, (tx) => {
    const token = findToken(tx, deps, ['invitation', 'first-admin'], secret)
    if (!token || !spendToken(tx, deps, token.id)) throw new AppError('not-found', LINK_GONE)
    if (tx.select({ id: members.id }).from(members).where(eq(members.email, token.email)).get())
      throw new AppError('wrong-state', 'That address has an account already. Sign in instead.')
    const role = token.role ?? 'member'
    const id = addMember(deps, { name, email: token.email, role, passwordHash }, tx)
    return SignedInMember.parse({ id, name, email: token.email, role, status: 'active' })
  })
}

/** Sends a reset link to a member; does nothing for any other address, and says the same. */
export function askReset(deps: Deps, email: string) {
  write(deps.db, (tx) => {
    const member = tx
      .select({ id: members.id, name: members.name })
      .from(members)
      .where(and(eq(members.email, email), ne(members.status, 'left')))
      .get()
    if (!member) return
    const { id, secret } = issueToken(tx, deps, { purpose: 'password-reset', email, memberId: member.id })
    accountLetter(tx, deps, {
      kind: 'account-reset',
      memberId: member.id,
      name: member.name,
      facts: { path: `/forgotten/${secret}` },
      dedupeKey: `reset:${id}`,
    })
  })
}

/** Sets a password by a reset link, ends every session and says so by mail. */
export async function resetPassword(deps: Deps, secret: string, password: string) {
  const token = findToken(deps.db, deps, ['password-reset'], secret)
  const member = token?.memberId && memberRow(deps, token.memberId)
  if (!token || !member) throw new AppError('not-found', LINK_GONE)
  insistOnGood(password, member)
  const passwordHash = await hashPassword(password)
  write(deps.db, (tx) => {
    if (!spendToken(tx, deps, token.id)) throw new AppError('not-found', LINK_GONE)
    setPassword(tx, deps, member.id, passwordHash)
    tx.delete(sessions).where(eq(sessions.memberId, member.id)).run()
  })
}

/** Changes a password that its owner knows, and signs their other browsers out. */
export async function changePassword(
  deps: Deps,
  user: SignedIn,
  sidDigest: string,
  { current, password }: { current: string; password: string },
) {
  const member = memberRow(deps, user.id)
  if (!member) throw notFound('That member')
  if (!(await passwordMatches(member.passwordHash, current)))
    throw invalidField('current', 'That is not your password now.')
  insistOnGood(password, member)
  const passwordHash = await hashPassword(password)
  write(deps.db, (tx) => {
    setPassword(tx, deps, user.id, passwordHash)
    tx.delete(sessions)
      .where(and(eq(sessions.memberId, user.id), ne(sessions.sidDigest, sidDigest)))
      .run()
  })
}

function setPassword(tx: Tx, deps: Deps, memberId: string, passwordHash: string) {
  const now = deps.clock.now()
  tx.update(members).set({ passwordHash, updatedAt: now }).where(eq(members.id, memberId)).run()
  const name =
    tx.select({ name: members.name }).from(members).where(eq(members.id, memberId)).get()?.name ?? ''
  accountLetter(tx, deps, {
    kind: 'account-password-changed',
    memberId,
    name,
    dedupeKey: `password:${memberId}:${now}`,
  })
}

/** Sends a link to the new address and a word to the old one; nothing changes until the link is used. */
export function changeEmail(deps: Deps, user: SignedIn, email: string) {
  write(deps.db, (tx) => {
    if (email === user.email) throw invalidField('email', 'That is your address already.')
    // An address of another member is answered alike; the link to it simply goes nowhere new.
    const { id, secret } = issueToken(tx, deps, { purpose: 'email-change', email, memberId: user.id })
    const taken = tx.select({ id: members.id }).from(members).where(eq(members.email, email)).get()
    if (!taken)
      accountLetter(tx, deps, {
        kind: 'account-email-confirm',
        toAddress: email,
        name: user.name,
        facts: { path: `/email-changes/${secret}` },
        dedupeKey: `email-confirm:${id}`,
      })
    accountLetter(tx, deps, {
      kind: 'account-email-asked',
      memberId: user.id,
      name: user.name,
      dedupeKey: `email-asked:${id}`,
    })
  })
}

export function confirmEmail(deps: Deps, secret: string) {
  write(deps.db, (tx) => {
    const token = findToken(tx, deps, ['email-change'], secret)
    if (!token?.memberId || !spendToken(tx, deps, token.id)) throw new AppError('not-found', LINK_GONE)
    if (tx.select({ id: members.id }).from(members).where(eq(members.email, token.email)).get())
      throw new AppError('wrong-state', 'That address cannot be used.')
    tx.update(members)
      .set({ email: token.email, updatedAt: deps.clock.now() })
      .where(eq(members.id, token.memberId))
      .run()
  })
}

const memberRow = (deps: Deps, id: string) => deps.db.select().from(members).where(eq(members.id, id)).get()
