import { beforeEach, describe, expect, it } from 'vitest'
import type { Loan, LoanDetail } from '#shared/loans/contract'
import { loanTransition } from '#shared/loans/lifecycle'
import { LOAN_STATUSES, type LoanAction, type LoanStatus } from '#shared/loans/vocabulary'
import { letters } from '#server/db/schema/notices'
import { members } from '#server/db/schema/people'
import { loanEvents, loans, refusals } from '#server/db/schema/loans'
import { runLoanRound } from '#server/services/loans/round'
import { addDays, laterDay } from '#shared/time/day'
import { eq } from 'drizzle-orm'
import { askFor, inDays, makeLoan, makeShelf } from '#tests/support/makers/loans'
import { comeBack, people, person, type Person } from '#tests/support/people'
import { testApp, type TestApp } from '#tests/support/test-app'

type Problem = { code: string; detail: string; errors?: { path: string }[] } & Record<string, unknown>
const problem = (reply: { body: unknown }) => reply.body as Problem
const loanOf = (reply: { body: unknown }) => reply.body as Loan

let app: TestApp
let cast: ReturnType<typeof people>
let shelf: ReturnType<typeof makeShelf>
beforeEach(() => {
  app = testApp()
  cast = people(app)
  shelf = makeShelf(app, cast.sam, 2, {
    turnaroundDays: 1,
    maxLoanDays: 14,
    maxAheadDays: 60,
    maxPerMember: 2,
  })
})

const want = (from: number, to: number, more: object = {}) => ({
  kindId: shelf.kind.id,
  from: inDays(app, from),
  to: inDays(app, to),
  ...more,
})
const ask = (who: Person, from: number, to: number, more: object = {}) =>
  who.agent.post('/api/loans').send(want(from, to, more))
const act = (who: Person, id: string, action: string, body: object = {}) =>
  who.agent.post(`/api/loans/${id}/${action}`).send(body)
const lettersTo = (who: Person) =>
  app.db
    .select({ kind: letters.kind })
    .from(letters)
    .where(eq(letters.memberId, who.id))
    .all()
    .map(({ kind }) => kind)
const pass = (days: number) => {
  app.clock.advance({ days })
  for (const who of [cast.ada, cast.bo]) comeBack(app, who)
  comeBack(app, cast.sam, 'steward')
}

describe('asking for kit', () => {
  it('makes a request that holds its days', async () => {
    const reply = await ask(cast.ada, 1, 3, { note: '  For the plum wine  ' })
    expect(reply.status).toBe(201)
    expect(reply.get('etag')).toBe('"1"')
    expect(loanOf(reply)).toMatchObject({
      kindId: shelf.kind.id,
      kindName: shelf.kind.name,
      memberId: cast.ada.id,
      memberName: 'Ada Marsh',
      itemId: null,
      from: inDays(app, 1),
      to: inDays(app, 3),
      status: 'requested',
      overdue: false,
      atRisk: false,
      note: 'For the plum wine',
      version: 1,
    })
  })

  it('is approved by itself where the kind says so', async () => {
    const { kind } = makeShelf(app, cast.sam, 1, { selfApproving: true })
    const reply = await cast.ada.agent.post('/api/loans').send(want(1, 3, { kindId: kind.id }))
    expect(loanOf(reply)).toMatchObject({ status: 'approved', collectBy: inDays(app, 2) })
  })

  it('refuses what is taken, with the nearest free days and what would do instead', async () => {
    const bigger = makeShelf(app, cast.sam, 1, { name: 'Demijohn 9 L', capacityLitres: 9 }).kind
    const busy = makeShelf(app, cast.sam, 1, { name: 'Demijohn 10 L', capacityLitres: 10 }).kind
    makeShelf(app, cast.sam, 1, { name: 'Jug', capacityLitres: 2 })
    makeShelf(app, cast.sam, 1, { name: 'Siphon', category: 'transfer' })
    makeShelf(app, cast.sam, 1, { name: 'Boiler', capacityLitres: 20, needsInduction: true })
    await cast.bo.agent.post('/api/loans').send(want(5, 5, { kindId: busy.id }))
    await ask(cast.bo, 4, 6)
    await ask(cast.bo, 4, 6)
    const reply = await ask(cast.ada, 4, 5)
    expect(reply.status).toBe(409)
    expect(reply.type).toBe('application/problem+json')
    expect(problem(reply)).toMatchObject({
      code: 'not-available',
      // Back: days 2 and 3 would need their turnaround on day 4. Days 1 and 2 are three days away, 8 and 9 four.
      nearest: { from: inDays(app, 1), to: inDays(app, 2) },
      alternatives: [{ kindId: bigger.id, name: 'Demijohn 9 L' }],
    })
    expect(app.db.select().from(refusals).all()).toMatchObject([
      { kindId: shelf.kind.id, memberId: cast.ada.id, reason: 'not-available', refusedOn: inDays(app, 0) },
    ])
  })

  it('offers no days when none are free as far ahead as one may book', async () => {
    const { kind } = makeShelf(app, cast.sam, 0)
    const reply = await cast.ada.agent.post('/api/loans').send(want(1, 3, { kindId: kind.id }))
    expect(problem(reply)).toMatchObject({ code: 'not-available', nearest: null })
  })

  it.each([
    ['longest loan', [1, 15], 'max-loan-days'],
    ['how far ahead', [61, 62], 'max-ahead-days'],
  ] as const)('keeps to the limits: %s', async (_, [from, to], limit) => {
    const reply = await ask(cast.ada, from, to)
    expect(reply.status).toBe(409)
    expect(problem(reply)).toMatchObject({ code: 'over-limit', limits: [{ limit }] })
    expect((await ask(cast.sam, from, to)).status).toBe(409)
    const refused = await ask(cast.ada, from, to, { overrideReason: 'A slow ferment' })
    expect(problem(refused).code).toBe('forbidden')
    const excepted = await ask(cast.sam, from, to, {
      overrideReason: 'A slow ferment',
      memberId: cast.ada.id,
    })
    expect(loanOf(excepted)).toMatchObject({
      status: 'approved',
      memberId: cast.ada.id,
      overrideReason: 'A slow ferment',
    })
    expect(lettersTo(cast.ada)).toEqual(['loan-approved'])
  })

  it('lends so many at once to one member, not so many a year', async () => {
    const { kind } = makeShelf(app, cast.sam, 5, { maxPerMember: 1 })
    const mine = (from: number, to: number) =>
      cast.ada.agent.post('/api/loans').send(want(from, to, { kindId: kind.id }))
    expect((await mine(1, 3)).status).toBe(201)
    expect(problem(await mine(3, 5))).toMatchObject({
      code: 'over-limit',
      limits: [{ limit: 'max-per-member' }],
    })
    expect((await mine(4, 5)).status).toBe(201)
  })

  it('wants an induction where the kind does, and says how to get it', async () => {
    const { kind } = makeShelf(app, cast.sam, 1, {
      needsInduction: true,
      inductionNote: 'Tuesdays at seven.',
    })
    const reply = await cast.ada.agent.post('/api/loans').send(want(1, 3, { kindId: kind.id }))
    expect(reply.status).toBe(403)
    expect(problem(reply).code).toBe('needs-induction')
    expect(problem(reply).detail).toContain('Tuesdays at seven.')
    await cast.sam.agent.put(`/api/members/${cast.ada.id}/inductions/${kind.id}`).send({})
    expect((await cast.ada.agent.post('/api/loans').send(want(1, 3, { kindId: kind.id }))).status).toBe(201)
  })

  it('refuses suspended members, and nothing more', async () => {
    const paused = person(app, 'Pat Idle')
    const loan = await askFor(paused, want(1, 3))
    app.db.update(members).set({ status: 'suspended' }).where(eq(members.id, paused.id)).run()
    expect(problem(await ask(paused, 5, 6)).code).toBe('suspended')
    expect((await paused.agent.get('/api/loans')).body).toMatchObject({ items: [{ id: loan.id }] })
    expect(problem(await act(paused, loan.id, 'extend', { to: inDays(app, 4) })).code).toBe('suspended')
    expect((await act(paused, loan.id, 'cancel')).status).toBe(200)
    expect(problem(await ask(cast.sam, 5, 6, { memberId: paused.id })).code).toBe('suspended')
  })

  it.each([
    ['a day that has passed', -1, 2, {}, 'from'],
    ['days that run backwards', 3, 2, {}, 'to'],
    ['an unknown field', 1, 2, { colour: 'blue' }, 'colour'],
    ['another person’s batch', 1, 2, { batchId: 'nobodys' }, 'batchId'],
    ['a note that is too long', 1, 2, { note: 'x'.repeat(1001) }, 'note'],
    ['a status of one’s own choosing', 1, 2, { status: 'approved' }, 'status'],
  ])('refuses %s', async (_, from, to, more, path) => {
    const reply = await ask(cast.ada, from, to, more)
    expect(reply.status).toBe(400)
    expect(problem(reply).errors?.map((error) => error.path)).toContain(path)
    expect(app.db.select().from(loans).all()).toEqual([])
  })

  it('knows no kind that is not there, and books for nobody else', async () => {
    expect((await ask(cast.ada, 1, 2, { kindId: 'nothing' })).status).toBe(404)
    expect(problem(await ask(cast.ada, 1, 2, { memberId: cast.bo.id })).code).toBe('forbidden')
    expect(problem(await ask(cast.sam, 1, 2, { memberId: 'nobody' })).errors?.[0]?.path).toBe('memberId')
  })

  it('is made once, however often it is sent', async () => {
    const send = () => ask(cast.ada, 1, 3).set('Idempotency-Key', 'k-1')
    const first = await send()
    const again = await send()
    expect(again.status).toBe(201)
    expect(again.get('idempotency-replayed')).toBe('true')
    expect(again.body).toEqual(first.body)
    expect(app.db.select().from(loans).all()).toHaveLength(1)
    const other = await ask(cast.ada, 1, 4).set('Idempotency-Key', 'k-1')
    expect(other.status).toBe(422)
  })
})

describe('every act on every state by everyone', () => {
  const ACTIONS = ['approve', 'decline', 'cancel', 'check-out', 'check-in', 'extend'] as const
  const cells = LOAN_STATUSES.flatMap((status) => ACTIONS.map((action) => ({ status, action })))

  const bodyOf = (action: LoanAction, loan: Loan): object => {
    switch (action) {
      case 'decline':
        return { reason: 'Not this week.' }
      case 'check-out':
        return { itemId: shelf.items[1]!.id }
      case 'check-in':
        return { condition: 'ok', hygiene: 'clean' }
      case 'extend':
        return {
          to: addDays(laterDay(loan.to, inDays(app, 0)), 1),
        }
      case 'approve':
      case 'cancel':
      case 'lapse':
        return {}
    }
  }

  it.each(cells)('$action when $status', async ({ status, action }) => {
    const { ada, bo, sam, kit } = cast
    const itemId = shelf.items[0]!.id
    const loan = await makeLoan(app, { member: ada, steward: sam }, want(0, 2, { itemId }), status)
    for (const who of [ada, bo]) comeBack(app, who)
    comeBack(app, sam, 'steward')
    comeBack(app, kit, 'admin')
    expect(loan.status).toBe(status)
    const paused = person(app, 'Pat Idle', 'member', 'suspended')
    const stewardsOnly = ['approve', 'decline', 'check-out', 'check-in'].includes(action)
    // Whoever may not goes first, so that the state is still as it was for who may.
    const stranger = await act(bo, loan.id, action, bodyOf(action, loan))
    expect(problem(stranger).code).toBe(stewardsOnly ? 'forbidden' : 'not-found')
    const pausedStranger = await act(paused, loan.id, action, bodyOf(action, loan))
    expect(problem(pausedStranger).code).toBe(action === 'cancel' ? 'not-found' : 'suspended')
    const version = () =>
      app.db.select({ version: loans.version }).from(loans).where(eq(loans.id, loan.id)).get()
    expect(version()).toEqual({ version: loan.version })

    const byBorrower = loanTransition({ status, extensionPending: false }, action, 'borrower')
    const own = await act(ada, loan.id, action, bodyOf(action, loan))
    let now: LoanStatus = status
    if (byBorrower.ok) {
      expect(own.status, own.text).toBe(200)
      expect(loanOf(own).status).toBe(byBorrower.to)
      now = byBorrower.to
    } else expect(problem(own).code).toBe(byBorrower.reason)

    const later = { ...loan, to: loanOf(await sam.agent.get(`/api/loans/${loan.id}`)).to }
    const bySteward = loanTransition({ status: now, extensionPending: false }, action, 'steward')
    const stewards = await act(sam, loan.id, action, bodyOf(action, later))
    if (bySteward.ok) {
      expect(stewards.status, stewards.text).toBe(200)
      expect(loanOf(stewards).status).toBe(bySteward.to)
    } else {
      expect(stewards.status).toBe(409)
      expect(problem(stewards).code).toBe('wrong-state')
    }
    if (!byBorrower.ok && !bySteward.ok) expect(version()).toEqual({ version: loan.version })
    const admins = await act(kit, 'nothing-has-this-id', action, bodyOf(action, loan))
    expect(admins.status).toBe(404)
  })
})

describe('a decision', () => {
  it('is written to the member, with the reason', async () => {
    const yes = await askFor(cast.ada, want(1, 3))
    expect(loanOf(await act(cast.sam, yes.id, 'approve'))).toMatchObject({
      status: 'approved',
      collectBy: inDays(app, 2),
    })
    const no = await askFor(cast.ada, want(5, 6))
    const declined = await act(cast.sam, no.id, 'decline', { reason: 'Stocktake that week.' })
    expect(loanOf(declined)).toMatchObject({ status: 'declined', declineReason: 'Stocktake that week.' })
    expect(lettersTo(cast.ada)).toEqual(['loan-approved', 'loan-declined'])
    expect((await act(cast.sam, no.id, 'decline', {})).status).toBe(400)
  })

  it('frees the days it refuses', async () => {
    const { kind } = makeShelf(app, cast.sam, 1)
    const first = await askFor(cast.bo, want(1, 3, { kindId: kind.id }))
    expect((await ask(cast.ada, 1, 3, { kindId: kind.id })).status).toBe(409)
    await act(cast.sam, first.id, 'decline', { reason: 'No.' })
    expect((await ask(cast.ada, 1, 3, { kindId: kind.id })).status).toBe(201)
  })
})

describe('handing out', () => {
  const approved = async (from = 0, to = 3, more: object = {}) =>
    makeLoan(app, { member: cast.ada, steward: cast.sam }, want(from, to, more), 'approved')

  it('suggests an item, and takes the one that is scanned', async () => {
    const loan = await approved()
    const detail = (await cast.ada.agent.get(`/api/loans/${loan.id}`)).body as LoanDetail
    expect(detail).toMatchObject({ suggestedItemId: shelf.items[0]!.id, suggestedTag: shelf.items[0]!.tag })
    const out = await act(cast.sam, loan.id, 'check-out', { itemId: shelf.items[1]!.id })
    expect(loanOf(out)).toMatchObject({
      status: 'out',
      itemId: shelf.items[1]!.id,
      itemTag: shelf.items[1]!.tag,
    })
    const history = (await cast.sam.agent.get(`/api/items/${shelf.items[1]!.id}/history`)).body as {
      items: { event: string; borrowerName: string }[]
    }
    expect(history.items[0]).toMatchObject({ event: 'checked-out', borrowerName: 'Ada Marsh' })
  })

  it('suggests to each the item that is left when those before have theirs', async () => {
    const first = await makeLoan(app, { member: cast.bo, steward: cast.sam }, want(0, 3), 'approved')
    const second = await approved()
    const tag = async (id: string) =>
      ((await cast.sam.agent.get(`/api/loans/${id}`)).body as LoanDetail).suggestedTag
    expect([await tag(first.id), await tag(second.id)]).toEqual(shelf.items.map((item) => item.tag))
  })

  it.each([
    ['dirty', 'not-clean'],
    ['faulty', 'blocked-by-fault'],
  ])('refuses what is %s, unless a steward gives a reason, which is kept', async (what, code) => {
    const loan = await approved()
    const item = shelf.items[0]!
    if (what === 'dirty') await cast.sam.agent.post(`/api/items/${item.id}/hygiene`).send({ state: 'dirty' })
    else
      await cast.ada.agent.post(`/api/items/${item.id}/faults`).send({ summary: 'Cracked', blocking: true })
    const refused = await act(cast.sam, loan.id, 'check-out', { itemId: item.id })
    expect(refused.status).toBe(409)
    expect(problem(refused).code).toBe(code)
    const forced = await act(cast.sam, loan.id, 'check-out', {
      itemId: item.id,
      overrideReason: 'For display only',
    })
    expect(loanOf(forced)).toMatchObject({ status: 'out', overrideReason: 'For display only' })
    const detail = (await cast.sam.agent.get(`/api/loans/${loan.id}`)).body as LoanDetail
    expect(detail.history.at(-1)).toMatchObject({
      event: 'checked-out',
      byName: 'Sam Tolliver',
      detail: expect.stringContaining('For display only') as string,
    })
  })

  it('keeps no reason where nothing was overridden', async () => {
    const loan = await approved()
    const out = await act(cast.sam, loan.id, 'check-out', {
      itemId: shelf.items[0]!.id,
      overrideReason: 'Just in case',
    })
    expect(loanOf(out).overrideReason).toBeNull()
  })

  it('wants what the kind says must be sanitised to be so, and still so', async () => {
    const { kind, items } = makeShelf(app, cast.sam, 1, { needsSanitised: true, sanitisedHours: 24 })
    const item = items[0]!
    const loan = await approved(0, 3, { kindId: kind.id })
    const hand = () => act(cast.sam, loan.id, 'check-out', { itemId: item.id })
    expect(problem(await hand()).code).toBe('not-clean')
    await cast.sam.agent
      .post(`/api/items/${item.id}/hygiene`)
      .send({ state: 'sanitised', agent: 'iodophor', concentration: '25 mg/L', contactMinutes: 2 })
    pass(1)
    app.clock.advance({ minutes: 1 })
    expect(problem(await hand()).code).toBe('not-clean')
    await cast.sam.agent
      .post(`/api/items/${item.id}/hygiene`)
      .send({ state: 'sanitised', agent: 'iodophor', concentration: '25 mg/L', contactMinutes: 2 })
    expect((await hand()).status).toBe(200)
  })

  it('gives one item to one person, of the right kind and pool', async () => {
    const other = makeShelf(app, cast.sam, 1).items[0]!
    const [a, b] = shelf.items
    const first = await approved()
    await act(cast.sam, first.id, 'check-out', { itemId: a!.id })
    const second = await makeLoan(app, { member: cast.bo, steward: cast.sam }, want(0, 3), 'approved')
    expect(
      problem(await act(cast.sam, second.id, 'check-out', { itemId: a!.id, overrideReason: 'Both' })).code,
    ).toBe('not-available')
    const errors = async (itemId: string) => {
      const reply = await act(cast.sam, second.id, 'check-out', { itemId })
      return [reply.status, problem(reply).errors?.[0]?.path]
    }
    expect(await errors(other.id)).toEqual([400, 'itemId'])
    expect(await errors('nothing')).toEqual([400, 'itemId'])
    await cast.sam.agent.patch(`/api/items/${b!.id}`).set('If-Match', '"1"').send({ wild: true })
    expect(await errors(b!.id)).toEqual([400, 'itemId'])
  })

  it('starts the loan today when it is collected early, if nobody is in the way', async () => {
    const { kind, items } = makeShelf(app, cast.sam, 1)
    const booked = (from: number, to: number, who = cast.ada) =>
      makeLoan(app, { member: who, steward: cast.sam }, want(from, to, { kindId: kind.id }), 'approved')
    const mine = await booked(4, 6)
    const between = await booked(1, 1, cast.bo)
    const refused = await act(cast.sam, mine.id, 'check-out', { itemId: items[0]!.id })
    expect(problem(refused).code).toBe('not-available')
    await act(cast.bo, between.id, 'cancel')
    const out = await act(cast.sam, mine.id, 'check-out', { itemId: items[0]!.id })
    expect(loanOf(out)).toMatchObject({ status: 'out', from: inDays(app, 0), to: inDays(app, 6) })
  })
})

describe('taking back', () => {
  const out = (to = 5) =>
    makeLoan(app, { member: cast.ada, steward: cast.sam }, want(0, to, { itemId: shelf.items[0]!.id }), 'out')
  const itemNow = async () =>
    (await cast.sam.agent.get(`/api/items/${shelf.items[0]!.id}`)).body as {
      status: string
      hygiene: string
      wild: boolean
      faults: { summary: string; blocking: boolean }[]
    }

  it.each([
    [
      { condition: 'ok', hygiene: 'clean' },
      { status: 'in-service', hygiene: 'clean', faults: [] },
    ],
    [
      { condition: 'ok', hygiene: 'dirty' },
      { status: 'in-service', hygiene: 'dirty', faults: [] },
    ],
    [
      { condition: 'damaged', hygiene: 'dirty', note: 'Chip in the rim' },
      { status: 'repair', hygiene: 'dirty', faults: [{ summary: 'Chip in the rim', blocking: true }] },
    ],
    [
      { condition: 'lost', hygiene: 'dirty' },
      { status: 'lost', faults: [] },
    ],
    [
      { condition: 'ok', hygiene: 'clean', wild: true },
      { status: 'in-service', wild: true },
    ],
  ])('%j', async (handed, item) => {
    const loan = await out()
    const reply = await act(cast.sam, loan.id, 'check-in', handed)
    expect(reply.status, reply.text).toBe(200)
    expect(loanOf(reply)).toMatchObject({ status: 'returned', returnCondition: handed.condition })
    expect(await itemNow()).toMatchObject(item)
    const detail = (await cast.ada.agent.get(`/api/loans/${loan.id}`)).body as LoanDetail
    expect(detail.history.map(({ event }) => event)).toEqual([
      'requested',
      'approved',
      'checked-out',
      'checked-in',
    ])
  })

  it('undoes everything when one part of it fails', async () => {
    const loan = await out()
    app.db.$client.exec(
      "CREATE TRIGGER fails BEFORE UPDATE OF status ON items BEGIN SELECT RAISE(ABORT, 'no space'); END",
    )
    const before = app.db.select().from(loans).all()
    const events = app.db.select().from(loanEvents).all()
    const reply = await act(cast.sam, loan.id, 'check-in', { condition: 'damaged', hygiene: 'dirty' })
    expect(reply.status).toBe(500)
    expect(app.db.select().from(loans).all()).toEqual(before)
    expect(app.db.select().from(loanEvents).all()).toEqual(events)
    expect(await itemNow()).toMatchObject({ status: 'in-service', hygiene: 'clean', faults: [] })
  })
})

describe('keeping it longer', () => {
  const out = () => makeLoan(app, { member: cast.ada, steward: cast.sam }, want(0, 4), 'out')

  it('is granted at once when nobody is delayed', async () => {
    const loan = await out()
    const reply = await act(cast.ada, loan.id, 'extend', { to: inDays(app, 9) })
    expect(loanOf(reply)).toMatchObject({ to: inDays(app, 9), extensionTo: null, status: 'out' })
    expect((await act(cast.ada, loan.id, 'extend', { to: inDays(app, 9) })).status).toBe(400)
  })

  it('goes to the desk when it passes the longest loan; a steward may grant it', async () => {
    const loan = await out()
    const asked = await act(cast.ada, loan.id, 'extend', { to: inDays(app, 20) })
    expect(loanOf(asked)).toMatchObject({ to: inDays(app, 4), extensionTo: inDays(app, 20), status: 'out' })
    const granted = await act(cast.sam, loan.id, 'approve')
    expect(loanOf(granted)).toMatchObject({ to: inDays(app, 20), extensionTo: null, status: 'out' })
    expect(lettersTo(cast.ada)).toEqual(['loan-approved', 'loan-extended'])
    expect(problem(await act(cast.sam, loan.id, 'approve')).code).toBe('wrong-state')
  })

  it('leaves the loan as it was when the desk says no', async () => {
    const loan = await out()
    await act(cast.ada, loan.id, 'extend', { to: inDays(app, 20) })
    const declined = await act(cast.sam, loan.id, 'decline', { reason: 'Too long.' })
    expect(loanOf(declined)).toMatchObject({ to: inDays(app, 4), extensionTo: null, status: 'out' })
    expect(lettersTo(cast.ada)).toEqual(['loan-approved', 'loan-extension-declined'])
  })

  it('never takes what others were promised, and names them to the steward', async () => {
    const loan = await out()
    await makeLoan(app, { member: cast.bo, steward: cast.sam }, want(6, 8), 'approved')
    const theirs = await askFor(cast.bo, want(6, 8))
    const asked = await act(cast.ada, loan.id, 'extend', { to: inDays(app, 7) })
    expect(loanOf(asked)).toMatchObject({ to: inDays(app, 4), extensionTo: inDays(app, 7) })
    const refused = await act(cast.sam, loan.id, 'approve')
    expect(refused.status).toBe(409)
    expect(problem(refused)).toMatchObject({
      code: 'not-available',
      delays: [{ loanId: theirs.id, memberName: 'Bo Linden', from: inDays(app, 6) }],
    })
    await act(cast.sam, theirs.id, 'decline', { reason: 'A slow mead needs it.' })
    expect(loanOf(await act(cast.sam, loan.id, 'approve'))).toMatchObject({ to: inDays(app, 7) })
  })

  it('lets a steward pass the longest loan with a reason, and not without', async () => {
    const loan = await out()
    const to = inDays(app, 20)
    expect(problem(await act(cast.sam, loan.id, 'extend', { to })).code).toBe('over-limit')
    expect(problem(await act(cast.ada, loan.id, 'extend', { to, overrideReason: 'Please' })).code).toBe(
      'forbidden',
    )
    const excepted = await act(cast.sam, loan.id, 'extend', { to, overrideReason: 'Stuck ferment' })
    expect(loanOf(excepted)).toMatchObject({ to, overrideReason: 'Stuck ferment' })
  })
})

describe('the days that pass', () => {
  it('let a loan lapse after its grace day, and free its days', async () => {
    const loan = await makeLoan(app, { member: cast.ada, steward: cast.sam }, want(1, 5), 'approved')
    pass(2)
    runLoanRound(app.deps)
    expect((await cast.ada.agent.get(`/api/loans/${loan.id}`)).body).toMatchObject({ status: 'approved' })
    pass(1)
    runLoanRound(app.deps)
    runLoanRound(app.deps)
    const detail = (await cast.ada.agent.get(`/api/loans/${loan.id}`)).body as LoanDetail
    expect(detail.status).toBe('lapsed')
    expect(detail.history.map(({ event }) => event)).toEqual(['requested', 'approved', 'lapsed'])
    expect(lettersTo(cast.ada)).toEqual(['loan-approved', 'loan-lapsed'])
    expect((await ask(cast.bo, 0, 2)).status).toBe(201)
  })

  it('make a loan overdue the day after its return-by day', async () => {
    const loan = await makeLoan(app, { member: cast.ada, steward: cast.sam }, want(0, 2), 'out')
    const now = async () => loanOf(await cast.ada.agent.get(`/api/loans/${loan.id}`))
    pass(2)
    expect(await now()).toMatchObject({ overdue: false, daysLate: 0 })
    pass(1)
    expect(await now()).toMatchObject({ overdue: true, daysLate: 1 })
  })

  it('endanger who comes next when a loan is late, and tell them once; the return makes it good', async () => {
    const { kind, items } = makeShelf(app, cast.sam, 1, { turnaroundDays: 1 })
    const late = await makeLoan(
      app,
      { member: cast.ada, steward: cast.sam },
      { ...want(0, 2), kindId: kind.id, itemId: items[0]!.id },
      'out',
    )
    const next = await makeLoan(
      app,
      { member: cast.bo, steward: cast.sam },
      { ...want(4, 6), kindId: kind.id },
      'approved',
    )
    pass(3)
    runLoanRound(app.deps)
    runLoanRound(app.deps)
    const now = async () => loanOf(await cast.bo.agent.get(`/api/loans/${next.id}`))
    expect(await now()).toMatchObject({ atRisk: true, atRiskReason: 'overdue' })
    expect(lettersTo(cast.bo)).toEqual(['loan-approved', 'loan-at-risk'])
    pass(1)
    runLoanRound(app.deps)
    expect(lettersTo(cast.bo)).toHaveLength(2)
    await act(cast.sam, late.id, 'check-in', { condition: 'ok', hygiene: 'clean' })
    expect(await now()).toMatchObject({ atRisk: false, atRiskReason: null })
    expect(lettersTo(cast.bo)).toEqual(['loan-approved', 'loan-at-risk', 'loan-safe-again'])
  })

  it('endanger who comes next when what comes back is broken', async () => {
    const { kind, items } = makeShelf(app, cast.sam, 1)
    const first = await makeLoan(
      app,
      { member: cast.ada, steward: cast.sam },
      { ...want(0, 2), kindId: kind.id, itemId: items[0]!.id },
      'out',
    )
    const next = await makeLoan(
      app,
      { member: cast.bo, steward: cast.sam },
      { ...want(4, 6), kindId: kind.id },
      'approved',
    )
    await act(cast.sam, first.id, 'check-in', { condition: 'damaged', hygiene: 'dirty' })
    expect((await cast.bo.agent.get(`/api/loans/${next.id}`)).body).toMatchObject({
      atRisk: true,
      atRiskReason: 'out-of-service',
    })
  })
})

describe('items that come and go', () => {
  it('endanger the bookings they leave without, tell their members once, and make it good', async () => {
    const { kind, items } = makeShelf(app, cast.sam, 1)
    const item = items[0]!
    const next = await makeLoan(
      app,
      { member: cast.bo, steward: cast.sam },
      { ...want(4, 6), kindId: kind.id },
      'approved',
    )
    const atRisk = async () => {
      app.clock.advance({ minutes: 1 })
      return loanOf(await cast.bo.agent.get(`/api/loans/${next.id}`)).atRisk
    }
    const patch = (version: number, change: object) =>
      cast.sam.agent.patch(`/api/items/${item.id}`).set('If-Match', `"${version}"`).send(change)
    expect((await patch(1, { status: 'repair' })).status).toBe(200)
    expect(await atRisk()).toBe(true)
    expect((await patch(2, { status: 'in-service' })).status).toBe(200)
    expect(await atRisk()).toBe(false)
    const report = { summary: 'Stopper stuck fast', blocking: true }
    const fault = (await cast.ada.agent.post(`/api/items/${item.id}/faults`).send(report)).body as {
      id: string
    }
    expect(await atRisk()).toBe(true)
    await cast.sam.agent.post(`/api/faults/${fault.id}/resolve`).send({})
    expect(await atRisk()).toBe(false)
    expect((await patch(3, { wild: true })).status).toBe(200)
    expect(await atRisk()).toBe(true)
    await cast.sam.agent.post('/api/items').send({ tag: 'SPARE-1', kindId: kind.id, hygiene: 'clean' })
    expect(await atRisk()).toBe(false)
    const told = lettersTo(cast.bo).filter((letter) => letter !== 'loan-approved')
    expect(told).toEqual(Array.from({ length: 3 }, () => ['loan-at-risk', 'loan-safe-again']).flat())
  })

  it('stay as they are while somebody has them', async () => {
    await makeLoan(
      app,
      { member: cast.ada, steward: cast.sam },
      { ...want(0, 2), itemId: shelf.items[0]!.id },
      'out',
    )
    for (const change of [{ status: 'lost' }, { wild: true }]) {
      const reply = await cast.sam.agent
        .patch(`/api/items/${shelf.items[0]!.id}`)
        .set('If-Match', '"1"')
        .send(change)
      expect(problem(reply).code).toBe('wrong-state')
    }
  })
})

describe('looking at loans', () => {
  it('shows members their own, and none of others', async () => {
    const mine = await askFor(cast.ada, want(1, 3))
    const theirs = await askFor(cast.bo, want(1, 3))
    const ids = async (who: Person, query = '') =>
      ((await who.agent.get(`/api/loans${query}`)).body as { items: Loan[] }).items.map(({ id }) => id)
    expect(await ids(cast.ada)).toEqual([mine.id])
    expect(await ids(cast.ada, '?member=me')).toEqual([mine.id])
    expect(await ids(cast.sam, '?member=me')).toEqual([])
    expect((await ids(cast.sam)).sort()).toEqual([mine.id, theirs.id].sort())
    expect(await ids(cast.sam, `?member=${cast.bo.id}`)).toEqual([theirs.id])
    expect(problem(await cast.ada.agent.get(`/api/loans?member=${cast.bo.id}`)).code).toBe('forbidden')
    const [theirsForAda, nothing] = [
      await cast.ada.agent.get(`/api/loans/${theirs.id}`),
      await cast.ada.agent.get('/api/loans/nothing-has-this-id'),
    ]
    expect(theirsForAda.status).toBe(404)
    expect({ ...problem(theirsForAda), instance: '' }).toEqual({ ...problem(nothing), instance: '' })
    expect(JSON.stringify((await cast.ada.agent.get('/api/loans')).body)).not.toContain('@barmhouse.example')
  })

  it('filters by state, kind and days', async () => {
    const early = await askFor(cast.ada, want(1, 3))
    const late = await makeLoan(app, { member: cast.ada, steward: cast.sam }, want(10, 12), 'approved')
    const other = makeShelf(app, cast.sam, 1).kind
    const else_ = await askFor(cast.ada, want(5, 6, { kindId: other.id }))
    const ids = async (query: string) =>
      ((await cast.ada.agent.get(`/api/loans?${query}`)).body as { items: Loan[] }).items.map(({ id }) => id)
    expect(await ids('status=approved')).toEqual([late.id])
    expect(await ids('status=approved,requested')).toEqual([late.id, else_.id, early.id])
    expect(await ids(`kindId=${other.id}`)).toEqual([else_.id])
    expect(await ids(`from=${inDays(app, 3)}&to=${inDays(app, 5)}`)).toEqual([else_.id, early.id])
    expect(await ids(`from=${inDays(app, 4)}&to=${inDays(app, 4)}`)).toEqual([])
    for (const query of ['status=lost', 'status=', 'from=yesterday', 'limit=0', 'limit=201', 'cursor=AAAA'])
      expect((await cast.ada.agent.get(`/api/loans?${query}`)).status, query).toBe(400)
  })

  it('pages without losing or repeating any, in a constant number of statements', async () => {
    const { kind } = makeShelf(app, cast.sam, 40, { maxPerMember: 50 })
    for (let index = 0; index < 25; index += 1)
      await askFor(cast.ada, want(index % 4, 5, { kindId: kind.id }))
    const seen: string[] = []
    let cursor = ''
    do {
      const page = (await cast.ada.agent.get(`/api/loans?limit=7${cursor}`)).body as {
        items: Loan[]
        nextCursor: string | null
      }
      seen.push(...page.items.map(({ id }) => id))
      cursor = page.nextCursor === null ? '' : `&cursor=${page.nextCursor}`
    } while (cursor)
    expect(seen).toHaveLength(25)
    expect(new Set(seen).size).toBe(25)
    app.statements()
    await cast.ada.agent.get('/api/loans?limit=1')
    const one = app.statements().length
    await cast.ada.agent.get('/api/loans?limit=200')
    expect(app.statements()).toHaveLength(one)
    expect(one).toBeLessThanOrEqual(6)
    await cast.ada.agent.get(`/api/loans/${seen[0]}`)
    expect(app.statements().length).toBeLessThanOrEqual(6)
  })

  it('changes a note for the version that was seen, and for no other', async () => {
    const loan = await askFor(cast.ada, want(1, 3))
    const patch = (version: string | undefined, who = cast.ada) => {
      const request = who.agent.patch(`/api/loans/${loan.id}`)
      if (version) void request.set('If-Match', version)
      return request.send({ note: 'With an airlock' })
    }
    expect((await patch(undefined)).status).toBe(428)
    expect((await patch('"7"')).status).toBe(412)
    expect((await patch('"1"', cast.bo)).status).toBe(404)
    const changed = await patch('"1"')
    expect(loanOf(changed)).toMatchObject({ note: 'With an airlock', version: 2 })
    expect(changed.get('etag')).toBe('"2"')
    expect((await patch('"1"')).status).toBe(412)
  })

  it('shows the month: own loans to members, everyone’s to stewards', async () => {
    await askFor(cast.ada, want(1, 3))
    await askFor(cast.bo, want(2, 4))
    const gone = await askFor(cast.ada, want(8, 9))
    await act(cast.ada, gone.id, 'cancel')
    const late = await makeLoan(
      app,
      { member: cast.bo, steward: cast.sam },
      want(0, 0, { kindId: makeShelf(app, cast.sam, 1).kind.id }),
      'out',
    )
    pass(3)
    const month = async (who: Person, query = '') =>
      (
        (await who.agent.get(`/api/calendar?from=${inDays(app, -1)}&to=${inDays(app, 20)}${query}`)).body as {
          loans: { loanId: string; memberName: string; until: string; mine: boolean; overdue: boolean }[]
        }
      ).loans
    expect(await month(cast.ada)).toMatchObject([{ memberName: 'Ada Marsh', mine: true }])
    expect(await month(cast.sam)).toEqual([])
    const all = await month(cast.sam, '&scope=all')
    expect(all.map(({ memberName }) => memberName).sort()).toEqual(['Ada Marsh', 'Bo Linden', 'Bo Linden'])
    expect(all.find(({ loanId }) => loanId === late.id)).toMatchObject({
      overdue: true,
      until: inDays(app, 0),
    })
    expect(await month(cast.sam, `&memberId=${cast.ada.id}`)).toHaveLength(1)
    expect(await month(cast.sam, `&scope=all&kindId=${shelf.kind.id}`)).toHaveLength(2)
    const refused = await cast.ada.agent.get(
      `/api/calendar?from=${inDays(app, 0)}&to=${inDays(app, 20)}&scope=all`,
    )
    expect(problem(refused).code).toBe('forbidden')
    expect(
      (await cast.ada.agent.get(`/api/calendar?from=${inDays(app, 0)}&to=${inDays(app, 200)}`)).status,
    ).toBe(400)
  })
})
