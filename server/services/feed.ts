import { and, asc, eq, gte, inArray, or } from 'drizzle-orm'
import ical, { ICalEventStatus, ICalEventTransparency } from 'ical-generator'
import { addDays, type CalendarDay } from '#shared/time/day'
import { addMinutes, type Instant } from '#shared/time/instant'
import { calendarFeeds } from '../db/schema/feeds.ts'
import { items, kinds } from '../db/schema/kit.ts'
import { loans } from '../db/schema/loans.ts'
import { members } from '../db/schema/people.ts'
import { write } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { notFound } from '../errors.ts'
import { digest, newToken } from '../ids.ts'
import { getSpace } from './space.ts'

/** Days for which a loan that fell through stays in the feed as cancelled, so that every program drops it. */
const CANCELLED_DAYS = 30
/** Days after which what came back leaves the feed. */
const PAST_DAYS = 90

/** Makes the address, or a new one in place of the old, which stops working at once. */
export function makeFeed(deps: Deps, memberId: string): { url: string } {
  const secret = newToken()
  const now = deps.clock.now()
  const values = { digest: digest(secret), createdAt: now, readAt: now }
  deps.db
    .insert(calendarFeeds)
    .values({ memberId, ...values })
    .onConflictDoUpdate({ target: calendarFeeds.memberId, set: values })
    .run()
  return { url: `${deps.appUrl}/calendar/${secret}.ics` }
}

export const revokeFeed = (deps: Deps, memberId: string) =>
  void deps.db.delete(calendarFeeds).where(eq(calendarFeeds.memberId, memberId)).run()

export const hasFeed = (deps: Deps, memberId: string) =>
  deps.db.select().from(calendarFeeds).where(eq(calendarFeeds.memberId, memberId)).get() !== undefined

export interface FeedLoan {
  id: string
  kindName: string
  tag: string | null
  fromOn: CalendarDay
  toOn: CalendarDay
  status: string
  sequence: number
  updatedAt: Instant
}

/** The feed behind an address: all-day events, the same bytes for as long as nothing changes. */
export function readFeed(deps: Deps, secret: string): string {
  const feed = deps.db
    .select({ memberId: calendarFeeds.memberId, readAt: calendarFeeds.readAt, status: members.status })
    .from(calendarFeeds)
    .innerJoin(members, eq(members.id, calendarFeeds.memberId))
    .where(eq(calendarFeeds.digest, digest(secret)))
    .get()
  if (!feed || feed.status === 'left') throw notFound('That calendar')
  const now = deps.clock.now()
  if (now > addMinutes(feed.readAt, 24 * 60))
    write(deps.db, (tx) =>
      tx.update(calendarFeeds).set({ readAt: now }).where(eq(calendarFeeds.memberId, feed.memberId)).run(),
    )
  return feedText(getSpace(deps).name, deps.appUrl, loansOf(deps, feed.memberId))
}

function loansOf(deps: Deps, memberId: string): FeedLoan[] {
  const today = deps.clock.today()
  const fellThrough = addMinutes(deps.clock.now(), -CANCELLED_DAYS * 24 * 60)
  return deps.db
    .select({
      id: loans.id,
      kindName: kinds.name,
      tag: items.tag,
      fromOn: loans.fromOn,
      toOn: loans.toOn,
      status: loans.status,
      sequence: loans.sequence,
      updatedAt: loans.updatedAt,
    })
    .from(loans)
    .innerJoin(kinds, eq(kinds.id, loans.kindId))
    .leftJoin(items, eq(items.id, loans.itemId))
    .where(
      and(
        eq(loans.memberId, memberId),
        or(
          inArray(loans.status, ['requested', 'approved', 'out']),
          and(eq(loans.status, 'returned'), gte(loans.toOn, addDays(today, -PAST_DAYS))),
          and(inArray(loans.status, ['cancelled', 'declined', 'lapsed']), gte(loans.updatedAt, fellThrough)),
        ),
      ),
    )
    .orderBy(asc(loans.fromOn), asc(loans.id))
    .all()
}

const STATUS: Record<string, ICalEventStatus> = {
  requested: ICalEventStatus.TENTATIVE,
  approved: ICalEventStatus.CONFIRMED,
  out: ICalEventStatus.CONFIRMED,
  returned: ICalEventStatus.CONFIRMED,
}

/**
 * RFC 5545, one all-day VEVENT per loan: the end is the day after the return-by day (exclusive), the stamp is the last change,
 * and there is no METHOD, so that an unchanged feed is the same byte for byte.
 */
export function feedText(name: string, appUrl: string, own: readonly FeedLoan[]): string {
  const calendar = ical({
    name,
    prodId: { company: 'Barmhouse', product: 'Loans', language: 'EN' },
    ttl: 3600,
  })
  for (const loan of own) {
    calendar.createEvent({
      id: `${loan.id}@loans.barmhouse`,
      start: asUtc(loan.fromOn),
      end: asUtc(addDays(loan.toOn, 1)),
      allDay: true,
      timezone: 'UTC',
      summary: loan.tag ? `${loan.kindName} (${loan.tag})` : loan.kindName,
      description: `Bring back by ${loan.toOn}.`,
      url: `${appUrl}/loans/${loan.id}`,
      sequence: loan.sequence,
      stamp: new Date(loan.updatedAt),
      lastModified: new Date(loan.updatedAt),
      status: STATUS[loan.status] ?? ICalEventStatus.CANCELLED,
      transparency: ICalEventTransparency.TRANSPARENT,
    })
  }
  return calendar.toString()
}

const asUtc = (on: CalendarDay) => new Date(`${on}T00:00:00Z`)
