import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { openHouse, overflow, PHONE, violations, WIDE, type House } from '#tests/support/browser'

let house: House
beforeAll(async () => {
  house = await openHouse()
})
afterAll(async () => {
  expect(house.complaints()).toEqual([])
  await house.close()
})

describe('a member at the bench', () => {
  test('picks a question, fills it in with commas, and reads the answer', async () => {
    const page = await house.open('member', '/bench')
    await page.getByRole('link', { name: /How strong is it\?/ }).click()
    await page.getByRole('heading', { level: 1, name: 'How strong is it?' }).waitFor()
    await page.getByLabel('Gravity at the start').fill('1,066')
    await page.getByLabel('Gravity now').fill('0,998')
    await page.getByRole('radio', { name: '× 131.25' }).check()
    const answer = page.locator('[role=status] .figure')
    await expect.poll(() => answer.innerText()).toMatch(/^8\.9\s*%$/)
    await page.getByText('How this is worked out').click()
    expect(await page.getByText(/kitchen rule, 0.3 % short/).isVisible()).toBe(true)
  })

  test('shares what stands there: the address opens the same in another browser', async () => {
    const first = await house.open('member', '/bench?ask=priming')
    await first.getByLabel('To bottle').fill('9')
    await expect.poll(() => first.url()).toMatch(/volumeLitres=9/)
    const figure = await first.locator('[role=status] .figure').innerText()
    const address = first.url().slice(house.url.length)
    const second = await house.open('member2', address)
    await expect.poll(() => second.locator('[role=status] .figure').innerText()).toBe(figure)
  })

  test('changes units and means the same', async () => {
    const page = await house.open('member', '/bench?ask=reading&reading=1.05&temperatureC=25')
    const answer = page.locator('[role=status] .figure')
    await expect.poll(() => answer.innerText()).toMatch(/^1\.051/)
    await page.getByRole('radio', { name: '°F', exact: true }).check()
    await expect.poll(() => page.getByLabel('In a sample at').inputValue()).toBe('77')
    expect(await answer.innerText()).toMatch(/^1\.051/)
    await page.getByRole('radio', { name: '°Bx', exact: true }).check()
    await expect.poll(() => answer.innerText()).toMatch(/^12\.7\s*°Bx/)
  })

  test('is told beside the field what is allowed', async () => {
    const page = await house.open('member', '/bench?ask=reading')
    const field = page.getByLabel('In a sample at')
    await field.fill('55')
    await expect.poll(() => field.getAttribute('aria-invalid')).toBe('true')
    expect(await page.getByText('From 5 to 40 °C is allowed.').isVisible()).toBe(true)
    expect(await page.locator('main').innerText()).not.toMatch(/NaN|Infinity/)
    await field.fill('warm')
    await expect.poll(() => page.getByText(/That is no number/).isVisible()).toBe(true)
  })

  test('is not let through the gate with ten points to come', async () => {
    const page = await house.open('member', '/bench?ask=gate&readings=2026-10-01:1.010~2026-10-09:1.010')
    await page.getByText('Not yet').waitFor()
    expect(await page.getByText(/5\.8 volumes: 7\.4 bar/).isVisible()).toBe(true)
    await page.getByRole('button', { name: 'Add a reading' }).click()
    await page.getByLabel('Gravity 3').fill('1.000')
    await expect.poll(() => page.locator('main').innerText()).toMatch(/It fell 10 points/)
  })

  test('goes back to the list and keeps nothing', async () => {
    const page = await house.open('member', '/bench?ask=bottles&volumeLitres=23')
    await page.getByRole('link', { name: 'Bench' }).last().click()
    await page.getByRole('heading', { level: 1, name: 'Bench' }).waitFor()
    expect(page.url()).toBe(`${house.url}/bench`)
    await page.goBack()
    await expect.poll(() => page.getByLabel('In the vessel').inputValue()).toBe('23')
  })
})

/** One of each make: lines, readings, a word, a choice of many, plain numbers. */
const LOOKED_INTO = /ask=(must|gate|packet|dose|reading)$/

describe('every question', () => {
  test('fits a phone and a wide screen, light and dark, with nothing for axe to find', async () => {
    for (const [size, dark] of [
      [PHONE, false],
      [WIDE, true],
    ] as const) {
      const page = await house.open('member', '/bench', { size, dark })
      await page.getByRole('heading', { level: 1, name: 'Bench' }).waitFor()
      expect(await overflow(page)).toBe(0)
      expect(await violations(page)).toEqual([])
      const links = await page
        .locator('main a')
        .evaluateAll((all) => all.map((one) => (one as HTMLAnchorElement).getAttribute('href') ?? ''))
      expect(links.length).toBeGreaterThanOrEqual(20)
      for (const link of links) {
        await page.goto(house.url + link)
        await page.locator('[role=status] .sentence').waitFor()
        expect(await overflow(page), link).toBe(0)
        expect(await page.locator('main').innerText(), link).not.toMatch(/NaN|Infinity|undefined/)
        if (LOOKED_INTO.test(link)) expect(await violations(page), link).toEqual([])
      }
    }
  })

  test('prints without its buttons, with the working out', async () => {
    const page = await house.open('member', '/bench?ask=priming')
    await page.locator('[role=status] .figure').waitFor()
    await page.emulateMedia({ media: 'print' })
    expect(await page.getByRole('button', { name: 'Print this' }).isVisible()).toBe(false)
    expect(await page.getByText(/white sugar yields 0.514 g/).isVisible()).toBe(true)
  })
})
