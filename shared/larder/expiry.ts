import { addDays, earlierDay, type CalendarDay } from '../time/day.ts'
import type { DateState } from './vocabulary.ts'

/** From so many days before its date a lot is called soon. A judgement: about one batch ahead. */
export const SOON_DAYS = 30

interface Dates {
  bestBefore: CalendarDay | null
  openedOn: CalendarDay | null
  /** How long it keeps once opened; null where opening changes nothing. */
  keepsOpenedDays: number | null
}

/**
 * The last day to use a lot: its best-before day, or the end of its time since opening where that comes first. Null when
 * neither is known. A juice best before 30 June, opened on 1 June and good for 5 days, is to be used by 6 June.
 */
export function useByDay({ bestBefore, openedOn, keepsOpenedDays }: Dates): CalendarDay | null {
  const opened = openedOn && keepsOpenedDays !== null ? addDays(openedOn, keepsOpenedDays) : null
  if (bestBefore && opened) return earlierDay(bestBefore, opened)
  return bestBefore ?? opened
}

/** Past from the day after; soon from {@link SOON_DAYS} before. */
export function dateState(useBy: CalendarDay | null, today: CalendarDay): DateState {
  if (useBy === null) return 'undated'
  if (useBy < today) return 'past'
  return useBy <= addDays(today, SOON_DAYS) ? 'soon' : 'fine'
}

export interface DatedLot {
  id: string
  useBy: CalendarDay | null
  openedOn: CalendarDay | null
  remaining: number
}

/**
 * First expiring first: by use-by day, undated ones last; of equals the opened one, then the smaller rest. Lots past their
 * date come after all others: someone has to look at them before they are used.
 */
export function firstExpiringFirst<Lot extends DatedLot>(lots: readonly Lot[], today: CalendarDay): Lot[] {
  const key = (lot: Lot) => {
    const past = dateState(lot.useBy, today) === 'past' ? 1 : 0
    return `${past} ${lot.useBy ?? '9999-99-99'} ${lot.openedOn ? 0 : 1}`
  }
  return [...lots].sort((a, b) => compare(key(a), key(b)) || a.remaining - b.remaining || compare(a.id, b.id))
}

const compare = (a: string, b: string) => (a < b ? -1 : a > b ? 1 : 0)

export interface Suggestion {
  lines: { lotId: string; quantity: number }[]
  /** What no lot in date can give. */
  short: number
}

/** Which lots to take a quantity from, first expiring first; never from one past its date. */
export function suggestDraw(lots: readonly DatedLot[], quantity: number, today: CalendarDay): Suggestion {
  let wantedMilli = Math.round(quantity * 1000)
  const lines: Suggestion['lines'] = []
  for (const lot of firstExpiringFirst(lots, today)) {
    if (dateState(lot.useBy, today) === 'past' || lot.remaining <= 0 || wantedMilli === 0) continue
    const takenMilli = Math.min(wantedMilli, Math.round(lot.remaining * 1000))
    lines.push({ lotId: lot.id, quantity: takenMilli / 1000 })
    wantedMilli -= takenMilli
  }
  return { lines, short: wantedMilli / 1000 }
}
