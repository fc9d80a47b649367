import { INGREDIENTS } from '#shared/brewing/index'
import type { Composition, Ingredient, Lot } from '#shared/larder/contract'
import { addDays } from '#shared/time/day'
import { addMinutes } from '#shared/time/instant'
import { clockAt } from '../../clock.ts'
import type { Deps } from '../../deps.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { moveLot } from '../../services/larder/draws.ts'
import { addIngredient } from '../../services/larder/ingredients.ts'
import { addLot } from '../../services/larder/lots.ts'
import { commitStocktake } from '../../services/larder/stocktakes.ts'
import { settleTab } from '../../services/larder/tabs.ts'
import type { SeedContext } from './index.ts'
import { CATALOGUE, DRAWS, LOTS, SETTLEMENTS, type SeedIngredient } from './larder-shelf.ts'

/** A larder with a past: everything goes through the services, each at its own time, so that tabs and stock add up. */
export function seedLarder({ deps, people }: SeedContext) {
  const now = deps.clock.now()
  const today = deps.clock.today()
  const at = (daysAgo: number, minutes = 0): Deps => ({
    ...deps,
    clock: clockAt(addMinutes(now, minutes - daysAgo * 24 * 60), deps.clock.timeZone),
  })
  const someone = (login: string): SignedIn => {
    const id = people[login]
    if (!id) throw new Error(`the demo has no ${login}`)
    const role = login.startsWith('steward') ? 'steward' : 'member'
    return { id, name: login, email: `${login}@barmhouse.example`, role, status: 'active' }
  }
  const steward = someone('steward')

  const catalogue = new Map<string, Ingredient>()
  for (const entry of CATALOGUE) catalogue.set(entry.key, addIngredient(at(300), requestFor(entry)))
  const ingredient = (key: string) => catalogue.get(key) as Ingredient

  // In order of time, so that nothing is drawn before it is there and every tab runs forwards.
  const lots = new Map<string, Lot>()
  const lotOf = (key: string) => lots.get(key) as Lot
  const events: { daysAgo: number; act: (then: Deps) => void }[] = []
  for (const lot of LOTS)
    events.push({
      daysAgo: lot.daysAgo,
      act: (then) =>
        lots.set(
          lot.key,
          addLot(then, someone(lot.by).id, {
            ingredientId: ingredient(lot.of).id,
            quantity: lot.quantity,
            costMinor: lot.cost,
            shelf: lot.shelf,
            ...(lot.bestInDays !== undefined && { bestBefore: addDays(today, lot.bestInDays) }),
            ...(lot.donor && { donor: lot.donor }),
            ...(lot.lotCode && { lotCode: lot.lotCode }),
          }),
        ),
    })
  for (const [daysAgo, who, lot, quantity] of DRAWS)
    events.push({
      daysAgo,
      act: (then) => moveLot(then, someone(who), lotOf(lot).id, { reason: 'draw', quantity }),
    })
  for (const [daysAgo, who, amountMinor, method, note] of SETTLEMENTS)
    events.push({
      daysAgo,
      act: (then) =>
        settleTab(then, steward.id, someone(who).id, { amountMinor, method, ...(note && { note }) }),
    })
  events.push({
    daysAgo: 60,
    act: (then) => count(then, steward.id, lotOf('sugar-1'), 3150, lotOf('bentonite-1'), 250),
  })
  events.push({
    daysAgo: 7,
    act: (then) =>
      moveLot(then, steward, lotOf('bottle-1').id, { reason: 'waste', quantity: 4, note: 'Chipped lips' }),
  })
  events.push({
    daysAgo: 5,
    act: (then) =>
      moveLot(then, someone('member3'), lotOf('blossom-gift').id, { reason: 'top-up', quantity: 227 }),
  })
  events.sort((a, b) => b.daysAgo - a.daysAgo)
  for (const [index, { daysAgo, act }] of events.entries()) act(at(daysAgo, index % 40))
}

/** The spring count: one thing short, one as it should be. */
function count(then: Deps, stewardId: string, short: Lot, found: number, right: Lot, still: number) {
  commitStocktake(then, stewardId, {
    note: 'Spring count',
    lines: [
      { lotId: short.id, seen: 3200, counted: found },
      { lotId: right.id, seen: still, counted: still },
    ],
  })
}

function requestFor({ key: _key, table, par, ...facts }: SeedIngredient) {
  return {
    ...facts,
    allergens: facts.allergens ?? [],
    ...(par !== undefined && { parLevel: par }),
    ...(table && { composition: compositionOf(table) }),
  }
}

function compositionOf(table: string): Composition {
  const row = INGREDIENTS[table]
  if (!row) throw new Error(`the composition table has no ${table}`)
  const { waterFraction, solubleFraction, fermentableFraction, yanMgPerKg, dataset } = row
  return {
    waterFraction,
    solubleFraction,
    fermentableFraction,
    ...(yanMgPerKg !== undefined && { yanMgPerKg }),
    source: `${dataset} ${row.table}, ${row.name}`,
  }
}
