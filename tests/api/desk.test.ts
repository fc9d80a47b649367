import { beforeEach, describe, expect, it } from 'vitest'
import type { Desk } from '#shared/loans/desk-contract'
import type { LoanStatus } from '#shared/loans/vocabulary'
import { runLoanRound } from '#server/services/loans/round'
import { askFor, inDays, makeLoan, makeShelf } from '#tests/support/makers/loans'
import { comeBack, people, type Person } from '#tests/support/people'
import { testApp, type TestApp } from '#tests/support/test-app'

let app: TestApp
let cast: ReturnType<typeof people>
let shelf: ReturnType<typeof makeShelf>
beforeEach(() => {
  app = testApp()
  cast = people(app)
  shelf = makeShelf(app, cast.sam, 3, { turnaroundDays: 1, maxPerMember: 9 })
})

const want = (from: number, to: number, more: object = {}) => ({
  kindId: shelf.kind.id,
  from: inDays(app, from),
  to: inDays(app, to),
  ...more,
})
const loan = (who: Person, from: number, to: number, status: LoanStatus, more: object = {}) =>
  makeLoan(app, { member: who, steward: cast.sam }, want(from, to, more), status)
const desk = async () => {
  const reply = await cast.sam.agent.get('/api/desk')
  expect(reply.status, reply.text).toBe(200)
  return reply.body as Desk
}
const pass = (days: number) => {
  app.clock.advance({ days })
  for (const who of [cast.ada, cast.bo]) comeBack(app, who)
  comeBack(app, cast.sam, 'steward')
  runLoanRound(app.deps)
}

describe('the desk', () => {
  it('is empty when there is nothing to do, and for stewards only', async () => {
    expect(await desk()).toEqual({
      today: inDays(app, 0),
      approvals: [],
      collections: [],
      returns: [],
      overdue: [],
      atRisk: [],
      washing: [],
      faults: [],
      waiting: [],
      lowStock: [],
      expiring: [],
    })
    expect((await cast.ada.agent.get('/api/desk')).status).toBe(403)
  })

  it('shows each request with what it would leave, and how to reach who asks', async () => {
    await askFor(cast.bo, want(2, 3))
    await askFor(cast.bo, want(4, 5))
    const mine = await askFor(cast.ada, want(1, 6, { note: 'Two weeks of cyser' }))
    const { approvals } = await desk()
    expect(approvals.find(({ loanId }) => loanId === mine.id)).toMatchObject({
      question: 'request',
      kindName: shelf.kind.name,
      memberName: 'Ada Marsh',
      memberEmail: cast.ada.email,
      from: inDays(app, 1),
      to: inDays(app, 6),
      note: 'Two weeks of cyser',
      freeAfter: 0,
      delays: [],
      version: 1,
    })
    expect(approvals.map(({ freeAfter }) => freeAfter)).toEqual([0, 0, 0])
    expect(approvals.map(({ from }) => from)).toEqual([1, 2, 4].map((days) => inDays(app, days)))
  })

  it('names whom an extension would delay', async () => {
    const { kind, items } = makeShelf(app, cast.sam, 1, { turnaroundDays: 1 })
    const out = await loan(cast.ada, 0, 3, 'out', { kindId: kind.id, itemId: items[0]!.id })
    const next = await loan(cast.bo, 6, 8, 'approved', { kindId: kind.id })
    await cast.ada.agent.post(`/api/loans/${out.id}/extend`).send({ to: inDays(app, 5) })
    expect((await desk()).approvals).toMatchObject([
      {
        loanId: out.id,
        question: 'extension',
        to: inDays(app, 3),
        extensionTo: inDays(app, 5),
        itemTag: items[0]!.tag,
        freeAfter: 0,
        delays: [{ loanId: next.id, memberName: 'Bo Linden', kindName: kind.name, from: inDays(app, 6) }],
      },
    ])
  })

  it('lists today’s collections, each with an item of its own to take from the shelf', async () => {
    await cast.sam.agent.post(`/api/items/${shelf.items[0]!.id}/hygiene`).send({ state: 'dirty' })
    const first = await loan(cast.ada, 0, 3, 'approved')
    const second = await loan(cast.bo, 0, 2, 'approved')
    const third = await loan(cast.bo, 0, 2, 'approved')
    await loan(cast.bo, 5, 6, 'approved')
    const { collections, washing } = await desk()
    expect(collections.map((row) => [row.loanId, row.suggestedTag])).toEqual([
      [first.id, shelf.items[1]!.tag],
      [second.id, shelf.items[2]!.tag],
      [third.id, null],
    ])
    expect(collections[0]).toMatchObject({ collectBy: inDays(app, 1), suggestedItemId: shelf.items[1]!.id })
    expect(washing).toMatchObject([{ tag: shelf.items[0]!.tag, hygiene: 'dirty', wantedOn: inDays(app, 0) }])
  })

  it('parts what is due today from what is late, and puts the latest first', async () => {
    const [a, b, c] = shelf.items
    await loan(cast.ada, 0, 3, 'out', { itemId: a!.id })
    const late = await loan(cast.bo, 0, 2, 'out', { itemId: b!.id })
    const later = await loan(cast.bo, 0, 1, 'out', { itemId: c!.id })
    pass(3)
    const { returns, overdue } = await desk()
    expect(returns).toMatchObject([{ memberName: 'Ada Marsh', itemTag: a!.tag, daysLate: 0 }])
    expect(overdue).toMatchObject([
      { loanId: later.id, daysLate: 2, itemTag: c!.tag },
      { loanId: late.id, daysLate: 1, itemTag: b!.tag },
    ])
  })

  it('shows what is at risk and why, what is broken, and who waits', async () => {
    const { kind, items } = makeShelf(app, cast.sam, 1)
    const out = await loan(cast.ada, 0, 1, 'out', { kindId: kind.id, itemId: items[0]!.id })
    const next = await loan(cast.bo, 3, 4, 'approved', { kindId: kind.id })
    await cast.ada.agent.post('/api/waiting').send({ ...want(3, 4), kindId: kind.id })
    await cast.sam.agent
      .post(`/api/loans/${out.id}/check-in`)
      .send({ condition: 'damaged', hygiene: 'dirty', note: 'Cracked base' })
    const { atRisk, faults, waiting, washing } = await desk()
    expect(atRisk).toMatchObject([{ loanId: next.id, reason: 'out-of-service', memberName: 'Bo Linden' }])
    expect(faults).toMatchObject([{ tag: items[0]!.tag, summary: 'Cracked base', blocking: true }])
    expect(waiting).toMatchObject([{ memberName: 'Ada Marsh', kindName: kind.name, state: 'waiting' }])
    // What is away to be mended is not washed up first.
    expect(washing).toEqual([])
  })

  it('asks for sanitising what someone comes for by tomorrow', async () => {
    const { kind, items } = makeShelf(app, cast.sam, 1, { needsSanitised: true })
    expect((await desk()).washing).toEqual([])
    await loan(cast.ada, 1, 2, 'approved', { kindId: kind.id })
    pass(1)
    expect((await desk()).washing).toMatchObject([
      { itemId: items[0]!.id, hygiene: 'clean', needsSanitised: true },
    ])
  })

  it('takes the same statements whatever there is to do: six, and six for what the larder wants', async () => {
    app.statements()
    await desk()
    const idle = app.statements().length
    for (let index = 0; index < 12; index += 1) {
      const { kind, items } = makeShelf(app, cast.sam, 2)
      await askFor(cast.bo, want(1, 3, { kindId: kind.id }))
      await cast.ada.agent.post(`/api/items/${items[0]!.id}/faults`).send({ summary: 'Odd', blocking: false })
      await cast.sam.agent.post(`/api/items/${items[1]!.id}/hygiene`).send({ state: 'dirty' })
    }
    app.statements()
    const busy = await desk()
    expect(busy.approvals).toHaveLength(12)
    expect(app.statements()).toHaveLength(idle)
    expect(idle).toBeLessThanOrEqual(12)
  })
})
