import { z } from 'zod'
import { GATE_BLOCKS } from '../brewing/index.ts'
import { endpoint } from '../http/endpoint.ts'
import { Id, intIn, line, numberIn, prose, queryNumber } from '../http/fields.ts'
import { CalendarDay } from '../time/day.ts'
import { Instant } from '../time/instant.ts'
import { CHECK_STATES } from './gate-checks.ts'
import { AGAIN_ANSWERS, BATCH_PRIMERS, BOTTLE_KINDS } from './vocabulary.ts'

const params = z.object({ id: Id })

export const Bottling = z.object({
  id: Id,
  bottledOn: CalendarDay,
  bottleKind: z.enum(BOTTLE_KINDS),
  bottleMl: z.int(),
  bottles: z.int(),
  primer: z.enum(BATCH_PRIMERS),
  primingGrams: z.number().nullable(),
  targetVolumesCo2: z.number().nullable(),
  gravity: z.number().nullable(),
  abvPercent: z.number().nullable(),
  ready: z.boolean(),
  /** Bottled although the gate was shut. */
  anyway: z.boolean(),
  shown: z.array(z.string()),
  worstCaseVolumes: z.number(),
  worstCaseBar: z.number(),
  note: z.string().nullable(),
  createdAt: Instant,
})
export type Bottling = z.output<typeof Bottling>

export const BottlingRequest = z.strictObject({
  bottledOn: CalendarDay,
  bottleKind: z.enum(BOTTLE_KINDS),
  bottleMl: intIn(100, 20_000),
  bottles: intIn(1, 10_000),
  primer: z.enum(BATCH_PRIMERS).default('none'),
  primingGrams: numberIn(0, 100_000).nullish(),
  targetVolumesCo2: numberIn(0, 6).nullish(),
  /** I have read what the gate says, and it is in bottles all the same. */
  anyway: z.boolean().default(false),
  note: line(1000).nullish(),
})
export type BottlingRequest = z.output<typeof BottlingRequest>

export const BottlingAdvice = z.object({
  ready: z.boolean(),
  blocks: z.array(z.object({ code: z.enum(GATE_BLOCKS), fact: z.string(), why: z.string() })),
  checks: z.array(z.object({ state: z.enum(CHECK_STATES), fact: z.string(), why: z.string() })),
  cautions: z.array(z.string()),
  earliestOn: CalendarDay.nullable(),
  worstCaseVolumes: z.number(),
  worstCaseBarAt30C: z.number(),
  pointsToCome: z.number(),
  limitVolumes: z.number(),
  bottleKind: z.enum(BOTTLE_KINDS),
  bottleMl: z.int(),
  targetVolumesCo2: z.number().nullable(),
  primer: z.enum(BATCH_PRIMERS),
  bottles: z.int(),
  leftLitres: z.number(),
  priming: z
    .object({
      primer: z.enum(BATCH_PRIMERS),
      grams: z.number(),
      low: z.number(),
      high: z.number(),
      gramsPerLitre: z.number(),
      tablets: z.int().nullable(),
      reasons: z.array(z.string()),
    })
    .nullable(),
  warmestC: z.number(),
  volumes: z.number(),
  barInCellar: z.number(),
  barOnHotDay: z.number(),
})
export type BottlingAdvice = z.output<typeof BottlingAdvice>

export const Tasting = z.object({
  id: Id,
  tastedOn: CalendarDay,
  look: z.string(),
  nose: z.string(),
  taste: z.string(),
  again: z.enum(AGAIN_ANSWERS),
  changes: z.string(),
  createdAt: Instant,
})
export type Tasting = z.output<typeof Tasting>

export const TastingRequest = z.strictObject({
  tastedOn: CalendarDay,
  look: prose(500).default(''),
  nose: prose(500).default(''),
  taste: prose(500).default(''),
  again: z.enum(AGAIN_ANSWERS),
  changes: prose(1000).default(''),
})
export type TastingRequest = z.output<typeof TastingRequest>

export const bottlingEndpoints = {
  bottling: endpoint({
    method: 'GET',
    path: '/batches/:id/bottling',
    access: 'member',
    summary:
      'Whether it can be bottled and why not, what to prime with, how many bottles, how hard they press.',
    params,
    query: z.object({
      bottle: z.enum(BOTTLE_KINDS).optional(),
      bottleMl: queryNumber(100, 20_000).int().optional(),
      /** 0: bottled still. */
      targetVolumesCo2: queryNumber(0, 6).optional(),
      primer: z.enum(BATCH_PRIMERS).optional(),
      tabletGrams: queryNumber(0.1, 20).optional(),
    }),
    reply: BottlingAdvice,
  }),
  addBottling: endpoint({
    method: 'POST',
    path: '/batches/:id/bottlings',
    access: 'member',
    summary: 'Log what was bottled. While the gate is shut it must say that it was done anyway.',
    creates: 'sync',
    status: 201,
    params,
    body: BottlingRequest,
    reply: Bottling,
  }),
  label: endpoint({
    method: 'GET',
    path: '/batches/:id/label.pdf',
    access: 'member',
    summary: 'A sheet of labels for printing.',
    file: 'application/pdf',
    params,
    query: z.object({
      rows: z.coerce.number<string | number>().int().min(1).max(8).default(4),
      columns: z.coerce.number<string | number>().int().min(1).max(4).default(2),
    }),
    reply: null,
  }),
  addTasting: endpoint({
    method: 'POST',
    path: '/batches/:id/tastings',
    access: 'member',
    summary: 'Write down how it tastes, and whether you would make it again.',
    creates: 'sync',
    status: 201,
    params,
    body: TastingRequest,
    reply: Tasting,
  }),
}
