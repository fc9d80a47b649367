import type { Router } from 'vue-router'
import { type Role, roleCovers } from '#shared/people/vocabulary'

/** What the guards need to know of the session. */
export interface Gate {
  /** Asks the server who is here, once. */
  ready: () => Promise<void>
  role: () => Role | undefined
}

/** A page of this site to go to after signing in; anything else is Today. `//x`, `/\x` and `https:x` are other sites. */
export function safeNext(wanted: unknown): string {
  if (typeof wanted !== 'string' || !/^\/(?![/\\])[^\\\p{Cc}]*$/u.test(wanted)) return '/'
  const url = new URL(wanted, location.origin)
  return url.origin === location.origin ? url.pathname + url.search + url.hash : '/'
}

export function guard(router: Router, gate: Gate) {
  router.beforeEach(async (to) => {
    const access = to.meta.access ?? 'member'
    await gate.ready()
    const role = gate.role()
    if (to.name === 'sign-in' && role !== undefined) return safeNext(to.query.next)
    if (access === 'anyone') return true
    if (role === undefined) {
      return { name: 'sign-in', query: to.fullPath === '/' ? {} : { next: to.fullPath } }
    }
    return (
      roleCovers(role, access) || { name: 'not-found', params: { anything: to.path.slice(1).split('/') } }
    )
  })

  router.afterEach((to, from, failure) => {
    if (failure) return
    document.title = titleOf(to.meta.title)
    if (from.matched.length > 0 && to.path !== from.path) void focusHeading()
  })
}

export const titleOf = (page: string | undefined) => (page ? `${page} · Barmhouse` : 'Barmhouse')

/** After a change of page the heading takes focus, so that a screen reader says where one is. */
async function focusHeading() {
  for (let tries = 0; tries < 20; tries += 1) {
    await new Promise((resolve) => setTimeout(resolve, 25))
    const heading = document.querySelector<HTMLElement>('main h1')
    if (heading) {
      heading.tabIndex = -1
      heading.focus({ preventScroll: true })
      return
    }
  }
}
