import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { openHouse, overflow, PHONE, violations, WIDE, type House } from '#tests/support/browser'

let house: House
beforeAll(async () => void (house = await openHouse()))
afterAll(async () => {
  const complaints = house.complaints()
  await house.close()
  expect(complaints).toEqual([])
})

describe.each([
  ['a phone', PHONE],
  ['a wide screen', WIDE],
])('a member at the fridge with %s', (_name, size) => {
  it('is warned off an old packet, pitches another and says how it went', async () => {
    const page = await house.open('member', '/yeast', { size })
    await page.getByRole('link', { name: 'Marram White' }).click()
    await page.getByRole('heading', { name: 'Don’t rely on it' }).waitFor()
    await page.getByRole('heading', { name: /^Ask it first/ }).waitFor()
    expect(await overflow(page)).toBe(0)
    expect(await violations(page)).toEqual([])

    await page.getByRole('link', { name: 'Hobthrush' }).first().click()
    await page.getByRole('heading', { level: 1, name: 'Hobthrush' }).waitFor()
    await page.getByRole('button', { name: 'Choose the batch' }).click()
    const question = page.getByRole('dialog', { name: 'What is it for?' })
    await question.getByLabel('Batch').selectOption({ label: 'Hedgerow melomel' })
    await question.getByRole('button', { name: 'Work it out' }).click()
    await page.getByRole('button', { name: 'Pitch it into Hedgerow melomel' }).click()
    const pitching = page.getByRole('dialog', { name: 'Pitch Hobthrush into Hedgerow melomel' })
    await pitching.getByLabel('How much').fill('1')
    await pitching.getByRole('button', { name: 'Pitch it' }).click()

    await page.getByRole('link', { name: 'Report your pitch' }).click()
    await page.getByRole('button', { name: /^It started/ }).click()
    await page.getByRole('heading', { name: 'After how many hours?' }).waitFor()
    await page.getByRole('button', { name: '12 h', exact: true }).click()
    await page.getByText('Noted, with the hours.').waitFor()
    expect(await overflow(page)).toBe(0)
  })
})
