import type { ItemRequest } from '#shared/kit/item-contract'
import type { KindRequest } from '#shared/kit/kind-contract'
import { recordHygiene } from '#server/services/kit/hygiene'
import { addItem } from '#server/services/kit/items'
import { addKind } from '#server/services/kit/kinds'
import type { Person } from '../people.ts'
import type { TestApp } from '../test-app.ts'

let made = 0
const next = () => String(++made).padStart(3, '0')

/** A kind of kit, a 4.5 L demijohn unless said otherwise. */
export const makeKind = (app: TestApp, by: Person, facts: Partial<KindRequest> = {}) =>
  addKind(app.deps, by, { name: `Demijohn ${next()}`, category: 'vessel', capacityLitres: 4.5, ...facts })

/** A clean item of a kind, with a tag of its own. */
export const makeItem = (app: TestApp, by: Person, kindId: string, facts: Partial<ItemRequest> = {}) =>
  addItem(app.deps, by, { tag: `T-${next()}`, kindId, hygiene: 'clean', ...facts })

export const makeItems = (app: TestApp, by: Person, kindId: string, count: number) =>
  Array.from({ length: count }, () => makeItem(app, by, kindId))

/** Sanitised as a careful person would. */
export const sanitise = (app: TestApp, by: Person, itemId: string) =>
  recordHygiene(app.deps, by, itemId, {
    state: 'sanitised',
    agent: 'iodophor',
    concentration: '25 mg/L',
    contactMinutes: 2,
  })
