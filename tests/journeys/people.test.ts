import { desc, eq } from 'drizzle-orm'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { letters } from '#server/db/schema/notices'
import { openHouse, overflow, PHONE, violations, WIDE, type House } from '#tests/support/browser'

let house: House
beforeAll(async () => void (house = await openHouse()))
afterAll(async () => {
  const complaints = house.complaints()
  await house.close()
  expect(complaints).toEqual([])
})

/** The path of the link in the newest letter of a kind. */
function linkIn(kind: string): string {
  const letter = house.db
    .select()
    .from(letters)
    .where(eq(letters.kind, kind))
    .orderBy(desc(letters.queuedAt))
    .get()
  const path = /http:\/\/localhost:3000(\S+)/.exec(letter?.text ?? '')?.[1]
  if (!path) throw new Error(`no link in a letter of kind ${kind}`)
  return path
}

describe('people', () => {
  it('ask to join, are invited by a steward, come in, and sign in again', async () => {
    const door = await house.open(undefined, '/sign-in', { size: PHONE })
    await door.getByRole('link', { name: 'Ask to join' }).click()
    await door.getByLabel('Your name').fill('Wyn Farrow')
    await door.getByLabel('E-mail').fill('wyn@barmhouse.example')
    await door.getByRole('button', { name: 'Send it' }).click()
    await door.getByRole('heading', { name: 'Thank you' }).waitFor()
    expect(await overflow(door)).toBe(0)

    const desk = await house.open('steward', '/members', { size: WIDE })
    await desk.getByText('wyn@barmhouse.example').waitFor()
    expect(await violations(desk)).toEqual([])
    await desk.getByRole('button', { name: 'Invite' }).first().click()
    await desk.getByText('An invitation is on its way to Wyn Farrow.').waitFor()

    const guest = await house.open(undefined, linkIn('account-invitation'), { size: PHONE })
    await guest.getByLabel('Choose a password').fill('short')
    await guest.getByRole('button', { name: 'Join' }).click()
    await guest.getByRole('alert').getByText('Use at least 15 characters').waitFor()
    await guest.getByLabel('Choose a password').fill('nine grey herons over the weir')
    await guest.getByRole('button', { name: 'Join' }).click()
    await guest.waitForURL(house.url + '/')
    const me = await house.open(undefined, '/sign-in')
    await me.getByLabel('E-mail').fill('wyn@barmhouse.example')
    await me.getByLabel('Password', { exact: true }).fill('nine grey herons over the weir')
    await me.getByRole('button', { name: 'Sign in' }).click()
    await me.waitForURL(house.url + '/')
  })

  it('choose a new password by a link when the old one is forgotten', async () => {
    const page = await house.open(undefined, '/forgotten')
    await page.getByLabel('E-mail').fill('member2@barmhouse.example')
    await page.getByRole('button', { name: 'Send the link' }).click()
    await page.getByRole('heading', { name: 'Look in your mail' }).waitFor()
    await page.goto(house.url + linkIn('account-reset'))
    await page.getByLabel('New password').fill('four plum stones in the must')
    await page.getByRole('button', { name: 'Use this password' }).click()
    await page.getByRole('heading', { name: 'Your new password counts' }).waitFor()
    expect(await violations(page)).toEqual([])
  })

  it.each([
    ['/me', 'Me'],
    ['/space', 'Space'],
    ['/space?part=audit', 'Space'],
    ['/space?part=backups', 'Space'],
    ['/members', 'Members'],
  ])('read %s on a phone and in the dark', async (path, title) => {
    const page = await house.open('admin', path, { size: PHONE, dark: true })
    await page.getByRole('heading', { level: 1, name: title }).waitFor()
    await page.waitForLoadState('networkidle')
    expect(await violations(page)).toEqual([])
    expect(await overflow(page)).toBe(0)
  })
})
