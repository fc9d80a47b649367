import { z } from 'zod'
import { endpoint } from '../http/endpoint.ts'
import { Id, intIn, line, numberIn, prose, Version } from '../http/fields.ts'
import { pageOf, pageQuery } from '../http/paging.ts'
import { WEEKDAYS } from '../time/day.ts'
import { isTimeZone } from '../time/instant.ts'

const Currency = z.string().regex(/^[A-Z]{3}$/, 'Use three letters, like GBP.')
const TimeZone = z.string().max(60).refine(isTimeZone, 'Use a zone name such as Europe/London.')

/** How this space is set up. */
export const Space = z.object({
  name: z.string(),
  timeZone: z.string(),
  currency: z.string(),
  demo: z.boolean(),
  /** Days on which kit is handed over and taken back. */
  openDays: z.array(z.enum(WEEKDAYS)),
  /** Hour of the day, in the space’s zone, at which reminders go out. */
  mailHour: z.int(),
  roomM3: z.number().nullable(),
  airChangesPerHour: z.number().nullable(),
  allergenNote: z.string(),
  houseRules: z.string(),
  requireSecondFactor: z.boolean(),
  version: Version,
})
export type Space = z.output<typeof Space>

export const SpaceChange = z.strictObject({
  name: line(60).optional(),
  timeZone: TimeZone.optional(),
  currency: Currency.optional(),
  openDays: z.array(z.enum(WEEKDAYS)).min(1, 'Open on one day at least.').max(7).optional(),
  mailHour: intIn(0, 23).optional(),
  roomM3: numberIn(1, 100_000).nullable().optional(),
  airChangesPerHour: numberIn(0.05, 100).nullable().optional(),
  allergenNote: prose(2000).optional(),
  houseRules: prose(8000).optional(),
  requireSecondFactor: z.boolean().optional(),
})

/** One line of the audit trail: who did what to which thing, and how it went. */
export const AuditEntry = z.object({
  seq: z.int(),
  at: z.string(),
  actorId: z.string().nullable(),
  actorName: z.string().nullable(),
  action: z.string(),
  subject: z.string().nullable(),
  outcome: z.string(),
})
export type AuditEntry = z.output<typeof AuditEntry>

export const Backup = z.object({
  name: z.string(),
  madeAt: z.string(),
  bytes: z.int(),
})
export type Backup = z.output<typeof Backup>

export const spaceEndpoints = {
  get: endpoint({
    method: 'GET',
    path: '/space',
    access: 'member',
    summary: 'How the space is set up, with its house rules.',
    reply: Space,
  }),
  edit: endpoint({
    method: 'PATCH',
    path: '/space',
    access: 'admin',
    summary: 'Change the settings of the space.',
    versioned: true,
    body: SpaceChange,
    reply: Space,
  }),
  audit: endpoint({
    method: 'GET',
    path: '/audit',
    access: 'admin',
    summary: 'The audit trail, newest first.',
    query: z.object({
      ...pageQuery,
      q: z.string().trim().max(80).optional(),
      actorId: Id.optional(),
      outcome: z.enum(['done', 'refused']).optional(),
    }),
    reply: pageOf(AuditEntry),
  }),
  checkAudit: endpoint({
    method: 'GET',
    path: '/audit/check',
    access: 'admin',
    summary: 'Whether the chain of the audit trail is whole.',
    reply: z.object({ entries: z.int(), brokenAt: z.int().nullable() }),
  }),
  backups: endpoint({
    method: 'GET',
    path: '/backups',
    access: 'admin',
    summary: 'The copies kept on this machine, newest first.',
    reply: z.object({ items: z.array(Backup) }),
  }),
  backUp: endpoint({
    method: 'POST',
    path: '/backups',
    access: 'admin',
    summary: 'Make a copy now; it is opened and checked before it counts.',
    status: 201,
    creates: 'async',
    reply: Backup,
  }),
}
