import { beforeEach, describe, expect, it } from 'vitest'
import type { Loan } from '#shared/loans/contract'
import { loanEvents, loans, refusals } from '#server/db/schema/loans'
import { runLoanRound } from '#server/services/loans/round'
import { askFor, inDays, makeShelf } from '#tests/support/makers/loans'
import { people, type Person } from '#tests/support/people'
import { testApp, type TestApp } from '#tests/support/test-app'

let app: TestApp
let cast: ReturnType<typeof people>
beforeEach(() => {
  app = testApp()
  cast = people(app)
})

const kindOf = (name: string, items: number, facts: object = {}) =>
  makeShelf(app, cast.sam, items, { name, maxPerMember: 9, ...facts }).kind.id
const line = (kindId: string, from: number, to: number, more: object = {}) => ({
  kindId,
  from: inDays(app, from),
  to: inDays(app, to),
  ...more,
})
const send = (who: Person, lines: object[], more: object = {}) =>
  who.agent.post('/api/baskets').send({ lines, ...more })
const allLoans = () => app.db.select().from(loans).all()

describe('a basket', () => {
  it('books every line, and keeps them together', async () => {
    const demijohn = kindOf('Demijohn', 2)
    const siphon = kindOf('Siphon', 1, { category: 'transfer', selfApproving: true })
    const reply = await send(cast.ada, [
      line(demijohn, 1, 20),
      line(siphon, 10, 10, { stepId: 'rack' }),
      line(demijohn, 10, 20),
    ])
    expect(reply.status).toBe(201)
    const { basketId, loans: booked } = reply.body as { basketId: string; loans: Loan[] }
    expect(booked).toMatchObject([
      { basketId, kindId: demijohn, status: 'requested', stepId: null },
      { basketId, kindId: siphon, status: 'approved', stepId: 'rack' },
      { basketId, kindId: demijohn, status: 'requested', from: inDays(app, 10) },
    ])
    expect(allLoans()).toHaveLength(3)
  })

  it('books nothing when a line is taken, and says of each what would do instead', async () => {
    const demijohn = kindOf('Demijohn', 1)
    const bigger = kindOf('Demijohn 9 L', 1, { capacityLitres: 9 })
    const siphon = kindOf('Siphon', 1, { category: 'transfer' })
    await askFor(cast.bo, line(demijohn, 5, 9))
    await askFor(cast.bo, line(siphon, 7, 7))
    const before = allLoans()
    const events = app.db.select().from(loanEvents).all()
    const reply = await send(cast.ada, [
      line(siphon, 1, 1),
      line(demijohn, 5, 6),
      line(siphon, 7, 7),
      line(demijohn, 20, 21),
    ])
    expect(reply.status).toBe(409)
    expect(reply.body).toMatchObject({
      code: 'not-available',
      lines: [
        {
          index: 1,
          nearest: { from: inDays(app, 2), to: inDays(app, 3) },
          alternatives: [{ kindId: bigger, name: 'Demijohn 9 L' }],
        },
        { index: 2, nearest: { from: inDays(app, 9), to: inDays(app, 9) }, alternatives: [] },
      ],
    })
    expect(allLoans()).toEqual(before)
    expect(app.db.select().from(loanEvents).all()).toEqual(events)
    expect(
      app.db
        .select()
        .from(refusals)
        .all()
        .map(({ kindId }) => kindId),
    ).toEqual([demijohn, siphon])
  })

  it('counts its own lines against each other', async () => {
    const demijohn = kindOf('Demijohn', 1)
    const reply = await send(cast.ada, [line(demijohn, 1, 3), line(demijohn, 4, 6)])
    expect(reply.body).toMatchObject({
      code: 'not-available',
      // The first line and its turnaround take days 1 to 4.
      lines: [{ index: 1, nearest: { from: inDays(app, 5), to: inDays(app, 7) } }],
    })
    const limited = kindOf('Hydrometer', 5, { maxPerMember: 1, category: 'instrument' })
    const over = await send(cast.ada, [line(limited, 1, 1), line(limited, 1, 2), line(limited, 3, 4)])
    expect(over.body).toMatchObject({
      code: 'over-limit',
      lines: [{ index: 1, limits: [{ limit: 'max-per-member', allowed: 1, asked: 2 }] }],
    })
    expect(allLoans()).toEqual([])
  })

  it('says which lines want an induction before anything else', async () => {
    const boiler = kindOf('Boiler', 1, {
      category: 'heating',
      needsInduction: true,
      inductionNote: 'Ask Sam.',
    })
    const none = kindOf('Corker', 0, { category: 'closure' })
    const reply = await send(cast.ada, [line(none, 1, 1), line(boiler, 1, 1)])
    expect(reply.status).toBe(403)
    expect(reply.body).toMatchObject({
      code: 'needs-induction',
      lines: [{ index: 1, kindId: boiler, howTo: 'Ask Sam.' }],
    })
  })

  it('names the line and the field that is wrong', async () => {
    const demijohn = kindOf('Demijohn', 1)
    const paths = async (lines: object[]) => {
      const reply = await send(cast.ada, lines)
      expect(reply.status).toBe(400)
      return (reply.body as { errors: { path: string }[] }).errors.map(({ path }) => path)
    }
    expect(await paths([line(demijohn, 1, 2), line(demijohn, 3, 2)])).toEqual(['lines.1.to'])
    expect(await paths([line(demijohn, 1, 2), line(demijohn, -1, 2)])).toEqual(['lines.1.from'])
    expect(await paths([line(demijohn, 1, 2, { colour: 'blue' })])).toEqual(['lines.0.colour'])
    expect(await paths([])).toEqual(['lines'])
    expect(await paths(Array.from({ length: 31 }, () => line(demijohn, 1, 1)))).toEqual(['lines'])
    expect(allLoans()).toEqual([])
  })

  it('is made once, however often it is sent', async () => {
    const demijohn = kindOf('Demijohn', 2)
    const once = () => send(cast.ada, [line(demijohn, 1, 3)]).set('Idempotency-Key', 'basket-1')
    const first = await once()
    const again = await once()
    expect(again.body).toEqual(first.body)
    expect(allLoans()).toHaveLength(1)
  })

  it('takes as many statements for thirty lines as for two, whether booked or refused', async () => {
    const demijohn = kindOf('Demijohn', 40, { maxPerMember: 50 })
    const siphon = kindOf('Siphon', 1, { category: 'transfer' })
    // The day's first writer brings loans up to today; here that is somebody else.
    runLoanRound(app.deps)
    const count = async (lines: object[], status: number) => {
      app.statements()
      expect((await send(cast.ada, lines)).status).toBe(status)
      return app.statements().filter((sql) => !sql.startsWith('--')).length
    }
    const two = await count([line(demijohn, 1, 3), line(siphon, 1, 1)], 201)
    const thirty = await count(
      [...Array.from({ length: 29 }, () => line(demijohn, 1, 3)), line(siphon, 3, 3)],
      201,
    )
    expect(thirty).toBe(two)
    const oneMiss = await count([line(siphon, 1, 1)], 409)
    const manyMisses = await count(
      [...Array.from({ length: 29 }, () => line(siphon, 1, 1)), line(demijohn, 9, 9)],
      409,
    )
    expect(manyMisses).toBe(oneMiss)
  })

  it('is approved or declined line by line', async () => {
    const demijohn = kindOf('Demijohn', 2)
    const { loans: booked } = (await send(cast.ada, [line(demijohn, 1, 3), line(demijohn, 2, 4)])).body as {
      loans: [Loan, Loan]
    }
    await cast.sam.agent.post(`/api/loans/${booked[0].id}/approve`).send({})
    await cast.sam.agent.post(`/api/loans/${booked[1].id}/decline`).send({ reason: 'One is enough.' })
    expect(allLoans().map(({ status }) => status)).toEqual(['approved', 'declined'])
  })
})
