import { z } from 'zod'
import { endpoint } from '../http/endpoint.ts'
import { Id, line, prose, queryFlag } from '../http/fields.ts'
import { pageOf, pageQuery } from '../http/paging.ts'
import { CalendarDay } from '../time/day.ts'
import { Instant } from '../time/instant.ts'
import { Fault } from './fault-contract.ts'
import { ItemPhoto } from './photo-contract.ts'
import { HYGIENE_STATES, ITEM_EVENTS, ITEM_STATUSES } from './vocabulary.ts'

/** What is written on the item: letters, figures and hyphens. `DJ-07` and `dj-07` are the same. */
export const Tag = z
  .string()
  .trim()
  .min(1, 'Fill this in.')
  .max(12, 'Keep a tag to 12 characters.')
  .regex(/^[A-Za-z0-9]+(-[A-Za-z0-9]+)*$/, 'Use letters, figures and single hyphens, like DJ-07.')
  .transform((text) => text.toUpperCase())

const facts = {
  shelf: line(60).nullable(),
  note: prose(2000),
  wild: z.boolean(),
  status: z.enum(ITEM_STATUSES),
}

export const ItemRequest = z.strictObject({
  tag: Tag,
  kindId: Id,
  ...z.object(facts).partial().shape,
  /** Dirty unless said: nobody has vouched for it yet. Sanitised is recorded with how, afterwards. */
  hygiene: z.enum(['dirty', 'clean']).optional(),
})
export type ItemRequest = z.output<typeof ItemRequest>

export const ItemPatch = z.strictObject({
  tag: Tag.optional(),
  kindId: Id.optional(),
  ...z.object(facts).partial().shape,
  /** Why, for the history. */
  reason: line(300).optional(),
})
export type ItemPatch = z.output<typeof ItemPatch>

/** What a hydrometer is out by, found in plain water. */
export const ItemCalibration = z.object({
  /** Added to every reading taken with it. */
  offsetSg: z.number(),
  calibratedOn: CalendarDay,
  waterTemperatureC: z.number().nullable(),
  calibratedByName: z.string().nullable(),
})

/** That an item is on loan. */
export const ItemOut = z.object({
  dueOn: CalendarDay,
  overdue: z.boolean(),
  /** For its borrower and for stewards. */
  loanId: Id.nullable(),
  /** For stewards. */
  borrowerName: z.string().nullable(),
})

/** One thing with a tag. */
export const Item = z.object({
  id: Id,
  tag: z.string(),
  kindId: Id,
  kindName: z.string(),
  status: z.enum(ITEM_STATUSES),
  /** In service and without an open fault that blocks. */
  serviceable: z.boolean(),
  hygiene: z.enum(HYGIENE_STATES),
  /** When its last sanitising runs out, or ran out. */
  sanitisedUntil: Instant.nullable(),
  wild: z.boolean(),
  shelf: z.string().nullable(),
  note: z.string(),
  calibration: ItemCalibration.nullable(),
  /** Hydrometers: check it in water by this day. */
  calibrationDueOn: CalendarDay.nullable(),
  openFaults: z.int(),
  /** Null while it is on its shelf, at the sink or in repair. */
  out: ItemOut.nullable(),
  version: z.int(),
})
export type Item = z.output<typeof Item>

/** An item with what is wrong with it and what it looks like. */
export const ItemDetail = Item.extend({
  faults: z.array(Fault),
  photos: z.array(ItemPhoto),
})
export type ItemDetail = z.output<typeof ItemDetail>

/** One line of an item's history. */
export const ItemHistoryEntry = z.object({
  event: z.enum(ITEM_EVENTS),
  at: Instant,
  byName: z.string().nullable(),
  /** Whose loan it was; stewards only. */
  borrowerName: z.string().nullable(),
  aboutId: z.string().nullable(),
  detail: z.record(z.string(), z.union([z.string(), z.number(), z.boolean(), z.null()])),
})
export type ItemHistoryEntry = z.output<typeof ItemHistoryEntry>

/** What became, or would become, of each row of an imported list. */
export const ItemImport = z.object({
  dryRun: z.boolean(),
  /** False for a dry run, and when any row was refused: a list is brought in whole or not at all. */
  written: z.boolean(),
  added: z.int(),
  changed: z.int(),
  unchanged: z.int(),
  refused: z.int(),
  rows: z.array(
    z.object({
      row: z.int(),
      tag: z.string(),
      outcome: z.enum(['add', 'change', 'unchanged', 'refused']),
      message: z.string().nullable(),
    }),
  ),
})
export type ItemImport = z.output<typeof ItemImport>

const params = z.object({ id: Id })

export const itemEndpoints = {
  listItems: endpoint({
    method: 'GET',
    path: '/items',
    access: 'member',
    summary: 'Items by tag, with the retired and the lost; by status for the others.',
    query: z.object({
      ...pageQuery,
      kindId: Id.optional(),
      hygiene: z.enum(HYGIENE_STATES).optional(),
      status: z.enum(ITEM_STATUSES).optional(),
      /** Part of a tag, a shelf or a kind’s name. */
      q: z.string().trim().max(60).optional(),
    }),
    reply: pageOf(Item),
  }),
  addItem: endpoint({
    method: 'POST',
    path: '/items',
    access: 'steward',
    summary: 'Adds an item to a kind.',
    body: ItemRequest,
    status: 201,
    reply: ItemDetail,
    creates: 'sync',
  }),
  getItem: endpoint({
    method: 'GET',
    path: '/items/:idOrTag',
    access: 'member',
    summary: 'One item, by its id or by the tag on it.',
    params: z.object({ idOrTag: Id }),
    reply: ItemDetail,
  }),
  changeItem: endpoint({
    method: 'PATCH',
    path: '/items/:id',
    access: 'steward',
    summary: 'Changes an item: its tag, shelf, note, whether it is wild, whether it is in service.',
    params,
    body: ItemPatch,
    reply: ItemDetail,
    versioned: true,
  }),
  itemHistory: endpoint({
    method: 'GET',
    path: '/items/:id/history',
    access: 'member',
    summary: 'Everything that happened to an item, newest first.',
    params,
    query: z.object(pageQuery),
    reply: pageOf(ItemHistoryEntry),
  }),
  exportItems: endpoint({
    method: 'GET',
    path: '/items.csv',
    access: 'steward',
    summary: 'Every item as CSV.',
    reply: null,
    file: 'text/csv',
  }),
  importItems: endpoint({
    method: 'POST',
    path: '/items/import',
    access: 'steward',
    summary: 'Adds and changes items from CSV by tag; with dryRun, says row by row what would happen.',
    query: z.object({ dryRun: queryFlag.optional() }),
    upload: 'file',
    reply: ItemImport,
  }),
}
