import { describe, expect, it } from 'vitest'
import { lateDays, loanReminder, reminderDay, stepDay } from '#shared/notices/due'
import { day, addDays, type CalendarDay } from '#shared/time/day'
import type { Instant } from '#shared/time/instant'
import { LOAN_STATUSES } from '#shared/loans/vocabulary'

const at = (text: string) => text as Instant

describe('the reminder day', () => {
  it.each([
    // London: clocks go forward on 2031-03-30 and back on 2031-10-26.
    ['2031-03-29T08:59:59.999Z', 'Europe/London', '2031-03-28'],
    ['2031-03-29T09:00:00.000Z', 'Europe/London', '2031-03-29'],
    ['2031-03-30T07:59:59.999Z', 'Europe/London', '2031-03-29'],
    ['2031-03-30T08:00:00.000Z', 'Europe/London', '2031-03-30'],
    ['2031-10-26T08:59:59.999Z', 'Europe/London', '2031-10-25'],
    ['2031-10-26T09:00:00.000Z', 'Europe/London', '2031-10-26'],
    // New York: UTC-5 in January, UTC-4 in July.
    ['2031-01-10T13:59:00.000Z', 'America/New_York', '2031-01-09'],
    ['2031-01-10T14:00:00.000Z', 'America/New_York', '2031-01-10'],
    ['2031-07-10T13:00:00.000Z', 'America/New_York', '2031-07-10'],
    // Lord Howe: UTC+11 in January, UTC+10:30 in July.
    ['2031-01-09T22:00:00.000Z', 'Australia/Lord_Howe', '2031-01-10'],
    ['2031-07-09T22:29:00.000Z', 'Australia/Lord_Howe', '2031-07-09'],
    ['2031-07-09T22:30:00.000Z', 'Australia/Lord_Howe', '2031-07-10'],
    ['2031-07-10T09:00:00.000Z', 'UTC', '2031-07-10'],
  ])('at %s in %s is %s', (instant, zone, expected) => {
    expect(reminderDay(at(instant), zone)).toBe(expected)
  })
})

describe('a loan that is out', () => {
  const loan = {
    status: 'out',
    from: day('2031-05-01'),
    to: day('2031-05-09'),
    knownOn: day('2031-05-01'),
  } as const

  it('is written about three days before, on the day, and late on days 1, 3, 7 and then weekly', () => {
    const days = Array.from({ length: 45 }, (_, index) => addDays(day('2031-05-01'), index))
    const owed = days.flatMap((today) => {
      const reminder = loanReminder(loan, today)
      return reminder?.on === today ? [[today, reminder.kind]] : []
    })
    expect(owed).toEqual([
      ['2031-05-06', 'loan-due-soon'],
      ['2031-05-09', 'loan-due-today'],
      ['2031-05-10', 'loan-overdue'],
      ['2031-05-12', 'loan-overdue'],
      ['2031-05-16', 'loan-overdue'],
      ['2031-05-23', 'loan-overdue'],
      ['2031-05-30', 'loan-overdue'],
      ['2031-06-06', 'loan-overdue'],
      ['2031-06-13', 'loan-overdue'],
    ])
  })

  it('gets the newest reminder after some silent days, and no older one', () => {
    expect(loanReminder(loan, day('2031-05-08'))).toEqual({ kind: 'loan-due-soon', on: '2031-05-06' })
    expect(loanReminder(loan, day('2031-05-15'))).toEqual({ kind: 'loan-overdue', on: '2031-05-12' })
  })

  it('is not reminded of a day that had passed when it went out', () => {
    const short = { ...loan, from: day('2031-05-07'), knownOn: day('2031-05-07') }
    expect(loanReminder(short, day('2031-05-07'))).toBeUndefined()
    expect(loanReminder(short, day('2031-05-09'))?.kind).toBe('loan-due-today')
  })

  it('counts anew from a later return-by day', () => {
    const longer = { ...loan, to: day('2031-05-20'), knownOn: day('2031-05-10') }
    expect(loanReminder(longer, day('2031-05-16'))).toBeUndefined()
    expect(loanReminder(longer, day('2031-05-17'))?.kind).toBe('loan-due-soon')
  })
})

describe('other loans', () => {
  const dates = { from: day('2031-05-05'), to: day('2031-05-09'), knownOn: day('2031-05-01') }

  it('are told the day before collection once approved', () => {
    const loan = { ...dates, status: 'approved' } as const
    expect(loanReminder(loan, day('2031-05-03'))).toBeUndefined()
    expect(loanReminder(loan, day('2031-05-04'))).toEqual({ kind: 'loan-collect-tomorrow', on: '2031-05-04' })
  })

  it('are left alone when approved on that very day, or in any other state', () => {
    expect(
      loanReminder({ ...dates, status: 'approved', knownOn: day('2031-05-04') }, day('2031-05-05')),
    ).toBeUndefined()
    const quiet = LOAN_STATUSES.filter((status) => status !== 'approved' && status !== 'out')
    for (const status of quiet)
      for (let n = 0; n < 60; n++)
        expect(loanReminder({ ...dates, status }, addDays(day('2031-05-01'), n))).toBeUndefined()
  })
})

describe('lateness', () => {
  it.each([
    [-4, []],
    [0, []],
    [1, [1]],
    [2, [1]],
    [6, [1, 3]],
    [7, [1, 3, 7]],
    [13, [1, 3, 7]],
    [14, [1, 3, 7, 14]],
    [29, [1, 3, 7, 14, 21, 28]],
  ])('of %i days has letters on %j', (late, expected) => {
    expect(lateDays(late)).toEqual(expected)
  })
})

describe('a plan', () => {
  const steps: { on: CalendarDay }[] = ['2031-05-02', '2031-05-06', '2031-05-30'].map((on) => ({
    on: day(on),
  }))

  it('is written about for the newest day that has come', () => {
    expect(stepDay(steps, day('2031-05-01'), day('2031-05-02'))).toBe('2031-05-02')
    expect(stepDay(steps, day('2031-05-01'), day('2031-05-08'))).toBe('2031-05-06')
  })

  it('is left alone for days that had passed when it was last touched', () => {
    expect(stepDay(steps, day('2031-05-06'), day('2031-05-08'))).toBeUndefined()
    expect(stepDay(steps, day('2031-05-06'), day('2031-05-30'))).toBe('2031-05-30')
  })
})
