import { z } from 'zod'
import { endpoint } from '../http/endpoint.ts'
import { Id, intIn, line, numberIn, prose } from '../http/fields.ts'
import { pageOf, pageQuery } from '../http/paging.ts'
import { CalendarDay } from '../time/day.ts'
import { Instant } from '../time/instant.ts'
import { Bottling, bottlingEndpoints, Tasting } from './bottling-contract.ts'
import { BatchStep, planEndpoints } from './plan-contract.ts'
import { Reading, readingEndpoints } from './reading-contract.ts'
import { RecipeLineReply, RecipeRequest } from './recipe-contract.ts'
import { Gravity } from './gravity.ts'
import {
  BATCH_PRIMERS,
  BATCH_STATUSES,
  BATCH_STYLES,
  BOTTLE_KINDS,
  NITROGEN_DEMANDS,
  VISIBILITIES,
  WATER_TREATMENTS,
} from './vocabulary.ts'

const facts = {
  name: line(80),
  style: z.enum(BATCH_STYLES),
  volumeLitres: numberIn(0.1, 1000),
  visibility: z.enum(VISIBILITIES),
  wild: z.boolean(),
  og: Gravity.nullable(),
  expectedFg: Gravity.nullable(),
  notes: prose(4000),
  waterTreatment: z.enum(WATER_TREATMENTS),
  chlorineMgPerLitre: numberIn(0, 5).nullable(),
  nitrogenDemand: z.enum(NITROGEN_DEMANDS),
  yeast: line(80).nullable(),
  tolerancePercent: numberIn(1, 25).nullable(),
  bottleKind: z.enum(BOTTLE_KINDS),
  bottleMl: intIn(100, 20_000),
  targetVolumesCo2: numberIn(0, 6).nullable(),
  primer: z.enum(BATCH_PRIMERS),
  sulphiteMgPerLitre: numberIn(0, 1000),
}
const { name, style, volumeLitres, ...others } = facts

export const BatchRequest = z.strictObject({
  name,
  style,
  volumeLitres,
  ...z.object(others).partial().shape,
  recipe: RecipeRequest.optional(),
})
export type BatchRequest = z.output<typeof BatchRequest>

export const BatchPatch = z.strictObject({
  ...z.object(facts).partial().shape,
  recipe: RecipeRequest.optional(),
  status: z.enum(BATCH_STATUSES).optional(),
})
export type BatchPatch = z.output<typeof BatchPatch>

export const CopyRequest = z.strictObject({
  name: name.optional(),
  /** The recipe is scaled to it. */
  volumeLitres: volumeLitres.optional(),
})
export type CopyRequest = z.output<typeof CopyRequest>

const batchFacts = {
  id: Id,
  memberId: Id,
  memberName: z.string(),
  mine: z.boolean(),
  ...z.object(facts).shape,
  status: z.enum(BATCH_STATUSES),
  startOn: CalendarDay.nullable(),
  pitchedAt: Instant.nullable(),
  endedAt: Instant.nullable(),
  copiedFromId: Id.nullable(),
  createdAt: Instant,
  updatedAt: Instant,
  version: z.int(),
}

/** Where it stands by its latest reading. */
export const Standing = z.object({
  og: z.number().nullable(),
  gravity: z.number().nullable(),
  readAt: Instant.nullable(),
  /** Share of the expected drop done, 0 to 1. */
  drop: z.number().nullable(),
  strength: z.object({ percent: z.number(), low: z.number(), high: z.number() }).nullable(),
})
export type Standing = z.output<typeof Standing>

const NextStep = z.object({
  id: Id,
  kind: BatchStep.shape.kind,
  title: z.string(),
  on: CalendarDay.nullable(),
})

/** A batch in a list. */
export const BatchCard = z.object({ ...batchFacts, standing: Standing, next: NextStep.nullable() })
export type BatchCard = z.output<typeof BatchCard>

/** A batch as its maker sees it; others see one shown to the space without the loans behind it. */
export const Batch = z.object({
  ...batchFacts,
  standing: Standing,
  next: NextStep.nullable(),
  /** What to expect where nothing is written down: from the recipe, or the style. */
  usualFg: z.number().nullable(),
  recipe: z.array(RecipeLineReply),
  steps: z.array(BatchStep),
  /** Whether kit is booked for it, and not yet over. */
  booked: z.boolean(),
  readings: z.array(Reading),
  bottlings: z.array(Bottling),
  tastings: z.array(Tasting),
})
export type Batch = z.output<typeof Batch>

/** Gas that the active batches give off, against the room they stand in. */
export const RoomLoad = z.object({
  batches: z.int(),
  ppm: z.number(),
  risePpm: z.number(),
  shareOfLimit: z.number(),
  verdict: z.enum(['fine', 'open-a-window', 'keep-out']),
  roomM3: z.number(),
  airChangesPerHour: z.number(),
  reasons: z.array(z.string()),
})
export type RoomLoad = z.output<typeof RoomLoad>

const params = z.object({ id: Id })

export const batchEndpoints = {
  list: endpoint({
    method: 'GET',
    path: '/batches',
    access: 'member',
    summary: 'Your batches, and those others show to the space; newest first.',
    query: z.object({
      ...pageQuery,
      of: z.enum(['me', 'space', 'all']).default('all'),
      status: z.enum(BATCH_STATUSES).optional(),
    }),
    reply: pageOf(BatchCard),
  }),
  create: endpoint({
    method: 'POST',
    path: '/batches',
    access: 'member',
    summary: 'Start a batch in the book, with the usual steps of its style.',
    creates: 'sync',
    status: 201,
    body: BatchRequest,
    reply: Batch,
  }),
  get: endpoint({
    method: 'GET',
    path: '/batches/:id',
    access: 'member',
    summary: 'One batch: yours, or one that is shown to the space.',
    params,
    reply: Batch,
  }),
  change: endpoint({
    method: 'PATCH',
    path: '/batches/:id',
    access: 'member',
    summary: 'Change a batch of yours. A recipe is replaced whole.',
    versioned: true,
    params,
    body: BatchPatch,
    reply: Batch,
  }),
  copy: endpoint({
    method: 'POST',
    path: '/batches/:id/copy',
    access: 'member',
    summary: 'Start a new batch from the recipe and plan of one you can see.',
    creates: 'sync',
    status: 201,
    params,
    body: CopyRequest,
    reply: Batch,
  }),
  ...planEndpoints,
  ...readingEndpoints,
  ...bottlingEndpoints,
  roomLoad: endpoint({
    method: 'GET',
    path: '/room-load',
    access: 'steward',
    summary: 'How much CO2 the active batches give off, against the room set for the space.',
    reply: RoomLoad,
  }),
}
