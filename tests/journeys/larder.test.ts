import { eq } from 'drizzle-orm'
import type { Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { ingredients, lots } from '#server/db/schema/larder'
import { members } from '#server/db/schema/people'
import { moveLot } from '#server/services/larder/draws'
import { balanceMinor } from '#server/services/larder/tabs'
import { moneyWords } from '#shared/units/money'
import { openHouse, overflow, PHONE, violations, WIDE, type House } from '#tests/support/browser'

let house: House
beforeAll(async () => void (house = await openHouse()))
afterAll(async () => {
  const complaints = house.complaints()
  await house.close()
  expect(complaints).toEqual([])
})

const idOf = (login: string) => {
  const row = house.db
    .select({ id: members.id })
    .from(members)
    .where(eq(members.email, `${login}@barmhouse.example`))
    .get()
  return row?.id ?? ''
}
/** What is in the only lot of an ingredient. */
const lotOf = (name: string) => {
  const row = house.db
    .select({ lot: lots })
    .from(lots)
    .innerJoin(ingredients, eq(ingredients.id, lots.ingredientId))
    .where(eq(ingredients.name, name))
    .get()
  if (!row) throw new Error(`the demo has no ${name}`)
  return row.lot
}
const sound = async (page: Page) => {
  expect(await violations(page)).toEqual([])
  expect(await overflow(page)).toBe(0)
}

const SIZES = [
  ['a phone', PHONE],
  ['a wide screen', WIDE],
] as const

describe.each(SIZES)('a member at the larder, on %s', (_name, size) => {
  it('draws honey in two taps and reads their tab, then takes the slip back', async () => {
    const before = balanceMinor(house.db, idOf('member'))
    const page = await house.open('member', '/larder', { size })
    await page.getByLabel('Find in the larder').fill('heather')
    await sound(page)
    await page.getByRole('link', { name: 'Heather honey' }).click()
    await page.getByRole('heading', { level: 1, name: 'Heather honey' }).waitFor()
    await sound(page)

    await page.getByRole('button', { name: '250 g', exact: true }).click()
    await page.getByRole('button', { name: 'Take 250 g' }).click()
    await page.getByText(/^250 g taken, £\d+\.\d\d on your tab\.$/).waitFor()
    const after = balanceMinor(house.db, idOf('member'))
    expect(after).toBeGreaterThan(before)

    await page.getByRole('link', { name: 'Larder' }).first().click()
    await page.getByRole('link', { name: `My tab ${moneyWords(after, 'GBP')}` }).click()
    await page.getByText(moneyWords(after, 'GBP')).first().waitFor()
    const newest = page.getByRole('row').nth(1)
    expect(await newest.textContent()).toContain('Heather honey')
    expect(await newest.textContent()).toContain(moneyWords(after - before, 'GBP'))
    await page.getByText('No card payment is taken here.').waitFor()
    await sound(page)

    await newest.getByRole('link', { name: 'Heather honey' }).click()
    await page.getByRole('button', { name: 'Undo 250 g taken' }).click()
    await page.getByText('Undone. The lot and your tab are as before.').waitFor()
    expect(balanceMinor(house.db, idOf('member'))).toBe(before)
  })

  it('is told about allergens where they draw, and refused more than there is', async () => {
    const page = await house.open('member', '/larder', { size })
    await page.getByRole('link', { name: 'Raisins' }).click()
    await page.getByText('Contains sulphites').first().waitFor()
    await page.getByLabel('How much').fill('9000')
    await page.getByRole('button', { name: 'Take 9 kg' }).click()
    await page.getByText(/^There is 850 g in this lot\.$/).waitFor()
  })
})

describe.each(SIZES)('a steward taking stock, on %s', (_name, size) => {
  it('walks the shelf, keeps the counts through a reload, looks them over, commits once', async () => {
    const said = lotOf('Bentonite').remainingMilli
    const page = await house.open('steward', '/stocktake', { size })
    await page.getByLabel('Bentonite', { exact: true }).fill(String(said / 1000 - 10))
    await page.getByRole('button', { name: 'Malic acid is as it says' }).click()
    await page.getByText(/ 2 of \d+ counted\.$/).waitFor()
    await page.reload()
    await page.getByText(/ 2 of \d+ counted\.$/).waitFor()
    await sound(page)

    await page.getByRole('button', { name: 'Look it over' }).click()
    await page.getByText('1 of 2 differ').first().waitFor()
    await sound(page)
    await page.getByRole('button', { name: 'Set one lot to what is there' }).click()
    await page.getByText('1 of 2 differed').waitFor()
    expect(lotOf('Bentonite').remainingMilli).toBe(said - 10_000)
    await page.reload()
    await page.getByText(/ 0 of \d+ counted\.$/).waitFor()
  })

  it('is sent back to a lot that moved meanwhile', async () => {
    const page = await house.open('steward', '/stocktake', { size })
    const lot = lotOf('Grape tannin')
    await page.getByLabel('Grape tannin', { exact: true }).fill('30')
    await page.getByRole('button', { name: 'Look it over' }).click()
    const hester = {
      id: idOf('member'),
      name: 'Hester',
      email: '',
      role: 'member',
      status: 'active',
    } as const
    moveLot(house.deps, hester, lot.id, { reason: 'draw', quantity: 1 })
    await page.getByRole('button', { name: 'Set one lot to what is there' }).click()
    await page.getByText(/One lot has moved since you looked/).waitFor()
    await page.getByText(/when you counted: count again$/).waitFor()
    await sound(page)
    expect(lotOf('Grape tannin').remainingMilli).toBe(lot.remainingMilli - 1000)
    await page.getByRole('button', { name: 'Grape tannin is as it says' }).click()
    await page.getByRole('button', { name: 'Look it over' }).click()
    await page.getByRole('button', { name: 'Write down one lot as counted' }).click()
    await page.getByRole('heading', { level: 1, name: 'The count is in' }).waitFor()
  })
})
