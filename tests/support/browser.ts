import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import AxeBuilder from '@axe-core/playwright'
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core'
import { eq } from 'drizzle-orm'
import { members } from '#server/db/schema/people'
import { seedDemo } from '#server/db/seed/index'
import { findChromium } from './chromium.mjs'
import { openSession } from './people.ts'
import { testClock } from './clock.ts'
import { testApp, type TestApp } from './test-app.ts'

const FLAGS = [
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
  ...(process.getuid?.() === 0 ? ['--no-sandbox'] : []),
]

export const PHONE = { width: 390, height: 844 }
export const WIDE = { width: 1280, height: 900 }

interface Look {
  size?: { width: number; height: number }
  dark?: boolean
}

export interface House extends TestApp {
  url: string
  /** A page of a fresh browser context, signed in as the demo person with this login, or as nobody. */
  open: (login: string | undefined, path: string, look?: Look) => Promise<Page>
  /** What no page may do: break the content policy, throw, or ask another host. */
  complaints: () => string[]
  close: () => Promise<void>
}

/** The built application with the demo space in it, on a port of its own, and a real browser. */
export async function openHouse(): Promise<House> {
  // The browser counts days by its own clock, so the house stands at the real moment.
  const app = testApp({ demo: true, clock: testClock(new Date().toISOString()) })
  await seedDemo(app.deps)
  const server = createServer(app.app)
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  const url = `http://127.0.0.1:${(server.address() as AddressInfo).port}`
  const executablePath = findChromium()
  if (!executablePath) throw new Error('No Chromium: run npm test, or set CHROMIUM_PATH')
  const browser: Browser = await chromium.launch({ executablePath, args: FLAGS })
  const heard: string[] = []
  const contexts: BrowserContext[] = []

  async function open(login: string | undefined, path: string, { size = WIDE, dark = false }: Look = {}) {
    const context = await browser.newContext({
      viewport: size,
      colorScheme: dark ? 'dark' : 'light',
      reducedMotion: 'reduce',
      hasTouch: size.width < 640,
      locale: 'en-GB',
      timezoneId: 'Europe/London',
    })
    contexts.push(context)
    if (login) await context.addCookies([cookieOf(app, login, url)])
    const page = await context.newPage()
    page.on('pageerror', (error) => heard.push(`${page.url()}: ${error.message}`))
    page.on('console', (message) => {
      if (/Content Security Policy|\[Vue warn\]|Unhandled/.test(message.text()))
        heard.push(`${page.url()}: ${message.text()}`)
    })
    page.on('request', (request) => {
      if (!request.url().startsWith(url) && !/^(data|blob):/.test(request.url()))
        heard.push(`asked ${request.url()}`)
    })
    // The browser and the house agree on what day it is.
    await page.clock.setFixedTime(new Date(app.clock.now()))
    await page.goto(url + path)
    return page
  }

  async function close() {
    for (const context of contexts) await context.close()
    await browser.close()
    server.closeAllConnections()
    await new Promise((resolve) => server.close(resolve))
  }

  return { ...app, url, open, complaints: () => [...heard], close }
}

function cookieOf(app: TestApp, login: string, url: string) {
  const member = app.db
    .select({ id: members.id, role: members.role })
    .from(members)
    .where(eq(members.email, `${login}@barmhouse.example`))
    .get()
  if (!member) throw new Error(`nobody signs in as ${login}`)
  const [name = '', value = ''] = openSession(app, member.id, member.role).split('=')
  return { name, value, url, httpOnly: true, sameSite: 'Lax' as const }
}

/** What axe finds wrong with the page as it stands, one line a violation. */
export async function violations(page: Page): Promise<string[]> {
  const { violations } = await new AxeBuilder({ page })
    .withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'])
    .analyze()
  return violations.map((v) => `${v.id}: ${v.nodes.map((n) => n.target.join(' ')).join(', ')}`)
}

/** Pixels that the page is wider than its window: 0 where it reflows. */
export const overflow = (page: Page) =>
  page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth)
