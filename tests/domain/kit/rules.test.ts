import { describe, expect, it } from 'vitest'
import { calibrationDueOn } from '#shared/kit/calibration'
import { inductionExpiry, isInducted } from '#shared/kit/induction'
import { isKept, mayBecome, nextItemStatuses } from '#shared/kit/item-lifecycle'
import { inPool, isServiceable } from '#shared/kit/serviceable'
import { ITEM_STATUSES } from '#shared/kit/vocabulary'
import { addMonths, day } from '#shared/time/day'

describe('an item can be lent', () => {
  it('in service and without a fault that blocks; nothing else counts', () => {
    for (const status of ITEM_STATUSES)
      for (const openBlockingFaults of [0, 1, 2])
        expect(isServiceable({ status, openBlockingFaults })).toBe(
          status === 'in-service' && openBlockingFaults === 0,
        )
  })

  it('from the pool of its own cultures', () => {
    const item = { status: 'in-service', openBlockingFaults: 0 } as const
    expect(inPool({ ...item, wild: false }, { wildOnly: false })).toBe(true)
    expect(inPool({ ...item, wild: true }, { wildOnly: false })).toBe(false)
    expect(inPool({ ...item, wild: true }, { wildOnly: true })).toBe(true)
    expect(inPool({ ...item, wild: false }, { wildOnly: true })).toBe(false)
  })
})

describe('an item goes', () => {
  const moves: Record<string, boolean> = {
    'in-service repair': true,
    'in-service retired': true,
    'in-service lost': true,
    'repair in-service': true,
    'repair retired': true,
    'repair lost': true,
    'retired in-service': true,
    'retired repair': true,
    'retired lost': false,
    'lost in-service': true,
    'lost repair': true,
    'lost retired': true,
  }
  const pairs = ITEM_STATUSES.flatMap((from) => ITEM_STATUSES.map((to) => [from, to] as const))
  it.each(pairs)('from %s to %s only where that makes sense', (from, to) => {
    expect(mayBecome(from, to)).toBe(from === to || moves[`${from} ${to}`])
    expect(nextItemStatuses(from).includes(to)).toBe(from !== to && moves[`${from} ${to}`])
  })

  it('out of keeping when retired or lost', () => {
    expect(ITEM_STATUSES.filter(isKept)).toEqual(['in-service', 'repair'])
  })
})

describe('months on', () => {
  it.each([
    ['2031-01-31', 1, '2031-02-28'],
    ['2032-01-31', 1, '2032-02-29'],
    ['2031-12-15', 1, '2032-01-15'],
    ['2032-02-29', 12, '2033-02-28'],
    ['2031-05-06', 0, '2031-05-06'],
  ])('%s and %i months is %s', (from, months, expected) => {
    expect(addMonths(day(from), months)).toBe(expected)
  })
})

describe('an induction', () => {
  it('counts up to and with its last day, or for good', () => {
    const expiresOn = inductionExpiry(day('2031-01-31'), 1) ?? null
    expect(expiresOn).toBe('2031-02-28')
    expect(isInducted({ expiresOn }, day('2031-02-28'))).toBe(true)
    expect(isInducted({ expiresOn }, day('2031-03-01'))).toBe(false)
    expect(inductionExpiry(day('2031-01-31'), null)).toBeUndefined()
    expect(isInducted({ expiresOn: null }, day('2090-01-01'))).toBe(true)
    expect(isInducted(undefined, day('2031-01-01'))).toBe(false)
  })
})

describe('a check of a hydrometer', () => {
  it('is due so many months after the last, at once when there was none, never when its kind says so', () => {
    const item = { calibratedOn: day('2031-01-31'), addedOn: day('2030-01-01') }
    expect(calibrationDueOn(item, 6)).toBe('2031-07-31')
    expect(calibrationDueOn({ ...item, calibratedOn: null }, 6)).toBe('2030-01-01')
    expect(calibrationDueOn(item, null)).toBeUndefined()
  })
})
