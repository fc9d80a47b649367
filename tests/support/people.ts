import { createHmac, randomBytes } from 'node:crypto'
import request, { type Agent } from 'supertest'
import { eq } from 'drizzle-orm'
import type { MemberStatus, Role } from '#shared/people/vocabulary'
import { members, sessions } from '#server/db/schema/people'
import { digest } from '#server/ids'
import { addMember } from '#server/services/people'
import { touch } from '#server/http/sessions'
import { SESSION_SECRET, type TestApp } from './test-app.ts'

export interface Person {
  id: string
  name: string
  email: string
  /** Signed in: a supertest agent with this person's cookie. */
  agent: Agent
  cookie: string
}

/** A member with an open session. No test walks through the sign-in form except the sign-in tests. */
export function person(
  app: TestApp,
  name: string,
  role: Role = 'member',
  status: MemberStatus = 'active',
): Person {
  const email = `${name.toLowerCase().replaceAll(' ', '.')}@barmhouse.example`
  const id = addMember(app.deps, { name, email, role, passwordHash: null })
  if (status !== 'active') app.db.update(members).set({ status }).where(eq(members.id, id)).run()
  const cookie = openSession(app, id, role)
  const agent = request.agent(app.app)
  void agent.set('Cookie', cookie)
  return { id, name, email, agent, cookie }
}

/** Writes a session row and gives back the cookie that opens it. */
export function openSession(app: TestApp, memberId: string, role: Role): string {
  const sid = randomBytes(24).toString('base64url')
  const now = app.clock.now()
  const data = { cookie: { originalMaxAge: 86_400_000, httpOnly: true, path: '/' }, memberId }
  app.db
    .insert(sessions)
    .values({
      sidDigest: digest(sid),
      memberId,
      data: JSON.stringify(data),
      createdAt: now,
      seenAt: now,
      expiresAt: now,
    })
    .run()
  touch(app.deps, digest(sid), now, role)
  const signature = createHmac('sha256', SESSION_SECRET).update(sid).digest('base64').replace(/=+$/, '')
  return `sid=${encodeURIComponent(`s:${sid}.${signature}`)}`
}

/** Signs a person in again, where time has passed and their session with it. */
export function comeBack(app: TestApp, who: Person, role: Role = 'member') {
  who.cookie = openSession(app, who.id, role)
  void who.agent.set('Cookie', who.cookie)
}

/** The usual cast: two members, a steward, an admin. */
export const people = (app: TestApp) => ({
  ada: person(app, 'Ada Marsh'),
  bo: person(app, 'Bo Linden'),
  sam: person(app, 'Sam Tolliver', 'steward'),
  kit: person(app, 'Kit Harrow', 'admin'),
})
