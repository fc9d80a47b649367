import { describe, expect, it } from 'vitest'
import { day } from '#shared/time/day'
import { dayFrom, dayInWords } from '#shared/time/day-words'

const on = day('2026-10-14')

describe('a day in words', () => {
  it.each([
    ['short', 'Wed 14 Oct'],
    ['short-year', 'Wed 14 Oct 2026'],
    ['date', '14 Oct'],
    ['date-long', '14 October'],
    ['weekday', 'Wednesday'],
    ['long', 'Wednesday 14 October'],
    ['full', 'Wednesday 14 October 2026'],
  ] as const)('is said %s as %s', (style, words) => {
    expect(dayInWords(on, style)).toBe(words)
  })
  it('agrees with the calendar of the runtime on every day of a leap year', () => {
    const format = new Intl.DateTimeFormat('en-GB', {
      timeZone: 'UTC',
      weekday: 'long',
      day: 'numeric',
      month: 'long',
      year: 'numeric',
    })
    for (let index = 0; index < 366; index += 1) {
      const iso = new Date(Date.UTC(2028, 0, 1 + index)).toISOString()
      const theirs = format.format(new Date(iso)).replace(',', '')
      expect(dayInWords(day(iso.slice(0, 10)), 'full')).toBe(theirs)
    }
  })
  it('is said as one speaks, near today', () => {
    const near = ['2026-10-13', '2026-10-14', '2026-10-15', '2026-10-16', '2027-01-01']
    expect(near.map((text) => dayFrom(on, day(text)))).toEqual([
      'yesterday',
      'today',
      'tomorrow',
      'Fri 16 Oct',
      'Fri 1 Jan 2027',
    ])
  })
})
