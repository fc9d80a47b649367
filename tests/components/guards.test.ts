import { describe, expect, it } from 'vitest'
import { createMemoryHistory, createRouter } from 'vue-router'
import type { Role } from '#shared/people/vocabulary'
import { guard, safeNext } from '@/router/guards'
import { PATHS, routes } from '@/router/routes'

describe('the page to go to after signing in', () => {
  it.each([
    ['/kit/abc?from=2026-10-17#book', '/kit/abc?from=2026-10-17#book'],
    ['/', '/'],
    ['//evil.example', '/'],
    ['/\\evil.example', '/'],
    ['https://evil.example/', '/'],
    ['https:evil.example', '/'],
    ['javascript:alert(1)', '/'],
    ['/\tx', '/'],
    [undefined, '/'],
    [['/kit'], '/'],
  ])('%j leads to %s', (wanted, safe) => {
    expect(safeNext(wanted)).toBe(safe)
  })
  it('keeps an encoded slash inside this site', () => {
    expect(safeNext('/%2f%2fevil.example')).toBe('/%2f%2fevil.example')
  })
})

async function visit(path: string, role?: Role) {
  const empty = { template: '<p />' }
  const router = createRouter({
    history: createMemoryHistory(),
    routes: [
      ...routes.map((route) => ({ ...route, component: empty, props: false }) as (typeof routes)[number]),
      { name: 'desk-probe', path: '/probe', component: empty, meta: { title: 'Probe', access: 'steward' } },
    ],
  })
  guard(router, { ready: () => Promise.resolve(), role: () => role })
  await router.push(path)
  return router.currentRoute.value
}

describe('who may come in', () => {
  it('leads a stranger to the door, and remembers where they were going', async () => {
    const { name, query } = await visit('/more?x=1')
    expect([name, query.next]).toEqual(['sign-in', '/more?x=1'])
  })
  it('leads a member past the door to the page they wanted', async () => {
    expect((await visit('/sign-in?next=/more', 'member')).fullPath).toBe('/more')
    expect((await visit('/sign-in?next=//evil.example', 'member')).path).toBe('/')
  })
  it('shows a member nothing where stewards work, and stewards all of it', async () => {
    expect((await visit('/probe', 'member')).name).toBe('not-found')
    expect((await visit('/probe', 'steward')).name).toBe('desk-probe')
    expect((await visit('/probe', 'admin')).name).toBe('desk-probe')
  })
  it('has one name for one address', () => {
    expect(new Set(Object.values(PATHS)).size).toBe(Object.keys(PATHS).length)
  })
})
