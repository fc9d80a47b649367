import { existsSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import express, { Router, type RequestHandler } from 'express'

export const CLIENT_DIR = fileURLToPath(new URL('../../dist/client', import.meta.url))

/** The built client: hashed files for a year, the page itself asked for again each time, with this answer's nonce in it. */
export function staticClient(dir = CLIENT_DIR): Router {
  const router = Router()
  const page = join(dir, 'index.html')
  const html = existsSync(page) ? readFileSync(page, 'utf8') : undefined
  router.use('/assets', precompressed(dir))
  router.use(
    '/assets',
    express.static(join(dir, 'assets'), { immutable: true, maxAge: '1y', fallthrough: false, index: false }),
  )
  router.use(express.static(dir, { maxAge: '1h', index: false }))
  router.get('/{*path}', (_req, res) => {
    res.setHeader('Cache-Control', 'no-cache')
    if (html === undefined)
      return res.status(503).type('text').send('The client is not built yet. Run: npm start')
    return res.type('html').send(html.replaceAll('__CSP_NONCE__', res.locals.nonce))
  })
  return router
}

const TYPES: Record<string, string> = {
  '.js': 'text/javascript; charset=utf-8',
  '.css': 'text/css; charset=utf-8',
  '.svg': 'image/svg+xml',
  '.wasm': 'application/wasm',
}

/** Sends the `.br` file that the build left beside a script or style, where the browser takes it. */
const precompressed =
  (dir: string): RequestHandler =>
  (req, res, next) => {
    const type = TYPES[/\.\w+$/.exec(req.path)?.[0] ?? '']
    if (!type || !/^\/[\w.-]+$/.test(req.path) || !req.acceptsEncodings('br')) return next()
    const file = join(dir, 'assets', `${req.path}.br`)
    if (!existsSync(file)) return next()
    res
      .setHeader('Content-Type', type)
      .setHeader('Content-Encoding', 'br')
      .setHeader('Vary', 'Accept-Encoding')
    res.sendFile(file, { immutable: true, maxAge: '1y' })
  }
