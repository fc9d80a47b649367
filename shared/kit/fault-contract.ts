import { z } from 'zod'
import { endpoint } from '../http/endpoint.ts'
import { Id, line } from '../http/fields.ts'
import { Instant } from '../time/instant.ts'
import { FAULT_SEVERITIES } from './vocabulary.ts'

export const FaultReport = z
  .strictObject({
    summary: line(500),
    /** Takes the item out of service until it is resolved. */
    blocking: z.boolean(),
    /** `major` for one that blocks and `minor` for one that does not, unless said. */
    severity: z.enum(FAULT_SEVERITIES).optional(),
  })
  .refine((fault) => fault.severity !== 'danger' || fault.blocking, {
    path: ['blocking'],
    message: 'What may hurt someone must not be lent: say that it blocks.',
  })
export type FaultReport = z.output<typeof FaultReport>

export const FaultResolution = z.strictObject({
  /** What was done. */
  note: line(500).optional(),
})

export const Fault = z.object({
  id: Id,
  itemId: Id,
  summary: z.string(),
  blocking: z.boolean(),
  severity: z.enum(FAULT_SEVERITIES),
  reportedByName: z.string(),
  reportedAt: Instant,
  resolvedByName: z.string().nullable(),
  resolvedAt: Instant.nullable(),
  note: z.string().nullable(),
})
export type Fault = z.output<typeof Fault>

const params = z.object({ id: Id })

export const faultEndpoints = {
  reportFault: endpoint({
    method: 'POST',
    path: '/items/:id/faults',
    access: 'member',
    summary: 'Reports what is wrong with an item; one that blocks takes it out of service.',
    params,
    body: FaultReport,
    status: 201,
    reply: Fault,
    creates: 'sync',
  }),
  resolveFault: endpoint({
    method: 'POST',
    path: '/faults/:id/resolve',
    access: 'steward',
    summary: 'Says that a fault is mended.',
    params,
    body: FaultResolution,
    reply: Fault,
  }),
}
