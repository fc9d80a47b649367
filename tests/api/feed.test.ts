import ICAL from 'ical.js'
import request from 'supertest'
import { describe, expect, it } from 'vitest'
import { addDays, type CalendarDay } from '#shared/time/day'
import { toInstant } from '#shared/time/instant'
import { feedText, type FeedLoan } from '#server/services/feed'
import { person } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'

/** A small generator with a fixed start: the same calendars at every run. */
function dice(seed: number) {
  let state = seed
  return (below: number) => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0
    return Math.floor((state / 2 ** 32) * below)
  }
}

const NAMES = [
  'Demijohn 4.5 L, glass',
  'Größe; groß, "weit"',
  'Kürbis\\Topf',
  '🍯🍎🐝'.repeat(12),
  'x'.repeat(120),
]
const STATES = ['requested', 'approved', 'out', 'returned', 'cancelled', 'lapsed']

function randomLoans(next: (below: number) => number): FeedLoan[] {
  return Array.from({ length: next(5) }, (_, index) => {
    const fromOn = addDays('2030-01-01' as CalendarDay, next(2000))
    return {
      id: `loan-${index}-${next(1e6)}`,
      kindName: NAMES[next(NAMES.length)] ?? '',
      tag: next(2) ? `DJ-${next(99)}` : null,
      fromOn,
      toOn: addDays(fromOn, next(60)),
      status: STATES[next(STATES.length)] ?? 'out',
      sequence: next(9),
      updatedAt: toInstant(1_900_000_000_000 + next(1e9)),
    }
  })
}

describe('a calendar feed', () => {
  it('is read back by an independent parser without a difference, and has no line over 75 octets', () => {
    const next = dice(7)
    for (let round = 0; round < 10_000; round += 1) {
      const own = randomLoans(next)
      const text = feedText('Copperwell Cellar', 'http://localhost:3000', own)
      const longest = text.split('\r\n').reduce((most, line) => Math.max(most, Buffer.byteLength(line)), 0)
      if (longest > 75) expect.fail(`a line of ${longest} octets`)
      if (own.length === 0) continue
      const events = new ICAL.Component(ICAL.parse(text) as unknown[]).getAllSubcomponents('vevent')
      const back = events.map((component) => {
        const event = new ICAL.Event(component)
        return [
          event.uid,
          event.summary,
          event.startDate.toString(),
          event.endDate.toString(),
          event.sequence,
        ]
      })
      expect(back).toEqual(
        own.map((loan) => [
          `${loan.id}@loans.barmhouse`,
          loan.tag ? `${loan.kindName} (${loan.tag})` : loan.kindName,
          loan.fromOn,
          addDays(loan.toOn, 1),
          loan.sequence,
        ]),
      )
      const cancelled = events.map((component) => component.getFirstPropertyValue('status') === 'CANCELLED')
      expect(cancelled).toEqual(own.map((loan) => ['cancelled', 'lapsed'].includes(loan.status)))
    }
  })

  it('has an address of its own that can be replaced and stopped', async () => {
    const app = testApp()
    const ada = person(app, 'Ada Marsh')
    const url = async () =>
      new URL(((await ada.agent.post('/api/me/calendar-feed')).body as { url: string }).url).pathname
    const first = await url()
    const reply = await request(app.app).get(first)
    expect([reply.status, reply.type]).toEqual([200, 'text/calendar'])
    const again = await request(app.app)
      .get(first)
      .set('If-None-Match', reply.get('etag') ?? '')
    expect(again.status).toBe(304)
    expect((await request(app.app).get(first)).text).toBe(reply.text)
    const second = await url()
    expect((await request(app.app).get(first)).status).toBe(404)
    expect((await request(app.app).get(second)).status).toBe(200)
    expect((await ada.agent.delete('/api/me/calendar-feed')).status).toBe(204)
    expect((await request(app.app).get(second)).status).toBe(404)
  })
})
