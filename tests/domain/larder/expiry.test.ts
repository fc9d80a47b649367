import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { dateState, firstExpiringFirst, suggestDraw, useByDay, type DatedLot } from '#shared/larder/expiry'
import { addDays, day } from '#shared/time/day'

const today = day('2031-05-06')

describe('the last day to use a lot', () => {
  it.each([
    [{ bestBefore: day('2031-06-30'), openedOn: null, keepsOpenedDays: 5 }, '2031-06-30'],
    [{ bestBefore: day('2031-06-30'), openedOn: day('2031-06-01'), keepsOpenedDays: 5 }, '2031-06-06'],
    [{ bestBefore: day('2031-06-30'), openedOn: day('2031-06-28'), keepsOpenedDays: 5 }, '2031-06-30'],
    [{ bestBefore: null, openedOn: day('2031-06-01'), keepsOpenedDays: 5 }, '2031-06-06'],
    [{ bestBefore: null, openedOn: day('2031-06-01'), keepsOpenedDays: null }, null],
  ])('%o is %s', (dates, last) => expect(useByDay(dates)).toBe(last))

  it.each([
    [null, 'undated'],
    ['2031-05-05', 'past'],
    ['2031-05-06', 'soon'],
    ['2031-06-05', 'soon'],
    ['2031-06-06', 'fine'],
  ])('%s is %s on 6 May', (useBy, state) =>
    expect(dateState(useBy === null ? null : day(useBy), today)).toBe(state),
  )
})

const lot = (
  id: string,
  useBy: string | null,
  remaining = 100,
  openedOn: string | null = null,
): DatedLot => ({
  id,
  useBy: useBy === null ? null : day(useBy),
  remaining,
  openedOn: openedOn === null ? null : day(openedOn),
})

describe('first expiring first', () => {
  it('puts old ones last, opened before closed, small rests first', () => {
    const lots = [
      lot('undated', null),
      lot('past', '2031-05-01'),
      lot('later', '2031-09-01'),
      lot('soon', '2031-05-20'),
      lot('soon-small', '2031-05-20', 10),
      lot('soon-open', '2031-05-20', 500, '2031-05-02'),
    ]
    const order = firstExpiringFirst(lots, today).map((l) => l.id)
    expect(order).toEqual(['soon-open', 'soon-small', 'soon', 'later', 'undated', 'past'])
  })

  it('suggests from several lots, and says what is short', () => {
    const lots = [lot('a', '2031-05-20', 30), lot('b', '2031-09-01', 50), lot('old', '2031-05-01', 900)]
    expect(suggestDraw(lots, 70, today)).toEqual({
      lines: [
        { lotId: 'a', quantity: 30 },
        { lotId: 'b', quantity: 40 },
      ],
      short: 0,
    })
    expect(suggestDraw(lots, 100, today).short).toBe(20)
  })

  it('gives what was asked, or all that is in date', () => {
    const anyLot = fc.record({
      useBy: fc.option(fc.integer({ min: -40, max: 400 }).map((days) => addDays(today, days))),
      openedOn: fc.option(fc.constant(today)),
      remaining: fc.integer({ min: 0, max: 5000 }).map((milli) => milli / 1000),
    })
    const wanted = fc.integer({ min: 1, max: 20_000 }).map((milli) => milli / 1000)
    fc.assert(
      fc.property(fc.array(anyLot, { maxLength: 12 }), wanted, (drafts, quantity) => {
        const lots = drafts.map((draft, index) => ({ ...draft, id: `lot-${index}` }))
        const { lines, short } = suggestDraw(lots, quantity, today)
        const milli = (value: number) => Math.round(value * 1000)
        const given = lines.reduce((sum, line) => sum + milli(line.quantity), 0)
        expect(given + milli(short)).toBe(milli(quantity))
        const inDate = lots.filter((l) => l.useBy === null || l.useBy >= today)
        const usable = inDate.reduce((sum, l) => sum + milli(l.remaining), 0)
        expect(given).toBe(Math.min(usable, milli(quantity)))
        for (const line of lines) {
          const from = inDate.find((l) => l.id === line.lotId)
          expect(line.quantity).toBeLessThanOrEqual(from?.remaining ?? -1)
        }
      }),
    )
  })
})
