import { Store, type SessionData } from 'express-session'
import session from 'express-session'
import type { Request, RequestHandler } from 'express'
import { eq, lt } from 'drizzle-orm'
import { addMinutes, type Instant } from '#shared/time/instant'
import type { MemberStatus, Role } from '#shared/people/vocabulary'
import { prepared } from '../db/prepared.ts'
import { sessions } from '../db/schema/people.ts'
import type { Deps } from '../deps.ts'
import { invalidField } from '../errors.ts'
import { digest } from '../ids.ts'
import { deviceInWords } from '../services/own-sessions.ts'
import { checkCredentials } from '../services/session.ts'

declare module 'express-session' {
  interface SessionData {
    memberId: string
    /** When a password was last given in this session. */
    provenAt: string
  }
}

export interface SignedIn {
  id: string
  name: string
  email: string
  role: Role
  status: MemberStatus
}

declare module 'express-serve-static-core' {
  interface Locals {
    user?: SignedIn
  }
}

const HOUR = 60
const DAY = 24 * HOUR

/** Idle and absolute life of a session in minutes: members as NIST SP 800-63B-4 AAL1 allows, stewards and admins as AAL2. */
export const SESSION_LIFE = {
  member: { idle: 7 * DAY, absolute: 30 * DAY },
  steward: { idle: HOUR, absolute: DAY },
  admin: { idle: HOUR, absolute: DAY },
} as const satisfies Record<Role, { idle: number; absolute: number }>

/** A busy page should not write the same row at every request. */
const TOUCH_EVERY = 1

// Asked at every request, so prepared once: building them anew was a fifth of what a short answer costs.
const SESSION_DATA = 'SELECT data FROM sessions WHERE sid_digest = @sid AND expires_at > @now'
const SESSION_MEMBER = `
SELECT m.id, m.name, m.email, m.role, m.status, s.created_at AS createdAt, s.seen_at AS seenAt
FROM sessions AS s JOIN members AS m ON m.id = s.member_id WHERE s.sid_digest = @sid`

/** Sessions in SQLite, keyed by a digest of their id. Callbacks are called synchronously: the driver is. */
class DatabaseStore extends Store {
  readonly deps: Deps

  constructor(deps: Deps) {
    super()
    this.deps = deps
  }

  override get = (sid: string, done: (error?: unknown, data?: SessionData | null) => void) => {
    const bind = { sid: digest(sid), now: this.deps.clock.now() }
    const row = prepared<typeof bind, { data: string }>(this.deps.db, SESSION_DATA).get(bind)
    done(null, row ? (JSON.parse(row.data) as SessionData) : null)
  }

  override set = (sid: string, data: SessionData, done?: (error?: unknown) => void) => {
    const now = this.deps.clock.now()
    const row = { memberId: data.memberId ?? null, data: JSON.stringify(data) }
    this.deps.db
      .insert(sessions)
      .values({
        ...row,
        sidDigest: digest(sid),
        createdAt: now,
        seenAt: now,
        expiresAt: addMinutes(now, HOUR),
      })
      .onConflictDoUpdate({ target: sessions.sidDigest, set: row })
      .run()
    done?.()
  }

  override destroy = (sid: string, done?: (error?: unknown) => void) => {
    this.deps.db
      .delete(sessions)
      .where(eq(sessions.sidDigest, digest(sid)))
      .run()
    done?.()
  }

  /** Idle time is counted by {@link knowMember}, which knows the role. */
  override touch = (_sid: string, _data: SessionData, done?: () => void) => done?.()
}

/** Reads the session cookie. The name carries `__Host-` wherever the app is reached over TLS. */
export function sessionCookie(deps: Deps, secret: string): RequestHandler {
  const secure = deps.appUrl.startsWith('https:')
  return session({
    name: secure ? '__Host-sid' : 'sid',
    secret,
    store: new DatabaseStore(deps),
    resave: false,
    saveUninitialized: false,
    cookie: {
      httpOnly: true,
      sameSite: 'lax',
      secure,
      path: '/',
      maxAge: SESSION_LIFE.member.absolute * 60_000,
    },
  })
}

/** Puts the signed-in member into `res.locals.user`; ends sessions past their idle or absolute life. */
export const knowMember =
  (deps: Deps): RequestHandler =>
  (req, res, next) => {
    if (!req.session.memberId) return next()
    const sid = digest(req.sessionID)
    const row = prepared<{ sid: string }, SignedIn & { createdAt: Instant; seenAt: Instant }>(
      deps.db,
      SESSION_MEMBER,
    ).get({ sid })
    if (!row || row.status === 'left') return next()
    const now = deps.clock.now()
    const { createdAt, seenAt, ...user } = row
    const life = SESSION_LIFE[user.role]
    if (now > addMinutes(createdAt, life.absolute) || now > addMinutes(seenAt, life.idle)) {
      deps.db.delete(sessions).where(eq(sessions.sidDigest, sid)).run()
      return next()
    }
    if (now > addMinutes(seenAt, TOUCH_EVERY)) touch(deps, sid, createdAt, user.role)
    res.locals.user = user
    next()
  }

/** Starts the life of a fresh session, or keeps a used one alive: whichever of idle and absolute comes first. */
export function touch(deps: Deps, sidDigest: string, createdAt: Instant, role: Role) {
  const now = deps.clock.now()
  const life = SESSION_LIFE[role]
  const idleEnd = addMinutes(now, life.idle)
  const absoluteEnd = addMinutes(createdAt, life.absolute)
  deps.db
    .update(sessions)
    .set({ seenAt: now, expiresAt: idleEnd < absoluteEnd ? idleEnd : absoluteEnd })
    .where(eq(sessions.sidDigest, sidDigest))
    .run()
}

export function sweepSessions(deps: Deps) {
  deps.db.delete(sessions).where(lt(sessions.expiresAt, deps.clock.now())).run()
}

/** A new session id at sign-in, so that one planted beforehand is worth nothing. */
export async function startSession(deps: Deps, req: Request, member: { id: string; role: Role }) {
  await new Promise<void>((resolve, reject) => {
    req.session.regenerate((error) => (error ? reject(error as Error) : resolve()))
  })
  req.session.memberId = member.id
  req.session.provenAt = deps.clock.now()
  await new Promise<void>((resolve, reject) => {
    req.session.save((error) => (error ? reject(error as Error) : resolve()))
  })
  const sid = digest(req.sessionID)
  const device = deviceInWords(req.get('user-agent'))
  deps.db.update(sessions).set({ device }).where(eq(sessions.sidDigest, sid)).run()
  touch(deps, sid, deps.clock.now(), member.role)
}

export const endSession = (req: Request) =>
  new Promise<void>((resolve, reject) => {
    req.session.destroy((error) => (error ? reject(error as Error) : resolve()))
  })

export const sidDigestOf = (req: Request) => digest(req.sessionID)

/** Minutes for which a password just given is proof enough for a risky act. */
const FRESH = 10

/**
 * Wants proof that it is still the member at the keys: a password given lately, or given now.
 * @throws AppError `invalid` at `password`
 */
export async function insistOnFresh(deps: Deps, req: Request, user: SignedIn, password: string | undefined) {
  const now = deps.clock.now()
  const provenAt = req.session.provenAt as Instant | undefined
  if (password === undefined && provenAt && now <= addMinutes(provenAt, FRESH)) return
  if (password === undefined) throw invalidField('password', 'Give your password once more.')
  await checkCredentials(deps, user.email, password)
  req.session.provenAt = now
}
