import { z } from 'zod'
import { endpoint } from '../http/endpoint.ts'
import { Id, intIn, line, numberIn, prose } from '../http/fields.ts'
import { pageOf, pageQuery } from '../http/paging.ts'
import { CalendarDay } from '../time/day.ts'
import { Instant } from '../time/instant.ts'
import {
  BATCH_PRIMERS,
  BATCH_STATUSES,
  BATCH_STYLES,
  BOTTLE_KINDS,
  NITROGEN_DEMANDS,
  VISIBILITIES,
  WATER_TREATMENTS,
} from './vocabulary.ts'

/** Gravities a must or a drink can have. */
export const Gravity = numberIn(0.98, 1.2)

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

export const BatchRequest = z.strictObject({ name, style, volumeLitres, ...z.object(others).partial().shape })
export type BatchRequest = z.output<typeof BatchRequest>

export const BatchPatch = z.strictObject({
  ...z.object(facts).partial().shape,
  status: z.enum(BATCH_STATUSES).optional(),
})
export type BatchPatch = z.output<typeof BatchPatch>

/** A batch as its maker sees it, and as others do when it is shown to the space. */
export const Batch = z.object({
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
})
export type Batch = z.output<typeof Batch>

const params = z.object({ id: Id })

export const batchEndpoints = {
  list: endpoint({
    method: 'GET',
    path: '/batches',
    access: 'member',
    summary: 'Your batches, or those others show to the space; newest first.',
    query: z.object({
      ...pageQuery,
      of: z.enum(['me', 'space', 'all']).default('all'),
      status: z.enum(BATCH_STATUSES).optional(),
    }),
    reply: pageOf(Batch),
  }),
  create: endpoint({
    method: 'POST',
    path: '/batches',
    access: 'member',
    summary: 'Start a batch in the book.',
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
    summary: 'Change a batch of yours.',
    versioned: true,
    params,
    body: BatchPatch,
    reply: Batch,
  }),
}
