import { describe, expect, it } from 'vitest'
import { addDays, day } from '#shared/time/day'
import { nearDateOwed, outcomeAsked } from '#shared/yeast/due'
import type { Instant } from '#shared/time/instant'
import { queueNotices } from '#server/jobs/queue-notices'
import { outbox } from '#tests/support/mail'
import { people } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'
import { dayFromNow, makePacket, pitch, pitchAndReport } from '#tests/support/makers/yeast'

describe('what the fridge writes', () => {
  it('tells an owner once that a packet nears its date, and nobody else', async () => {
    const app = testApp()
    const { ada, bo } = people(app)
    const near = await makePacket(app, ada, { bestBefore: dayFromNow(app, 40), shared: false })
    await makePacket(app, bo, { bestBefore: dayFromNow(app, 20) })
    const spent = await makePacket(app, ada, { bestBefore: dayFromNow(app, 40) })
    await ada.agent.post(`/api/packets/${spent.id}/discard`).send({})
    queueNotices(app.deps)
    expect(outbox(app)).toEqual([])
    app.clock.advance({ days: 11 })
    queueNotices(app.deps)
    queueNotices(app.deps)
    app.clock.advance({ days: 1 })
    queueNotices(app.deps)
    expect(outbox(app)).toMatchObject([
      { kind: 'packet-near-best-before', memberId: ada.id, aboutId: near.id },
    ])
  })

  it('asks how a pitch went, the morning after its time, until somebody says', async () => {
    const app = testApp()
    const { ada, bo } = people(app)
    const { id } = await makePacket(app, ada)
    const asked = await pitch(bo, id)
    const told = await pitch(bo, id)
    queueNotices(app.deps)
    expect(outbox(app)).toEqual([])
    app.clock.advance({ hours: 20 })
    await bo.agent.post(`/api/pitches/${told.id}/outcome`).send({ outcome: 'started' })
    queueNotices(app.deps)
    app.clock.advance({ hours: 30 })
    queueNotices(app.deps)
    const letters = outbox(app)
    expect(letters).toMatchObject([{ kind: 'packet-outcome-wanted', memberId: bo.id, aboutId: asked.id }])
    expect(letters[0]?.text).toContain(`http://localhost:3000/pitches/${asked.id}/outcome`)
  })

  it('tells stewards and whoever has a packet of it that a lot is flagged', async () => {
    const app = testApp()
    const { ada, bo, sam, kit } = people(app)
    const first = await makePacket(app, ada)
    const own = await makePacket(app, bo, { shared: false })
    await pitchAndReport(app, ada, first.id, { outcome: 'none' })
    expect(outbox(app)).toEqual([])
    await pitchAndReport(app, ada, first.id, { outcome: 'none' })
    await pitchAndReport(app, ada, first.id, { outcome: 'none' })
    const letters = outbox(app)
    expect(letters.map(({ kind }) => kind)).toEqual(Array(4).fill('packet-lot-flagged'))
    const to = (who: typeof ada) => letters.find(({ memberId }) => memberId === who.id)?.text ?? ''
    expect(to(bo)).toContain(`/yeast/${own.id}`)
    expect(to(bo)).toContain('You have a packet of it')
    for (const steward of [sam, kit]) {
      expect(to(steward)).toContain(`/yeast/${first.id}`)
      expect(to(steward)).not.toContain(own.id)
    }
  })
})

describe('when a letter is owed', () => {
  const on = day('2031-06-01')

  it('counts 30 days ahead for dry yeast, 14 for liquid, and not for what came late', () => {
    const owed = (form: 'dry' | 'liquid', ahead: number, addedOn = addDays(on, -200)) =>
      nearDateOwed({ form, bestBefore: addDays(on, ahead), addedOn }, on)
    expect([31, 30, 0, -1].map((ahead) => owed('dry', ahead))).toEqual([false, true, true, false])
    expect([15, 14].map((ahead) => owed('liquid', ahead))).toEqual([false, true])
    expect(owed('dry', 20, addDays(on, -5))).toBe(false)
  })

  it('waits for nine in the morning, and forgets after a week', () => {
    const asked = (at: string) => outcomeAsked(at as Instant, on, 'Europe/London')
    expect(asked('2031-06-01T08:00:00.000Z')).toBe(true)
    expect(asked('2031-06-01T08:00:01.000Z')).toBe(false)
    expect(asked('2031-05-25T08:00:01.000Z')).toBe(true)
    expect(asked('2031-05-25T08:00:00.000Z')).toBe(false)
  })
})
