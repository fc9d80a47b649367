import type { IngredientStock } from '#shared/larder/contract'
import type { DateState, IngredientKind, Unit } from '#shared/larder/vocabulary'
import { dayInWords } from '#shared/time/day-words'
import { daysBetween, type CalendarDay } from '#shared/time/day'
import type { StateName } from '@/components/base/states'

interface Mark {
  state: StateName
  word?: string
}

/** `in 5 days`, `tomorrow`, `12 days ago`: how far a day is, in words. */
function awayWords(today: CalendarDay, on: CalendarDay): string {
  const days = daysBetween(today, on)
  if (days === 0) return 'today'
  if (days === 1) return 'tomorrow'
  if (days === -1) return 'yesterday'
  return days > 0 ? `in ${days} days` : `${-days} days ago`
}

/** What to know about the date of a lot; undefined when there is nothing to mind. */
export function dateMark(
  dateState: DateState,
  useBy: CalendarDay | null,
  today: CalendarDay,
): Mark | undefined {
  if (useBy === null) return undefined
  if (dateState === 'past')
    return { state: 'stock-past-date', word: `Past its date, ${awayWords(today, useBy)}` }
  if (dateState === 'soon') return { state: 'stock-near-date', word: `Use ${awayWords(today, useBy)}` }
  return undefined
}

const bySoon = (word: string) =>
  word === 'today' || word === 'tomorrow' ? word : word.replace('in ', 'within ')

/** What to know about an ingredient: what it runs short of first, then its dates. */
export function stockMarks(stock: IngredientStock, today: CalendarDay): Mark[] {
  const marks: Mark[] = []
  if (stock.state === 'out')
    marks.push({ state: 'stock-none', word: stock.remaining > 0 ? 'None in date' : 'None left' })
  if (stock.state === 'low') marks.push({ state: 'stock-low' })
  if (stock.dateState === 'soon' && stock.useBy)
    marks.push({ state: 'stock-near-date', word: `Use ${bySoon(awayWords(today, stock.useBy))}` })
  if (stock.pastLots > 0)
    marks.push({
      state: 'stock-past-date',
      word: stock.pastLots === 1 ? 'One past its date' : `${stock.pastLots} past their date`,
    })
  return marks
}

/** `best before 31 Oct 2026`, `use by 6 May: opened 1 May`, `no date`. */
export function datesInWords(lot: {
  bestBefore: CalendarDay | null
  openedOn: CalendarDay | null
  useBy: CalendarDay | null
}): string {
  const opened = lot.openedOn ? `opened ${dayInWords(lot.openedOn, 'date')}` : ''
  if (lot.useBy && lot.useBy !== lot.bestBefore) return `${opened}, use by ${dayInWords(lot.useBy, 'short')}`
  const best = lot.bestBefore ? `best before ${dateWithYear(lot.bestBefore)}` : 'no date on it'
  return opened ? `${best}, ${opened}` : best
}

const dateWithYear = (on: CalendarDay) => `${dayInWords(on, 'date')} ${on.slice(0, 4)}`

/** Amounts worth a button of their own, smallest first; none above what there is. */
export function quickAmounts(kind: IngredientKind, unit: Unit, remaining: number): number[] {
  return amountsFor(kind, unit).filter((amount) => amount < remaining)
}

function amountsFor(kind: IngredientKind, unit: Unit): number[] {
  if (unit === 'each') return kind === 'label' ? [1, 2, 5] : [6, 12, 24, 30]
  switch (kind) {
    case 'honey':
    case 'sugar':
    case 'malt':
    case 'fruit':
      return [250, 500, 1000, 1500]
    case 'juice':
    case 'bottle':
      return [500, 1000, 2000, 3000]
    case 'nutrient':
    case 'acid':
    case 'preservative':
      return [1, 2, 5, 10]
    case 'hops':
    case 'spice':
      return [5, 10, 20, 50]
    case 'cleaning':
      return unit === 'ml' ? [10, 20, 50, 100] : [20, 50, 100, 250]
    case 'fining':
      return unit === 'ml' ? [5, 10, 15, 30] : [2, 5, 10, 20]
    case 'priming':
    case 'closure':
    case 'label':
    case 'other':
      return [5, 10, 50, 100]
  }
}
