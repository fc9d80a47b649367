import { Router } from 'express'
import type { Deps } from '../deps.ts'

/** `/healthz`: the process is up. `/readyz`: it can do its work. */
export function health(deps: Deps): Router {
  const router = Router()
  router.get('/healthz', (_req, res) => void res.set('Cache-Control', 'no-store').json({ ok: true }))
  router.get('/readyz', (_req, res) => {
    const checks = { database: databaseWritable(deps), mail: deps.mailAlive() }
    const ok = Object.values(checks).every(Boolean)
    res
      .set('Cache-Control', 'no-store')
      .status(ok ? 200 : 503)
      .json({ ok, ...checks })
  })
  return router
}

function databaseWritable(deps: Deps): boolean {
  try {
    deps.db.$client.exec('BEGIN IMMEDIATE; ROLLBACK')
    return true
  } catch {
    return false
  }
}
