import type { Ingredient } from '#shared/larder/contract'

export const VIEWS = ['all', 'low', 'date'] as const
export type LarderView = (typeof VIEWS)[number]
export const VIEW_WORDS: Record<LarderView, string> = {
  all: 'Everything',
  low: 'Running low',
  date: 'Near or past its date',
}

export type LarderOrder = 'shelf' | 'date' | 'stock' | 'name'

export function matchesView({ stock }: Ingredient, view: LarderView): boolean {
  switch (view) {
    case 'all':
      return true
    case 'low':
      return stock.state !== 'enough'
    case 'date':
      return stock.dateState === 'soon' || stock.pastLots > 0
  }
}

/** Puts ingredients in order; they come by name, so equals stay so. */
export function inOrder(items: Ingredient[], order: LarderOrder): Ingredient[] {
  switch (order) {
    case 'shelf':
    case 'name':
      return items
    case 'date':
      return [...items].sort((a, b) => compare(dateKey(a), dateKey(b)))
    case 'stock':
      return [...items].sort((a, b) => fullness(a) - fullness(b))
  }
}

const compare = (a: string, b: string) => (a < b ? -1 : a > b ? 1 : 0)
const dateKey = ({ stock }: Ingredient) => (stock.pastLots > 0 ? '0' : (stock.useBy ?? '9'))
/** Share of what the space keeps; what has no level counts as full while there is any. */
const fullness = ({ stock, parLevel }: Ingredient) =>
  parLevel ? stock.free / parLevel : stock.usable > 0 ? 10 : 20
