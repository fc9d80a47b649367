import { describe, expect, it } from 'vitest'
import { answerExtension } from '#shared/loans/extension'
import { collectBy, daysLate, hasLapsed, isOverdue } from '#shared/loans/lateness'
import { breachSentence, limitBreaches } from '#shared/loans/limits'
import { type LiveLoan, bookingsAtRisk } from '#shared/loans/risk'
import { LOAN_LIMITS, LOAN_STATUSES } from '#shared/loans/vocabulary'
import { nth } from './support.ts'

const range = (from: number, to: number) => ({ from: nth(from), to: nth(to) })
const loan = (
  id: string,
  status: LiveLoan['status'],
  from: number,
  to: number,
  turnaroundDays = 1,
): LiveLoan => ({
  id,
  status,
  ...range(from, to),
  turnaroundDays,
})

describe('limits', () => {
  const limits = { maxLoanDays: 28, maxAheadDays: 90, maxPerMember: 2 }
  const breaches = (from: number, to: number, own = [] as ReturnType<typeof range>[]) =>
    limitBreaches(range(from, to), limits, own, nth(1)).map(({ limit }) => limit)

  it('count both ends of a loan', () => {
    expect(breaches(1, 28)).toEqual([])
    expect(breaches(1, 29)).toEqual(['max-loan-days'])
  })

  it('look as far ahead as the kind allows, to the day', () => {
    expect(breaches(91, 92)).toEqual([])
    expect(breaches(92, 93)).toEqual(['max-ahead-days'])
  })

  it('count what a member holds at once, not in a year', () => {
    expect(breaches(10, 12, [range(1, 9), range(13, 20)])).toEqual([])
    expect(breaches(10, 12, [range(1, 10), range(12, 20)])).toEqual([])
    expect(breaches(10, 12, [range(1, 11), range(11, 20)])).toEqual(['max-per-member'])
  })

  it('name all that is passed, and say what to do about each', () => {
    expect(breaches(92, 130, [range(92, 99), range(93, 99)])).toEqual([...LOAN_LIMITS])
    for (const limit of LOAN_LIMITS) {
      expect(breachSentence({ limit, allowed: 1, asked: 2 })).toMatch(/^[A-Z].*\b1\b.*(Choose|give)/)
    }
  })
})

describe('lateness', () => {
  it.each(LOAN_STATUSES)('only what is out can be late, not what is %s', (status) => {
    expect(isOverdue({ status, to: nth(5) }, nth(6))).toBe(status === 'out')
  })

  it('starts the day after the return-by day', () => {
    expect(daysLate({ status: 'out', to: nth(5) }, nth(5))).toBe(0)
    expect(daysLate({ status: 'out', to: nth(5) }, nth(6))).toBe(1)
    expect(daysLate({ status: 'out', to: nth(5) }, nth(12))).toBe(7)
  })

  it('leaves a grace day for collecting, after a late approval too', () => {
    expect(collectBy({ from: nth(5), approvedOn: nth(2) })).toBe(nth(6))
    expect(collectBy({ from: nth(5), approvedOn: nth(7) })).toBe(nth(8))
    const approved = { status: 'approved', ...range(5, 9), approvedOn: nth(2) } as const
    expect(hasLapsed(approved, nth(6))).toBe(false)
    expect(hasLapsed(approved, nth(7))).toBe(true)
    expect(hasLapsed({ ...approved, status: 'requested', approvedOn: undefined }, nth(9))).toBe(false)
    expect(hasLapsed({ ...approved, status: 'requested', approvedOn: undefined }, nth(10))).toBe(true)
    expect(hasLapsed({ ...approved, status: 'out' }, nth(30))).toBe(false)
    expect(hasLapsed({ ...approved, status: 'cancelled' }, nth(30))).toBe(false)
  })
})

describe('bookings at risk', () => {
  it('are those an overdue loan leaves without an item', () => {
    const loans = [
      loan('late', 'out', 1, 5),
      loan('next', 'approved', 7, 9),
      loan('later', 'approved', 12, 14),
    ]
    expect(bookingsAtRisk(loans, 1, nth(5))).toEqual(new Map())
    expect(bookingsAtRisk(loans, 1, nth(6))).toEqual(new Map([['next', 'overdue']]))
    expect(bookingsAtRisk(loans, 2, nth(6))).toEqual(new Map())
    expect(bookingsAtRisk(loans, 1, nth(11))).toEqual(
      new Map([
        ['next', 'overdue'],
        ['later', 'overdue'],
      ]),
    )
  })

  it('are those that too few serviceable items cannot serve', () => {
    const loans = [loan('a', 'approved', 3, 6), loan('b', 'requested', 4, 8), loan('c', 'approved', 10, 12)]
    expect(bookingsAtRisk(loans, 2, nth(1))).toEqual(new Map())
    expect(bookingsAtRisk(loans, 1, nth(1))).toEqual(new Map([['b', 'out-of-service']]))
    expect([...bookingsAtRisk(loans, 0, nth(1)).keys()]).toEqual(['a', 'b', 'c'])
  })
})

describe('an extension', () => {
  const limits = { maxLoanDays: 14, maxAheadDays: 90, maxPerMember: 1 }
  const mine = loan('mine', 'out', 1, 5)
  const answer = (to: number, others: LiveLoan[], serviceable: number, today = 3) =>
    answerExtension(mine, nth(to), { loans: [mine, ...others], serviceable, limits, today: nth(today) })

  it('is granted at once when nobody is delayed and the longest loan is not passed', () => {
    expect(answer(14, [], 1)).toEqual({ granted: true })
    expect(answer(7, [loan('next', 'approved', 9, 10)], 1)).toEqual({ granted: true })
    expect(answer(14, [loan('next', 'approved', 9, 10)], 2)).toEqual({ granted: true })
  })

  it('goes to the desk with the names of what it delays, turnaround counted', () => {
    expect(answer(8, [loan('next', 'approved', 9, 10)], 1)).toEqual({
      granted: false,
      full: true,
      delays: ['next'],
      breaches: [],
    })
  })

  it('goes to the desk when it passes the longest loan', () => {
    expect(answer(15, [], 1)).toMatchObject({
      granted: false,
      full: false,
      delays: [],
      breaches: [{ limit: 'max-loan-days', allowed: 14, asked: 15 }],
    })
  })

  it('asks only for the days it adds, when the loan is late already', () => {
    const late = [loan('hurt', 'approved', 8, 9)]
    // On day 9 the loan blocks until 10; a new return-by day of 9 adds nothing.
    expect(answer(9, late, 1, 9)).toEqual({ granted: true })
    expect(answer(10, [...late, loan('next', 'approved', 11, 12)], 1, 9)).toMatchObject({
      granted: false,
      delays: ['next'],
    })
  })
})
