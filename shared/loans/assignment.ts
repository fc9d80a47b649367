import type { CalendarDay } from '../time/day.ts'
import type { Hold } from './availability.ts'

/** A booking to be given an item. `pinned`: it already has one, because it is out. */
export interface Booking extends Hold {
  id: string
  pinned?: boolean
}

/** By collection day; who is out comes first, and ties keep the order in which they were asked for. */
function byStart(bookings: readonly Booking[]): Booking[] {
  return bookings
    .map((booking, asked) => ({ booking, asked }))
    .sort(
      (a, b) =>
        Number(b.booking.pinned ?? false) - Number(a.booking.pinned ?? false) ||
        compare(a.booking.from, b.booking.from) ||
        a.asked - b.asked,
    )
    .map(({ booking }) => booking)
}

/**
 * Gives each booking, by earliest start, the lowest-numbered place that is free from its first day; a booking that
 * finds none is left out. Needs no more places than the busiest day (interval partitioning; Kleinberg & Tardos,
 * Algorithm Design, 4.1).
 */
export function assignByStart(bookings: readonly Booking[], places: number): Map<string, number> {
  const freeFrom = new Array<CalendarDay | undefined>(places).fill(undefined)
  const given = new Map<string, number>()
  for (const booking of byStart(bookings)) {
    const place = freeFrom.findIndex((until) => until === undefined || until < booking.from)
    if (place < 0) continue
    freeFrom[place] = booking.blocksUntil
    given.set(booking.id, place)
  }
  return given
}

/**
 * The bookings no item is left for when so many serviceable items are handed out by earliest start. What is out is never
 * among them, and goes on holding its place even where more is out than is in service.
 */
export function leftWithout(bookings: readonly Booking[], places: number): string[] {
  let holding: Booking[] = []
  const without: string[] = []
  for (const booking of byStart(bookings)) {
    holding = holding.filter((other) => other.pinned || other.blocksUntil >= booking.from)
    const taken = holding.filter((other) => other.blocksUntil >= booking.from).length
    if (booking.pinned || taken < places) holding.push(booking)
    else without.push(booking.id)
  }
  return without
}

/**
 * The most bookings that so many items can serve, by earliest end, each on the place that has been free for the shortest
 * time (Carlisle & Lloyd 1995). Says how many could be kept if dates were traded.
 */
export function mostServed(bookings: readonly Booking[], places: number): string[] {
  const freeFrom = new Array<CalendarDay | undefined>(places).fill(undefined)
  const served: string[] = []
  const byEnd = [...bookings].sort((a, b) => compare(a.blocksUntil, b.blocksUntil) || compare(a.from, b.from))
  for (const booking of byEnd) {
    let best = -1
    freeFrom.forEach((until, place) => {
      if (until !== undefined && until >= booking.from) return
      if (best < 0 || (until ?? '') > (freeFrom[best] ?? '')) best = place
    })
    if (best < 0) continue
    freeFrom[best] = booking.blocksUntil
    served.push(booking.id)
  }
  return served
}

const compare = (a: string, b: string) => (a < b ? -1 : a > b ? 1 : 0)
