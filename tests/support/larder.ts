import type { Ingredient, IngredientRequest, Lot, LotRequest, MoveRequest } from '#shared/larder/contract'
import { addIngredient } from '#server/services/larder/ingredients'
import { addLot } from '#server/services/larder/lots'
import type { Person } from './people.ts'
import type { TestApp } from './test-app.ts'

let count = 0

/** Honey counted in grams, unless said otherwise. */
export const makeIngredient = (app: TestApp, facts: Partial<IngredientRequest> = {}): Ingredient =>
  addIngredient(app.deps, { name: `Heather honey ${++count}`, unit: 'g', kind: 'honey', ...facts })

/** A kilogram for twelve pounds, unless said otherwise. */
export const makeLot = (
  app: TestApp,
  by: Person,
  ingredient: Ingredient,
  facts: Partial<LotRequest> = {},
): Lot => addLot(app.deps, by.id, { ingredientId: ingredient.id, quantity: 1000, costMinor: 1200, ...facts })

export const move = (who: Person, lot: Lot | string, request: MoveRequest) =>
  who.agent.post(`/api/lots/${typeof lot === 'string' ? lot : lot.id}/moves`).send(request)

export const draw = (who: Person, lot: Lot | string, quantity: number, batchId?: string) =>
  move(who, lot, { reason: 'draw', quantity, ...(batchId && { batchId }) })
