import { describe, expect, it } from 'vitest'
import { type ShelfItem, checkOutObstacle, suggestItems } from '#shared/loans/suggestion'
import { InstantInput } from '#shared/time/instant'

const now = InstantInput.parse('2031-05-01T10:00:00Z')
const until = (day: number) => InstantInput.parse(`2031-05-0${day}T10:00:00Z`)
const item = (id: string, more: Partial<ShelfItem> = {}): ShelfItem => ({
  id,
  tag: `DJ-${id}`,
  hygiene: 'clean',
  sanitisedUntil: undefined,
  usable: true,
  out: false,
  ...more,
})

describe('handing out an item', () => {
  it.each([
    // what the item is, and what stands in the way: for a kind that need be clean, and one that must be sanitised
    [{}, undefined, 'not-clean'],
    [{ hygiene: 'dirty' }, 'not-clean', 'not-clean'],
    [{ hygiene: 'sanitised', sanitisedUntil: until(2) }, undefined, undefined],
    [{ hygiene: 'sanitised', sanitisedUntil: now }, undefined, 'not-clean'],
    [{ usable: false }, 'blocked-by-fault', 'blocked-by-fault'],
    [{ usable: false, hygiene: 'dirty' }, 'blocked-by-fault', 'blocked-by-fault'],
    [{ out: true, hygiene: 'dirty' }, 'not-available', 'not-available'],
  ] as const)('%j', (more, clean, sanitised) => {
    expect(checkOutObstacle(item('1', more), false, now)).toBe(clean)
    expect(checkOutObstacle(item('1', more), true, now)).toBe(sanitised)
  })
})

describe('the suggested item', () => {
  const shelf = [
    item('5', { hygiene: 'dirty' }),
    item('4'),
    item('3', { hygiene: 'sanitised', sanitisedUntil: until(3) }),
    item('2', { hygiene: 'sanitised', sanitisedUntil: until(2) }),
    item('1', { hygiene: 'sanitised', sanitisedUntil: until(1) }),
    item('0', { out: true }),
  ]
  const suggest = (needsSanitised: boolean) =>
    Object.fromEntries(
      suggestItems(['first', 'second', 'third', 'fourth', 'fifth'], shelf, needsSanitised, now),
    )

  it('leaves what is sanitised to those who need it', () => {
    expect(suggest(false)).toEqual({ first: '1', second: '4', third: '2', fourth: '3' })
  })

  it('uses first what will have to be sanitised again first', () => {
    expect(suggest(true)).toEqual({ first: '2', second: '3' })
  })
})
