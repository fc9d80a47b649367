import { day } from '#shared/time/day'
import { write } from '#server/db/open'
import { queueNotice } from '#server/services/notices'
import type { TestApp } from './test-app.ts'

let count = 0

/** Queues a letter that cannot be switched off: a booking approved. Gives back its id. */
export function queueApproval(app: TestApp, memberId: string, kindName = 'Demijohn 4.5 L, glass'): string {
  const loanId = `loan-${count++}`
  const dates = { from: day('2031-05-20'), to: day('2031-06-20') }
  const id = write(app.db, (tx) =>
    queueNotice(tx, app.deps, {
      kind: 'loan-approved',
      memberId,
      about: { type: 'loan', id: loanId, on: dates.to },
      dedupeKey: `loan-approved:${loanId}`,
      facts: { loanId, kindName, ...dates },
    }),
  )
  if (!id) throw new Error('nothing was queued')
  return id
}

/** Queues a letter that can be switched off; undefined when it is. */
export function queueUseSoon(app: TestApp, memberId: string): string | undefined {
  const packetId = `packet-${count++}`
  return write(app.db, (tx) =>
    queueNotice(tx, app.deps, {
      kind: 'packet-near-best-before',
      memberId,
      about: { type: 'packet', id: packetId },
      dedupeKey: `packet-near-best-before:${packetId}`,
      facts: { packetId, strain: 'Fenland Ale', bestBefore: day('2031-06-05') },
    }),
  )
}
