import { z } from 'zod'
import { endpoint } from '../http/endpoint.ts'
import { Id, intIn, line, numberIn, prose, queryFlag } from '../http/fields.ts'
import { pageOf, pageQuery } from '../http/paging.ts'
import { CalendarDay } from '../time/day.ts'
import { KIND_CATEGORIES } from './vocabulary.ts'

const facts = {
  name: line(80),
  category: z.enum(KIND_CATEGORIES),
  description: prose(2000),
  capacityLitres: numberIn(0.001, 10_000).nullable(),
  turnaroundDays: intIn(0, 60),
  maxLoanDays: intIn(1, 366),
  maxAheadDays: intIn(0, 730),
  maxPerMember: intIn(1, 100),
  selfApproving: z.boolean(),
  needsInduction: z.boolean(),
  /** Null: an induction does not run out. */
  inductionMonths: intIn(1, 120).nullable(),
  /** How a member gets one. */
  inductionNote: prose(500),
  needsSanitised: z.boolean(),
  /** How long a sanitising lasts. */
  sanitisedHours: intIn(1, 720),
  maxFillTemperatureC: numberIn(0, 150).nullable(),
  /** Hydrometers: the temperature printed on them. */
  markedForTemperatureC: numberIn(10, 30).nullable(),
  /** How often each is to be checked in water. */
  calibrationMonths: intIn(1, 120).nullable(),
  wildOnly: z.boolean(),
  cautions: z.array(line(300)).max(12),
}
const { name, category, ...others } = facts

/** Whatever is left out starts from the usual: 28 days, half a year ahead, two at once, one day of turnaround. */
export const KindRequest = z.strictObject({ name, category, ...z.object(others).partial().shape })
export type KindRequest = z.output<typeof KindRequest>

export const KindPatch = z.strictObject({
  ...z.object(facts).partial().shape,
  retired: z.boolean().optional(),
})
export type KindPatch = z.output<typeof KindPatch>

/** A class of interchangeable things. Members book a kind; the item is chosen when it is handed out. */
export const Kind = z.object({
  id: Id,
  ...z.object(facts).shape,
  retired: z.boolean(),
  items: z.object({
    /** In service or in repair. */
    total: z.int(),
    /** What can be lent: in service, no blocking fault, and of the clean pool (of the wild one for a wild-only kind). */
    serviceable: z.int(),
  }),
  /** Whether you may book it as far as inductions go; always true where none is needed. */
  inducted: z.boolean(),
  inductionExpiresOn: CalendarDay.nullable(),
  version: z.int(),
})
export type Kind = z.output<typeof Kind>

/** That a member was shown how to use a kind. */
export const Induction = z.object({
  memberId: Id,
  memberName: z.string(),
  kindId: Id,
  givenByName: z.string(),
  givenOn: CalendarDay,
  expiresOn: CalendarDay.nullable(),
  valid: z.boolean(),
})
export type Induction = z.output<typeof Induction>

export const InductionRequest = z.strictObject({
  /** Today unless said; not in the future. */
  givenOn: CalendarDay.optional(),
})

const params = z.object({ id: Id })
const inductionParams = z.object({ id: Id, kindId: Id })

export const kindEndpoints = {
  listKinds: endpoint({
    method: 'GET',
    path: '/kinds',
    access: 'member',
    summary: 'Kinds of kit by name, with how many of each there are and can be lent.',
    query: z.object({
      ...pageQuery,
      category: z.enum(KIND_CATEGORIES).optional(),
      q: z.string().trim().max(80).optional(),
      /** Retired kinds in place of those in use. */
      retired: queryFlag.optional(),
    }),
    reply: pageOf(Kind),
  }),
  addKind: endpoint({
    method: 'POST',
    path: '/kinds',
    access: 'steward',
    summary: 'Adds a kind of kit to the catalogue.',
    body: KindRequest,
    status: 201,
    reply: Kind,
    creates: 'sync',
  }),
  getKind: endpoint({
    method: 'GET',
    path: '/kinds/:id',
    access: 'member',
    summary: 'One kind of kit.',
    params,
    reply: Kind,
  }),
  changeKind: endpoint({
    method: 'PATCH',
    path: '/kinds/:id',
    access: 'steward',
    summary: 'Changes a kind. What is left out stays; making it wild-only moves its items to the wild pool.',
    params,
    body: KindPatch,
    reply: Kind,
    versioned: true,
  }),
  listInductions: endpoint({
    method: 'GET',
    path: '/kinds/:id/inductions',
    access: 'steward',
    summary: 'Who has had the induction of a kind.',
    params,
    query: z.object(pageQuery),
    reply: pageOf(Induction),
  }),
  giveInduction: endpoint({
    method: 'PUT',
    path: '/members/:id/inductions/:kindId',
    access: 'steward',
    summary: 'Records that a member was shown how to use a kind; again, to renew it.',
    params: inductionParams,
    body: InductionRequest,
    reply: Induction,
  }),
  takeInduction: endpoint({
    method: 'DELETE',
    path: '/members/:id/inductions/:kindId',
    access: 'steward',
    summary: 'Takes an induction back.',
    params: inductionParams,
    status: 204,
    reply: null,
  }),
}
