import type { Batch } from '#shared/batches/contract'
import type { Packet, Pitch, Vitality } from '#shared/yeast/contract'
import { addDays, type CalendarDay } from '#shared/time/day'
import type { Person } from '#tests/support/people'
import type { TestApp } from '#tests/support/test-app'

/** Days before (negative) or after today of the app's clock. */
export const dayFromNow = (app: TestApp, days: number): CalendarDay => addDays(app.clock.today(), days)

/** Sealed dry mead yeast, made two months ago, kept cold: as good as yeast gets. */
export const soundPacket = (app: TestApp, more: object = {}) => ({
  strain: 'Fallow 71',
  form: 'dry',
  use: 'mead',
  lotCode: 'F71-0924',
  madeOn: dayFromNow(app, -60),
  bestBefore: dayFromNow(app, 600),
  storage: 'fridge',
  initialGrams: 5,
  ...more,
})

export async function makePacket(app: TestApp, owner: Person, more: object = {}): Promise<Packet> {
  const reply = await owner.agent.post('/api/packets').send(soundPacket(app, more))
  if (reply.status !== 201) throw new Error(`no packet: ${reply.text}`)
  return reply.body as Packet
}

export async function makeBatch(owner: Person, more: object = {}): Promise<Batch> {
  const reply = await owner.agent
    .post('/api/batches')
    .send({ name: 'Windfall cyser', style: 'cyser', volumeLitres: 4.5, og: 1.082, ...more })
  if (reply.status !== 201) throw new Error(`no batch: ${reply.text}`)
  return reply.body as Batch
}

export async function vitalityOf(reader: Person, packetId: string, query = ''): Promise<Vitality> {
  const reply = await reader.agent.get(`/api/packets/${packetId}/vitality${query}`)
  if (reply.status !== 200) throw new Error(`no answer: ${reply.text}`)
  return reply.body as Vitality
}

/** Pitches a gram into a batch of the member's own, and reports when an outcome is given. */
export async function pitch(owner: Person, packetId: string, more: object = {}): Promise<Pitch> {
  const { id } = await makeBatch(owner)
  const reply = await owner.agent
    .post(`/api/batches/${id}/pitches`)
    .send({ packetId, grams: 1, rehydrated: true, ...more })
  if (reply.status !== 201) throw new Error(`no pitch: ${reply.text}`)
  return reply.body as Pitch
}

export async function pitchAndReport(
  app: TestApp,
  owner: Person,
  packetId: string,
  outcome: { outcome: string; hoursToActivity?: number },
): Promise<Pitch> {
  const { id } = await pitch(owner, packetId, {
    at: new Date(Date.parse(app.clock.now()) - 3 * 86_400_000).toISOString(),
  })
  const reply = await owner.agent.post(`/api/pitches/${id}/outcome`).send(outcome)
  if (reply.status !== 200) throw new Error(`no outcome: ${reply.text}`)
  return reply.body as Pitch
}
