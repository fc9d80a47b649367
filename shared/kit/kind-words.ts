import type { KindCategory } from './vocabulary.ts'

/** What the shelves are called. */
export const CATEGORY_NAMES: Record<KindCategory, string> = {
  vessel: 'Vessels',
  instrument: 'Instruments',
  transfer: 'Transfer',
  closure: 'Closure',
  heating: 'Heating',
  other: 'Other',
}

/** One of them, as a button speaks of it: `Demijohn 4.5 L, glass` is `this demijohn`. */
export function thisOne(kindName: string): string {
  const word = /^[A-Z][a-z]+( [a-z]+)*/.exec(kindName)?.[0]
  return word ? `this ${word.toLowerCase()}` : 'this'
}
