import { describe, expect, it } from 'vitest'
import { eq } from 'drizzle-orm'
import { addMinutes, toInstant } from '#shared/time/instant'
import { day } from '#shared/time/day'
import { batchSteps } from '#server/db/schema/batches'
import { letters } from '#server/db/schema/notices'
import { queueNotices } from '#server/jobs/queue-notices'
import { queueAt } from '#server/jobs/queue-notices-at'
import { longDay } from '#server/mail/letters/days'
import { claimLetter } from '#server/services/letters'
import { outbox, postOffice } from '#tests/support/mail'
import { ask, makeCyser, makeLarder, makeShelf as makeBatchShelf } from '#tests/support/makers/batches'
import { inDays, makeLoan, makeShelf } from '#tests/support/makers/loans'
import { comeBack, people } from '#tests/support/people'
import { testApp, type TestApp } from '#tests/support/test-app'

const kinds = (app: TestApp) => outbox(app).map(({ kind }) => kind)
const ofKind = (app: TestApp, kind: string) => outbox(app).filter((letter) => letter.kind === kind)

/** Tuesday 6 May 2031, ten in the morning: a demijohn is out with Ada until the 20th. */
async function lent() {
  const app = testApp()
  const cast = people(app)
  const { kind } = makeShelf(app, cast.sam, 2, { name: 'Demijohn 4.5 L, glass' })
  const wanted = { kindId: kind.id, from: inDays(app, 0), to: inDays(app, 14) }
  const loan = await makeLoan(app, { member: cast.ada, steward: cast.sam }, wanted, 'out')
  app.db.delete(letters).run()
  return { app, kind, loan, ...cast }
}

describe('the digest', () => {
  it('goes to each steward once a morning when something waits, and tells how much', async () => {
    const { app, ada, bo, sam, kit, kind } = await lent()
    const cast = { member: bo, steward: sam }
    await makeLoan(app, cast, { kindId: kind.id, from: inDays(app, 3), to: inDays(app, 6) }, 'requested')
    app.db.delete(letters).run()
    app.clock.set('2031-05-07T07:59:00.000Z')
    queueNotices(app.deps)
    expect(kinds(app)).toEqual([])
    app.clock.set('2031-05-07T08:00:00.000Z')
    queueNotices(app.deps)
    queueNotices(app.deps)
    const digests = ofKind(app, 'steward-digest')
    expect(digests.map(({ memberId }) => memberId).sort()).toEqual([sam.id, kit.id].sort())
    expect(digests[0]?.text).toContain('To approve: 1')
    expect(digests[0]?.text).not.toContain('Late')
    expect(digests.some(({ memberId }) => memberId === ada.id)).toBe(false)
  })

  it('is not written for an empty desk, nor for what turns up after nine', async () => {
    const { app, bo, sam, kind } = await lent()
    app.clock.set('2031-05-07T08:00:00.000Z')
    queueNotices(app.deps)
    expect(ofKind(app, 'steward-digest')).toEqual([])
    comeBack(app, sam, 'steward')
    const wanted = { kindId: kind.id, from: inDays(app, 3), to: inDays(app, 6) }
    await makeLoan(app, { member: bo, steward: sam }, wanted, 'requested')
    app.clock.set('2031-05-07T12:00:00.000Z')
    queueNotices(app.deps)
    expect(ofKind(app, 'steward-digest')).toEqual([])
    app.clock.set('2031-05-08T08:00:00.000Z')
    queueNotices(app.deps)
    expect(ofKind(app, 'steward-digest')).toHaveLength(2)
  })

  it('says when a member’s address has refused letters twice', async () => {
    const { app, ada, sam, kind } = await lent()
    for (const days of [3, 8]) {
      const wanted = { kindId: kind.id, from: inDays(app, days), to: inDays(app, days + 1) }
      await makeLoan(app, { member: ada, steward: sam }, wanted, 'approved')
    }
    app.db.update(letters).set({ status: 'failed' }).where(eq(letters.memberId, ada.id)).run()
    app.clock.set('2031-05-07T08:00:00.000Z')
    queueNotices(app.deps)
    expect(ofKind(app, 'steward-digest')[0]?.text).toContain('Members whose address refuses letters: 1')
  })

  it('stops for a steward who does not want it', async () => {
    const { app, bo, sam, kit, kind } = await lent()
    const cast = { member: bo, steward: sam }
    await makeLoan(app, cast, { kindId: kind.id, from: inDays(app, 3), to: inDays(app, 6) }, 'requested')
    await sam.agent.patch('/api/me/notices').set('If-Match', '"1"').send({ 'steward-digest': false })
    app.clock.set('2031-05-07T08:00:00.000Z')
    queueNotices(app.deps)
    expect(ofKind(app, 'steward-digest').map(({ memberId }) => memberId)).toEqual([kit.id])
  })
})

describe('a reminder that waits for the relay', () => {
  it('is replaced by the newer one', async () => {
    const { app, loan } = await lent()
    for (const on of ['2031-05-17', '2031-05-20', '2031-05-21']) {
      app.clock.set(`${on}T08:00:00.000Z`)
      queueNotices(app.deps)
    }
    const reminders = outbox(app).filter(({ aboutId }) => aboutId === loan.id)
    expect(reminders.map(({ kind, status }) => [kind, status])).toEqual([
      ['loan-due-soon', 'dropped'],
      ['loan-due-today', 'dropped'],
      ['loan-overdue', 'queued'],
    ])
    expect(reminders[2]?.inReplyTo).toBe(reminders[0]?.messageId)
  })

  it('is not sent once the kit is back', async () => {
    const { app, loan, sam } = await lent()
    app.clock.set('2031-05-21T08:00:00.000Z')
    queueNotices(app.deps)
    comeBack(app, sam, 'steward')
    await ask(sam.agent.post(`/api/loans/${loan.id}/check-in`).send({ condition: 'ok', hygiene: 'clean' }))
    const post = await postOffice(app)
    await post.deliver()
    await post.close()
    expect(post.caught().filter(({ subject }) => subject.startsWith('Late'))).toEqual([])
    expect(ofKind(app, 'loan-overdue')[0]).toMatchObject({
      status: 'dropped',
      lastError: 'The loan has moved on.',
    })
  })

  it('is not sent once the loan has other days; those get their own', async () => {
    const { app, ada, loan } = await lent()
    app.clock.set('2031-05-20T08:00:00.000Z')
    queueNotices(app.deps)
    comeBack(app, ada)
    await ask(ada.agent.post(`/api/loans/${loan.id}/extend`).send({ to: '2031-05-27' }))
    for (let letter = claimLetter(app.deps); letter; letter = claimLetter(app.deps))
      expect(letter.kind).not.toBe('loan-due-today')
    app.clock.set('2031-05-24T08:00:00.000Z')
    queueNotices(app.deps)
    expect(ofKind(app, 'loan-due-soon').at(-1)?.subject).toContain('Tuesday 27 May 2031')
  })
})

describe('the clock set wrong', () => {
  it('forward and back again by three days doubles nothing and misses nothing', async () => {
    const { app, loan } = await lent()
    const run = (at: string) => {
      app.clock.set(at)
      queueNotices(app.deps)
    }
    run('2031-05-16T08:00:00.000Z')
    run('2031-05-20T09:00:00.000Z')
    run('2031-05-17T07:00:00.000Z')
    for (const on of ['17', '18', '19', '20', '21', '22', '23']) {
      run(`2031-05-${on}T08:00:00.000Z`)
      run(`2031-05-${on}T07:00:00.000Z`)
      run(`2031-05-${on}T08:30:00.000Z`)
    }
    const written = outbox(app).filter(({ aboutId }) => aboutId === loan.id)
    expect(written.map(({ dedupeKey }) => dedupeKey.split(':').at(-1)).sort()).toEqual([
      '2031-05-17',
      '2031-05-20',
      '2031-05-21',
      '2031-05-23',
    ])
  })
})

describe('a batch', () => {
  async function planned() {
    const app = testApp()
    const cast = people(app)
    makeBatchShelf(app)
    const larder = makeLarder(app, cast.sam)
    const batch = await makeCyser(cast.ada, larder, { og: 1.088, expectedFg: 0.998 })
    return { app, batch, ...cast }
  }

  /** With dates and its kit asked for; `on` is the first day that has a step. */
  async function dated() {
    const all = await planned()
    const request = { startOn: '2031-05-12' }
    await ask(all.ada.agent.post(`/api/batches/${all.batch.id}/plan/request`).send(request), 201)
    const days = all.app.db.select({ on: batchSteps.plannedOn }).from(batchSteps).all()
    const on = days.flatMap((step) => step.on ?? []).sort()[0] ?? expect.fail('no dates')
    return { ...all, on }
  }

  it('is written about on the morning of a step, once, whatever else that day holds', async () => {
    const { app, batch, ada, on } = await dated()
    app.clock.set(`${on}T07:59:00.000Z`)
    queueNotices(app.deps)
    expect(ofKind(app, 'batch-step-due')).toEqual([])
    app.clock.set(`${on}T08:00:00.000Z`)
    queueNotices(app.deps)
    queueNotices(app.deps)
    const [letter, ...more] = ofKind(app, 'batch-step-due')
    expect(more).toEqual([])
    expect(letter).toMatchObject({ memberId: ada.id, aboutId: batch.id, aboutOn: on })
    expect(letter?.text).toContain(longDay(on))
  })

  it('is not written about for steps done before the letter left', async () => {
    const { app, batch, on } = await dated()
    app.clock.set(`${on}T08:00:00.000Z`)
    queueNotices(app.deps)
    app.db.update(batchSteps).set({ doneAt: app.clock.now() }).where(eq(batchSteps.batchId, batch.id)).run()
    for (let letter = claimLetter(app.deps); letter; letter = claimLetter(app.deps))
      expect(letter.kind).not.toBe('batch-step-due')
    expect(ofKind(app, 'batch-step-due')[0]?.status).toBe('dropped')
  })

  it('that is likely to outlast its loan brings an offer to keep the vessel, once', async () => {
    const { app, batch, ada, sam } = await planned()
    const wish = { kindId: 'demijohn', from: '2031-05-06', to: '2031-06-06', batchId: batch.id }
    const loan = await ask<{ id: string }>(ada.agent.post('/api/loans').send(wish), 201)
    await ask(sam.agent.post(`/api/loans/${loan.id}/approve`).send({}))
    await ask(sam.agent.post(`/api/loans/${loan.id}/check-out`).send({ itemId: 'demijohn-1' }))
    const path = `/api/batches/${batch.id}`
    const { version } = await ask<{ version: number }>(ada.agent.get(path))
    await ask(ada.agent.patch(path).set('If-Match', `"${version}"`).send({ status: 'fermenting' }))
    const start = Date.parse(app.clock.now())
    const fall: [number, number][] = [
      [0, 1.088],
      [3, 1.08],
      [7, 1.063],
      [12, 1.044],
      [17, 1.025],
      [22, 1.013],
      [24, 1.01],
    ]
    for (const [days, gravity] of fall) {
      app.clock.set(addMinutes(toInstant(start), days * 24 * 60))
      comeBack(app, ada)
      const reading = { at: app.clock.now(), gravity, temperatureC: 20 }
      await ask(ada.agent.post(`${path}/readings`).send(reading), 201)
    }
    for (const at of ['2031-05-31T08:00', '2031-05-31T08:01', '2031-06-01T08:00']) {
      app.clock.set(`${at}:00.000Z`)
      queueNotices(app.deps)
    }
    const [letter, ...more] = ofKind(app, 'batch-outlasts-loan')
    expect(more).toEqual([])
    expect(letter).toMatchObject({ memberId: ada.id, aboutId: loan.id, aboutOn: day('2031-06-06') })
    expect(letter?.text).toContain('is due back on Friday 6 June 2031')
    expect(letter?.text).toContain('yours at once')
  })
})

describe('asking what a moment would queue', () => {
  it('shows it without writing it, then writes just that, to leave now', async () => {
    const { app, ada, loan } = await lent()
    const leaveAt = app.clock.now()
    app.clock.set('2031-05-17T08:00:00.000Z')
    const before = app.db.$client.serialize()
    const shown = queueAt(app.deps, { dryRun: true, leaveAt })
    expect(app.db.$client.serialize().equals(before)).toBe(true)
    expect(shown).toMatchObject([
      { kind: 'loan-due-soon', memberId: ada.id, to: ada.email, aboutId: loan.id },
    ])
    expect(queueAt(app.deps, { dryRun: false, leaveAt })).toEqual(shown)
    expect(queueAt(app.deps, { dryRun: true, leaveAt })).toEqual([])
    app.clock.set(leaveAt)
    expect(claimLetter(app.deps)).toMatchObject({ kind: 'loan-due-soon' })
  })
})
