import type { Batch } from '#shared/batches/contract'
import type { KindCategory } from '#shared/kit/vocabulary'
import { items, kinds } from '#server/db/schema/kit'
import { addIngredient } from '#server/services/larder/ingredients'
import { addLot } from '#server/services/larder/lots'
import type { Person } from '#tests/support/people'
import type { TestApp } from '#tests/support/test-app'

interface ShelfKind {
  name: string
  category: KindCategory
  items: number
  capacityLitres?: number
  selfApproving?: boolean
  markedForTemperatureC?: number
  maxFillTemperatureC?: number
  maxLoanDays?: number
}

const SHELF: Record<string, ShelfKind> = {
  demijohn: {
    name: 'Demijohn 4.5 L, glass',
    category: 'vessel',
    items: 2,
    capacityLitres: 4.5,
    maxFillTemperatureC: 30,
    maxLoanDays: 60,
  },
  bucket: { name: 'Bucket 10 L', category: 'vessel', items: 2, capacityLitres: 10, selfApproving: true },
  hydrometer: {
    name: 'Hydrometer',
    category: 'instrument',
    items: 1,
    selfApproving: true,
    markedForTemperatureC: 20,
  },
  siphon: { name: 'Siphon', category: 'transfer', items: 1, selfApproving: true },
  corker: { name: 'Hand corker', category: 'closure', items: 1, selfApproving: true },
  capper: { name: 'Bench capper', category: 'closure', items: 1, selfApproving: true },
}

/** The kinds a batch takes, each under its short name, with items `demijohn-1` and so on. */
export function makeShelf(app: TestApp): Record<string, string> {
  const at = app.clock.now()
  for (const [id, { items: count, name, category, ...more }] of Object.entries(SHELF)) {
    app.db
      .insert(kinds)
      .values({
        id,
        name,
        category,
        turnaroundDays: 1,
        maxLoanDays: 30,
        maxAheadDays: 200,
        maxPerMember: 5,
        ...more,
        createdAt: at,
        updatedAt: at,
      })
      .run()
    for (let n = 1; n <= count; n++)
      app.db
        .insert(items)
        .values({
          id: `${id}-${n}`,
          tag: `${id.slice(0, 2).toUpperCase()}-0${n}`,
          kindId: id,
          hygiene: 'clean',
          createdAt: at,
          updatedAt: at,
        })
        .run()
  }
  return Object.fromEntries(Object.keys(SHELF).map((id) => [id, id]))
}

const COMPOSITIONS = {
  honey: { waterFraction: 0.171, solubleFraction: 0.829, fermentableFraction: 0.98, yanMgPerKg: 20 },
  juice: { waterFraction: 0.88, solubleFraction: 0.12, fermentableFraction: 0.92, yanMgPerKg: 80 },
}

/** Honey, juice, corks and sulphite in the larder; ids by those names. */
export function makeLarder(app: TestApp, keeper: Person) {
  const { deps } = app
  const honey = addIngredient(deps, { name: 'Heather honey', unit: 'g', composition: COMPOSITIONS.honey }).id
  const juice = addIngredient(deps, {
    name: 'Apple juice',
    unit: 'ml',
    composition: COMPOSITIONS.juice,
    gramsPerUnit: 1.05,
  }).id
  const corks = addIngredient(deps, { name: 'Corks', unit: 'each', kind: 'closure' }).id
  const sulphite = addIngredient(deps, {
    name: 'Potassium metabisulphite',
    unit: 'g',
    kind: 'preservative',
    allergens: ['sulphites'],
  }).id
  const stock: [string, number][] = [
    [honey, 3000],
    [juice, 9000],
    [corks, 20],
  ]
  for (const [ingredientId, quantity] of stock)
    addLot(deps, keeper.id, { ingredientId, quantity, costMinor: 500 })
  return { honey, juice, corks, sulphite }
}

export type Larder = ReturnType<typeof makeLarder>

/** A cyser for a demijohn, its recipe from the larder. */
export const cyserRequest = ({ honey, juice, corks }: Larder) => ({
  name: 'Windfall cyser',
  style: 'cyser',
  volumeLitres: 4.5,
  recipe: [
    { ingredientId: juice, ml: 3600 },
    { ingredientId: honey, grams: 700 },
    { ingredientId: corks, each: 1, stage: 'bottling', perBottle: true },
  ],
})

/** Asks and insists on an answer of this status. */
export async function ask<T>(
  pending: PromiseLike<{ status: number; body: unknown; text: string }>,
  status = 200,
) {
  const reply = await pending
  if (reply.status !== status) throw new Error(`${reply.status} in place of ${status}: ${reply.text}`)
  return reply.body as T
}

export const makeCyser = (owner: Person, larder: Larder, more: object = {}) =>
  ask<Batch>(owner.agent.post('/api/batches').send({ ...cyserRequest(larder), ...more }), 201)
