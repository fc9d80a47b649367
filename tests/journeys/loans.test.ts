import { addDays } from '#shared/time/day'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { letterSender } from '#server/jobs/send-letters'
import { startCatcher } from '#server/mail/catcher'
import { smtpMailer } from '#server/mail/smtp'
import { openHouse, overflow, PHONE, violations, WIDE, type House } from '#tests/support/browser'

let house: House
beforeAll(async () => void (house = await openHouse()))
afterAll(async () => {
  const complaints = house.complaints()
  await house.close()
  expect(complaints).toEqual([])
})

/** Sends what waits in the outbox through the real catcher. */
async function sendLetters() {
  const catcher = await startCatcher(house.deps)
  const mailer = smtpMailer({ url: catcher.url, from: house.deps.mailFrom })
  await letterSender(house.deps, mailer).run()
  mailer.close()
  await catcher.close()
}

describe('a steward at the desk', () => {
  it('approves, and the member reads the answer in their mail', async () => {
    const desk = await house.open('steward', '/desk', { size: WIDE })
    await desk.getByRole('heading', { level: 1, name: /to decide/ }).waitFor()
    expect(await violations(desk)).toEqual([])
    await desk.getByRole('button', { name: 'Approve Hester Vale, Demijohn 4.5 L, glass' }).click()
    await desk.getByText('Hester Vale has a yes for Demijohn 4.5 L, glass.').waitFor()
    await desk.getByRole('button', { name: 'Approve Hester Vale' }).waitFor({ state: 'detached' })

    await sendLetters()
    const mail = await house.open('admin', '/dev/mail')
    await mail.getByText('member@barmhouse.example').first().waitFor()
  })

  it('declines with a reason', async () => {
    const desk = await house.open('steward', '/desk', { size: PHONE })
    await desk.getByRole('button', { name: /^Decline Ottilie Brand/ }).click()
    const dialog = desk.getByRole('dialog', { name: 'Decline Ottilie Brand?' })
    await dialog.getByRole('button', { name: 'Decline it' }).click()
    await dialog.getByText('Write a line; it goes to them.').waitFor()
    await dialog.getByLabel('Why').fill('Both buckets are cracked.')
    await dialog.getByRole('button', { name: 'Decline it' }).click()
    await desk.getByText('Declined. Ottilie Brand gets the reason by e-mail.').waitFor()
    expect(await overflow(desk)).toBe(0)
  })

  it('hands out what is collected today', async () => {
    const desk = await house.open('steward', '/desk', { size: WIDE })
    await desk.getByRole('button', { name: /^Take it out Fermenter 5 L, PET for Bram Tolland/ }).click()
    const dialog = desk.getByRole('dialog')
    await dialog.getByLabel('Which one').waitFor()
    expect(await violations(desk)).toEqual([])
    await dialog.getByRole('button', { name: 'Take it out' }).click()
    await desk.getByText(/^Out to Bram Tolland, back by/).waitFor()
  })

  it('takes back in three taps, washes, and the item is on the shelf again', async () => {
    const desk = await house.open('steward', '/desk', { size: PHONE, dark: true })
    const row = desk
      .getByRole('listitem')
      .filter({ hasText: 'Idris Lockwood' })
      .filter({ hasText: 'Demijohn' })
    const tag =
      (await row
        .getByText(/^DJ-\d\d$/)
        .first()
        .textContent()) ?? ''
    await row.getByRole('button', { name: /^Check in/ }).click()
    let taps = 0
    const tap = async (name: string) => {
      taps += 1
      await desk.getByRole('dialog').getByText(name, { exact: true }).click()
    }
    await tap('Sound')
    await tap('Needs washing')
    expect(await violations(desk)).toEqual([])
    await tap('Take it back, to the sink')
    expect(taps).toBe(3)
    await desk.getByText(`${tag} is back.`).waitFor()
    await desk.getByRole('button', { name: `Clean ${tag}` }).click()
    await desk.getByText(`${tag} is clean and back on the shelf.`).waitFor()
    const item = (
      await (await house.open('steward', '/')).request.get(`${house.url}/api/items/${tag}`)
    ).json()
    expect(await item).toMatchObject({ hygiene: 'clean', status: 'in-service' })
  })
})

describe('a member', () => {
  it.each([
    ['/', PHONE, true],
    ['/', WIDE, false],
    ['/loans', PHONE, false],
    ['/calendar', PHONE, true],
    ['/calendar', WIDE, false],
    ['/calendar', WIDE, true],
  ])('reads %s at %o, dark %s', async (path, size, dark) => {
    const page = await house.open('member', path, { size, dark })
    await page.getByRole('heading', { level: 1 }).waitFor()
    await page.waitForLoadState('networkidle')
    expect(await violations(page)).toEqual([])
    expect(await overflow(page)).toBe(0)
  })

  it.each([['phone', PHONE] as const, ['desk', WIDE] as const])(
    'books a demijohn for a month at a %s, without touching the address bar',
    async (_where, size) => {
      const page = await house.open(size === PHONE ? 'member7' : 'member4', '/', { size })
      await page.getByRole('link', { name: 'Kit', exact: true }).first().click()
      await page.getByRole('link', { name: 'Demijohn 4.5 L, glass' }).click()
      await page.getByRole('heading', { level: 1, name: 'Demijohn 4.5 L, glass' }).waitFor()
      const from = addDays(house.clock.today(), 5)
      await page.getByLabel('Collect').fill(from)
      await page.getByLabel('Bring back by').fill(addDays(from, 27))
      await page.getByText('28 days', { exact: true }).waitFor()
      await page.getByText('Free on every one').waitFor()
      expect(await violations(page)).toEqual([])
      expect(await overflow(page)).toBe(0)
      await page.getByRole('button', { name: 'Ask for this demijohn' }).click()
      await page.getByText('Asked for. A steward answers by e-mail.').waitFor()
      await page.getByText('Asked for', { exact: true }).first().waitFor()
    },
  )

  it('is refused, and takes the window that is offered', async () => {
    const page = await house.open('member2', '/kit', { size: PHONE, dark: true })
    await page.getByRole('link', { name: 'Demijohn 9 L, glass' }).click()
    const from = addDays(house.clock.today(), 1)
    await page.getByLabel('Collect').fill(from)
    await page.getByLabel('Bring back by').fill(addDays(from, 13))
    await page.getByText('Not free on every one').waitFor()
    await page.getByRole('button', { name: /^Ask for this/ }).click()
    await page.getByText('Not free on all of those days').waitFor()
    expect(await violations(page)).toEqual([])
    await page.getByRole('button', { name: /^Take / }).click()
    await page.getByText('Asked for. A steward answers by e-mail.').waitFor()
  })

  it('keeps a loan longer when nobody waits for it', async () => {
    const page = await house.open('member', '/loans', { size: PHONE })
    await page
      .getByRole('row', { name: /Demijohn 4.5 L, glass.*Out/ })
      .getByRole('link')
      .first()
      .click()
    await page.getByRole('button', { name: 'Keep it longer' }).click()
    const dialog = page.getByRole('dialog', { name: /longer$/ })
    await dialog.getByRole('radio', { name: '3 days' }).check({ force: true })
    await dialog.getByRole('button', { name: 'Keep it until then' }).click()
    await page.getByText(/^Yours until/).waitFor()
  })
})
