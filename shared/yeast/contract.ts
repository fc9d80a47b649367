import { z } from 'zod'
import { DRINK_USES, STORAGES, YEAST_FORMS } from '../brewing/vocabulary.ts'
import { endpoint } from '../http/endpoint.ts'
import { Id, line, numberIn, prose, queryFlag, queryNumber } from '../http/fields.ts'
import { pageOf, pageQuery } from '../http/paging.ts'
import { CalendarDay } from '../time/day.ts'
import { Instant, InstantInput } from '../time/instant.ts'
import {
  AMOUNT_UNITS,
  DATE_STATES,
  EFFECTS,
  LOT_STATES,
  OUTCOMES,
  PACKET_STATES,
  VERDICTS,
} from './vocabulary.ts'

/** Grams or millilitres of a packet, to a thousandth. */
const Amount = numberIn(0.001, 100_000)
const AmountLeft = numberIn(0, 100_000)

const facts = {
  strain: line(80),
  use: z.enum(DRINK_USES),
  lotCode: line(40).nullable(),
  madeOn: CalendarDay.nullable(),
  bestBefore: CalendarDay.nullable(),
  openedOn: CalendarDay.nullable(),
  shared: z.boolean(),
  /** Where in the fridge. */
  place: line(60).nullable(),
  note: prose(1000),
}

export const PacketRequest = z
  .strictObject({
    strain: facts.strain,
    form: z.enum(YEAST_FORMS),
    use: facts.use,
    lotCode: facts.lotCode.optional(),
    madeOn: facts.madeOn.optional(),
    bestBefore: facts.bestBefore.optional(),
    openedOn: facts.openedOn.optional(),
    storage: z.enum(STORAGES),
    initialGrams: Amount.optional(),
    initialMl: Amount.optional(),
    remainingGrams: AmountLeft.optional(),
    remainingMl: AmountLeft.optional(),
    shared: facts.shared.default(true),
    place: facts.place.optional(),
    note: facts.note.default(''),
  })
  .superRefine((packet, context) => {
    const add = (path: string, message: string) => context.addIssue({ code: 'custom', path: [path], message })
    const { initialGrams, initialMl, remainingGrams, remainingMl } = packet
    if (initialGrams === undefined && initialMl === undefined)
      add(packet.form === 'dry' ? 'initialGrams' : 'initialMl', 'Say how much was in it.')
    if (initialGrams !== undefined && initialMl !== undefined)
      add('initialMl', 'Give grams or millilitres, not both.')
    if (packet.form === 'dry' && initialMl !== undefined) add('initialMl', 'Dry yeast is counted in grams.')
    if (remainingGrams !== undefined && initialGrams === undefined)
      add('remainingGrams', 'Use the unit of what was in it.')
    if (remainingMl !== undefined && initialMl === undefined)
      add('remainingMl', 'Use the unit of what was in it.')
    const left = remainingGrams ?? remainingMl
    const initial = initialGrams ?? initialMl
    if (left !== undefined && initial !== undefined && left > initial)
      add(remainingGrams === undefined ? 'remainingMl' : 'remainingGrams', 'No more than was in it.')
  })
export type PacketRequest = z.output<typeof PacketRequest>

/** Absent leaves as it is, `null` clears. A new `storage` counts from `movedOn`, today unless said. */
export const PacketPatch = z.strictObject({
  ...z.object(facts).partial().shape,
  storage: z.enum(STORAGES).optional(),
  movedOn: CalendarDay.optional(),
  remainingGrams: AmountLeft.optional(),
  remainingMl: AmountLeft.optional(),
})
export type PacketPatch = z.output<typeof PacketPatch>

/** What differs in a new packet of a strain that was here before; the rest is taken over. */
export const PacketCopy = z.strictObject({
  lotCode: facts.lotCode.optional(),
  madeOn: facts.madeOn.optional(),
  bestBefore: facts.bestBefore.optional(),
  storage: z.enum(STORAGES).optional(),
  shared: z.boolean().optional(),
})
export type PacketCopy = z.output<typeof PacketCopy>

export const Viability = z.object({ estimate: z.number(), low: z.number(), high: z.number() })
export const Lot = z.object({
  id: Id,
  state: z.enum(LOT_STATES),
  note: z.string().nullable(),
  version: z.int(),
})

export type Lot = z.output<typeof Lot>

export const Packet = z.object({
  id: Id,
  strain: z.string(),
  form: z.enum(YEAST_FORMS),
  use: z.enum(DRINK_USES),
  lotCode: z.string().nullable(),
  madeOn: CalendarDay.nullable(),
  bestBefore: CalendarDay.nullable(),
  dateState: z.enum(DATE_STATES).nullable(),
  openedOn: CalendarDay.nullable(),
  storage: z.enum(STORAGES),
  storageHistory: z.array(z.object({ from: CalendarDay, storage: z.enum(STORAGES) })),
  initialGrams: z.number().nullable(),
  initialMl: z.number().nullable(),
  remainingGrams: z.number().nullable(),
  remainingMl: z.number().nullable(),
  shared: z.boolean(),
  place: z.string().nullable(),
  note: z.string(),
  /** Changes with the photo; null: there is none. */
  photoName: z.string().nullable(),
  lot: Lot,
  ownerName: z.string(),
  mine: z.boolean(),
  /** Whether the reader may change it. */
  editable: z.boolean(),
  discardedAt: Instant.nullable(),
  createdAt: Instant,
  updatedAt: Instant,
  version: z.int(),
})
export type Packet = z.output<typeof Packet>

/** A packet in the list, with how likely it is to start in an ordinary batch. */
export const FridgePacket = Packet.extend({
  viability: Viability,
  verdict: z.enum(VERDICTS),
  reason: z.string(),
})
export type FridgePacket = z.output<typeof FridgePacket>

const Step = z.object({ title: z.string(), text: z.string() })
const Span = z.object({ low: z.number(), high: z.number() })
const Must = z.object({ volumeLitres: z.number(), og: z.number() })

const Dose = z.object({
  unit: z.enum(AMOUNT_UNITS),
  grams: z.number(),
  low: z.number(),
  high: z.number(),
  enough: z.boolean(),
  rehydrationMl: z.number().nullable(),
  rehydrationTemperatureC: Span.nullable(),
  steps: z.array(Step),
  expectedHours: z.object({ early: z.number(), likely: z.number(), late: z.number() }),
  worryAfterHours: z.number(),
  ifNothingBy: Instant,
  ifNothing: z.string(),
  cellsPerMl: z.number(),
})

const ProvingTest = z.object({
  grams: z.number(),
  waterMl: z.number(),
  sugarGrams: z.number(),
  temperatureC: Span,
  minutes: z.object({ sound: z.number(), last: z.number() }),
  steps: z.array(Step),
})

const Alternative = z.object({
  id: Id,
  strain: z.string(),
  form: z.enum(YEAST_FORMS),
  use: z.enum(DRINK_USES),
  place: z.string().nullable(),
  remaining: z.number(),
  unit: z.enum(AMOUNT_UNITS),
  verdict: z.enum(VERDICTS),
  viability: Viability,
  reason: z.string(),
  grams: z.number(),
})
export type Alternative = z.output<typeof Alternative>

/** What became of one pitch of a lot; without names. */
const Report = z.object({
  outcome: z.enum(OUTCOMES),
  hoursToActivity: z.number().nullable(),
  pitchedOn: CalendarDay,
  setAside: z.boolean(),
  mine: z.boolean(),
})
export type Report = z.output<typeof Report>

export const Vitality = z.object({
  on: CalendarDay,
  viability: Viability,
  verdict: z.enum(VERDICTS),
  reason: z.string(),
  reasons: z.array(z.object({ text: z.string(), why: z.string(), effect: z.enum(EFFECTS) })),
  pitch: Dose,
  proving: ProvingTest.nullable(),
  evidence: z.object({
    pitches: z.int(),
    started: z.int(),
    slow: z.int(),
    none: z.int(),
    /** Newest first, at most fifty. */
    reports: z.array(Report),
  }),
  assumed: Must,
  alternatives: z.array(Alternative),
})
export type Vitality = z.output<typeof Vitality>

export const PitchRequest = z
  .strictObject({
    packetId: Id,
    grams: Amount.optional(),
    ml: Amount.optional(),
    at: InstantInput.optional(),
    mustTemperatureC: numberIn(-5, 60).nullable().optional(),
    rehydrated: z.boolean().default(false),
  })
  .superRefine(({ grams, ml }, context) => {
    if (grams === undefined && ml === undefined)
      context.addIssue({ code: 'custom', path: ['grams'], message: 'Say how much you pitched.' })
    if (grams !== undefined && ml !== undefined)
      context.addIssue({ code: 'custom', path: ['ml'], message: 'Give grams or millilitres, not both.' })
  })
export type PitchRequest = z.output<typeof PitchRequest>

export const Pitch = z.object({
  id: Id,
  packetId: Id,
  strain: z.string(),
  batchId: Id,
  batchName: z.string(),
  at: Instant,
  grams: z.number().nullable(),
  ml: z.number().nullable(),
  mustTemperatureC: z.number().nullable(),
  rehydrated: z.boolean(),
  expectedHours: z.number(),
  /** From when a report is asked for. */
  outcomeWantedAt: Instant,
  outcome: z.enum(OUTCOMES).nullable(),
  hoursToActivity: z.number().nullable(),
  reportedAt: Instant.nullable(),
  cautions: z.array(z.string()),
})
export type Pitch = z.output<typeof Pitch>

export const OutcomeRequest = z.strictObject({
  outcome: z.enum(OUTCOMES),
  /** Until the first sign, or how long it was watched in vain. */
  hoursToActivity: numberIn(0.5, 1000).nullable().optional(),
})
export type OutcomeRequest = z.output<typeof OutcomeRequest>

const LotDecision = z.strictObject({ note: line(300) })
const Strain = z.object({
  packetId: Id,
  strain: z.string(),
  form: z.enum(YEAST_FORMS),
  use: z.enum(DRINK_USES),
  unit: z.enum(AMOUNT_UNITS),
  initial: z.number(),
  storage: z.enum(STORAGES),
  lotCode: z.string().nullable(),
  bestBefore: CalendarDay.nullable(),
  shared: z.boolean(),
})
export type Strain = z.output<typeof Strain>

const params = z.object({ id: Id })

export const yeastEndpoints = {
  list: endpoint({
    method: 'GET',
    path: '/packets',
    access: 'member',
    summary: 'The fridge: shared packets and your own, likeliest to start first.',
    query: z.object({
      ...pageQuery,
      use: z.enum(DRINK_USES).optional(),
      form: z.enum(YEAST_FORMS).optional(),
      mine: queryFlag.optional(),
      flagged: queryFlag.optional(),
      date: z.enum(DATE_STATES).optional(),
      state: z.enum(PACKET_STATES).default('at-hand'),
    }),
    reply: pageOf(FridgePacket),
  }),
  create: endpoint({
    method: 'POST',
    path: '/packets',
    access: 'member',
    summary: 'Put a packet in the fridge.',
    creates: 'sync',
    status: 201,
    body: PacketRequest,
    reply: Packet,
  }),
  get: endpoint({
    method: 'GET',
    path: '/packets/:id',
    access: 'member',
    summary: 'One packet: shared, or your own.',
    params,
    reply: Packet,
  }),
  change: endpoint({
    method: 'PATCH',
    path: '/packets/:id',
    access: 'member',
    summary: 'Change a packet of yours (stewards: any shared one). Moving it adds to its history.',
    versioned: true,
    params,
    body: PacketPatch,
    reply: Packet,
  }),
  copy: endpoint({
    method: 'POST',
    path: '/packets/:id/copies',
    access: 'member',
    summary: 'Put in a fresh packet of the same strain, full and sealed.',
    creates: 'sync',
    status: 201,
    params,
    body: PacketCopy,
    reply: Packet,
  }),
  discard: endpoint({
    method: 'POST',
    path: '/packets/:id/discard',
    access: 'member',
    summary: 'Throw away what is left of a packet of yours (stewards: any shared one).',
    params,
    body: z.strictObject({ note: line(300).optional() }),
    reply: Packet,
  }),
  addPhoto: endpoint({
    method: 'POST',
    path: '/packets/:id/photo',
    access: 'member',
    summary:
      'The photo of a packet: JPEG, PNG or WebP, at most 8 MiB. It is redrawn; a new one replaces the old.',
    creates: 'async',
    status: 201,
    params,
    upload: 'photo',
    reply: Packet,
  }),
  photo: endpoint({
    method: 'GET',
    path: '/packets/:id/photo',
    access: 'member',
    summary: 'The photo of a packet, as WebP.',
    params,
    query: z.object({ size: z.enum(['thumb', 'full']).default('full'), name: z.string().max(64).optional() }),
    reply: null,
    file: 'image/webp',
  }),
  removePhoto: endpoint({
    method: 'DELETE',
    path: '/packets/:id/photo',
    access: 'member',
    summary: 'Remove the photo of a packet.',
    params,
    status: 204,
    reply: null,
  }),
  vitality: endpoint({
    method: 'GET',
    path: '/packets/:id/vitality',
    access: 'member',
    summary: 'Will it start, and how much to pitch.',
    params,
    query: z.object({
      on: CalendarDay.optional(),
      volumeLitres: queryNumber(0.1, 1000).optional(),
      og: queryNumber(1, 1.2).optional(),
    }),
    reply: Vitality,
  }),
  strains: endpoint({
    method: 'GET',
    path: '/yeast-strains',
    access: 'member',
    summary: 'Strains that were here before, each with its newest packet to copy from.',
    query: z.object(pageQuery),
    reply: pageOf(Strain),
  }),
  pitch: endpoint({
    method: 'POST',
    path: '/batches/:id/pitches',
    access: 'member',
    summary: 'Pitch from a packet into a batch of yours; takes the amount from the packet.',
    creates: 'sync',
    status: 201,
    params,
    body: PitchRequest,
    reply: Pitch,
  }),
  pitches: endpoint({
    method: 'GET',
    path: '/pitches',
    access: 'member',
    summary: 'Your pitches, newest first; or those whose outcome is wanted.',
    query: z.object({
      ...pageQuery,
      batchId: Id.optional(),
      packetId: Id.optional(),
      waiting: queryFlag.optional(),
    }),
    reply: pageOf(Pitch),
  }),
  getPitch: endpoint({
    method: 'GET',
    path: '/pitches/:id',
    access: 'member',
    summary: 'One pitch of yours.',
    params,
    reply: Pitch,
  }),
  report: endpoint({
    method: 'POST',
    path: '/pitches/:id/outcome',
    access: 'member',
    summary: 'Say what became of a pitch of yours. A later report replaces an earlier one.',
    creates: 'sync',
    params,
    body: OutcomeRequest,
    reply: Pitch,
  }),
  withdrawLot: endpoint({
    method: 'POST',
    path: '/yeast-lots/:id/withdraw',
    access: 'steward',
    summary: 'Take a lot out of use, with the reason.',
    params,
    body: LotDecision,
    reply: Lot,
  }),
  clearLot: endpoint({
    method: 'POST',
    path: '/yeast-lots/:id/clear',
    access: 'steward',
    summary: 'Put a lot back in use: its failures so far had another cause.',
    params,
    body: LotDecision,
    reply: Lot,
  }),
}
