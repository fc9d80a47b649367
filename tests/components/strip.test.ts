import { enableAutoUnmount, mount } from '@vue/test-utils'
import { afterEach, describe, expect, it } from 'vitest'
import { nextTick } from 'vue'
import ShelfStrip from '@/components/base/ShelfStrip.vue'
import { blocksOf, edgePart, markOf, runsInWords, weeksOf } from '@/components/base/strip'
import { addDays, day } from '#shared/time/day'
import type { DayRange } from '#shared/time/day-range'

enableAutoUnmount(afterEach)

/** A Wednesday. */
const today = day('2026-10-14')
const days = Array.from({ length: 21 }, (_, index) => ({
  on: addDays(today, index),
  free: index === 1 ? 0 : 2,
}))

function strip() {
  const ranges: (DayRange | undefined)[] = []
  const wrapper = mount(ShelfStrip, {
    attachTo: document.body,
    props: {
      days,
      total: 3,
      today,
      turnaroundDays: 2,
      choosable: true,
      'onUpdate:range': (range: DayRange | undefined) => {
        ranges.push(range)
        void wrapper.setProps({ range })
      },
    },
  })
  const cell = (on: string) => wrapper.get(`[data-on="${on}"]`)
  const press = async (key: string, more: object = {}) => {
    await wrapper.get('[tabindex="0"]').trigger('keydown', { key, ...more })
    await nextTick()
    await nextTick()
  }
  const focused = () => document.activeElement?.getAttribute('data-on')
  return { wrapper, ranges, cell, press, focused }
}

describe('choosing days on the shelf strip', () => {
  it('has one tab stop, which the arrows move by day and by week', async () => {
    const { wrapper, press, focused } = strip()
    expect(wrapper.findAll('[tabindex="0"]').map((cell) => cell.attributes('data-on'))).toEqual([
      '2026-10-14',
    ])
    await press('ArrowRight')
    expect(focused()).toBe('2026-10-15')
    await press('ArrowDown')
    expect(focused()).toBe('2026-10-22')
    await press('Home')
    expect(focused()).toBe('2026-10-19')
    await press('End')
    expect(focused()).toBe('2026-10-25')
    await press('ArrowUp')
    expect(focused()).toBe('2026-10-18')
    expect(wrapper.findAll('[tabindex="0"]')).toHaveLength(1)
  })

  it('takes a range by Enter on two days, over a day with none', async () => {
    const { press, ranges, cell } = strip()
    await press('Enter')
    expect(ranges.at(-1)).toEqual({ from: '2026-10-14', to: '2026-10-14' })
    await press('ArrowDown')
    await press(' ')
    expect(ranges.at(-1)).toEqual({ from: '2026-10-14', to: '2026-10-21' })
    expect(cell('2026-10-15').attributes('aria-selected')).toBe('true')
    expect(cell('2026-10-22').attributes('aria-selected')).toBe('false')
  })

  it('stretches the range by Shift and arrows, both ways from where it began', async () => {
    const { press, ranges } = strip()
    await press('ArrowRight')
    await press('ArrowRight')
    await press('ArrowRight', { shiftKey: true })
    await press('ArrowRight', { shiftKey: true })
    expect(ranges.at(-1)).toEqual({ from: '2026-10-16', to: '2026-10-18' })
    await press('ArrowLeft', { shiftKey: true })
    await press('ArrowLeft', { shiftKey: true })
    await press('ArrowLeft', { shiftKey: true })
    expect(ranges.at(-1)).toEqual({ from: '2026-10-15', to: '2026-10-16' })
  })

  it('takes a range by two clicks, and begins anew on an earlier day', async () => {
    const { cell, ranges } = strip()
    await cell('2026-10-20').trigger('click')
    await cell('2026-10-18').trigger('click')
    expect(ranges.at(-1)).toEqual({ from: '2026-10-18', to: '2026-10-18' })
    await cell('2026-10-25').trigger('click')
    expect(ranges.at(-1)).toEqual({ from: '2026-10-18', to: '2026-10-25' })
  })

  it('stays at the edge, says so and asks for the days beyond', async () => {
    const { wrapper, press } = strip()
    await press('ArrowLeft')
    expect(wrapper.get('[tabindex="0"]').attributes('data-on')).toBe('2026-10-14')
    expect(wrapper.text()).toContain('That is the first day shown.')
    expect(wrapper.emitted('beyond')).toEqual([[-1]])
  })

  it('names each day in words, and says the chosen dates', async () => {
    const { wrapper, cell } = strip()
    expect(cell('2026-10-14').attributes('aria-label')).toBe('Today, Wednesday 14 October, 2 of 3 free')
    expect(cell('2026-10-15').attributes('aria-label')).toBe('Thursday 15 October, none of 3 free')
    await wrapper.setProps({ range: { from: day('2026-10-17'), to: day('2026-10-20') } })
    expect(wrapper.text()).toContain('collect Sat 17 Oct, bring back Tue 20 Oct')
    expect(wrapper.text()).toContain('then 2 days’ cleaning')
  })
})

describe('what a strip shows', () => {
  it('warns of the last one only where there are three or more', () => {
    expect([markOf(1, 3), markOf(1, 2), markOf(0, 1), markOf(2, 8)]).toEqual([
      'last',
      'plain',
      'none',
      'plain',
    ])
  })
  it('stands a block for each free item, for several above ten', () => {
    expect([blocksOf(8, 8), blocksOf(10, 10), blocksOf(20, 20), blocksOf(1, 20), blocksOf(0, 5)]).toEqual([
      8, 10, 10, 1, 0,
    ])
  })
  it('cuts days into weeks from Monday', () => {
    const weeks = weeksOf(days)
    expect(weeks.map((week) => week.filter((cell) => cell.day).length)).toEqual([5, 7, 7, 2])
    expect(weeks[0]?.[0]?.on).toBe('2026-10-12')
  })
  it('runs along the edge: the chosen days, then the cleaning', () => {
    const range = { from: day('2026-10-15'), to: day('2026-10-17') }
    const parts = days.slice(0, 7).map(({ on }) => edgePart(on, range, 2))
    expect(parts).toEqual([undefined, 'first', 'middle', 'last', 'cleaning', 'cleaning', undefined])
  })
  it('says a whole strip with like days joined', () => {
    expect(runsInWords(days.slice(0, 4))).toBe(
      '2 free Wed 14 Oct; none free Thu 15 Oct; 2 free Fri 16 Oct to Sat 17 Oct',
    )
  })
})
