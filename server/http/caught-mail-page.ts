import { Router, type Response } from 'express'
import { roleCovers } from '#shared/people/vocabulary'
import type { CaughtLetter, CaughtRow } from '#shared/notices/contract'
import type { Deps } from '../deps.ts'
import { AppError, notFound } from '../errors.ts'
import { getCaught, listCaught } from '../services/mail-record.ts'

const escapeHtml = (text: string) => text.replace(/[&<>"']/g, (c) => `&#${c.charCodeAt(0)};`)

const STYLE = `
:root{color-scheme:light dark;--paper:#FBF8F2;--ink:#20292B;--quiet:#566063;--line:#CFC6B4;--barm:#1C5F5A;--well:#F3EDE1}
@media (prefers-color-scheme:dark){:root{--paper:#171C1D;--ink:#ECE7DC;--quiet:#A9B1AE;--line:#4A5455;--barm:#7CC6BD;--well:#111516}}
body{margin:0 auto;max-width:800px;padding:24px 16px;background:var(--paper);color:var(--ink);font:16px/1.5 system-ui,sans-serif}
a{color:var(--barm)}h1{font-size:28px;line-height:1.2}p{margin:8px 0}.quiet{color:var(--quiet)}
ol{list-style:none;padding:0;border-top:2px solid var(--line)}li{border-bottom:1px solid var(--line)}
li a{display:block;padding:12px 0;text-decoration:none;overflow-wrap:anywhere}li b{display:block}
pre{background:var(--well);padding:16px;border-radius:8px;white-space:pre-wrap;overflow-wrap:anywhere;font:16px/1.5 system-ui,sans-serif}
table{border-collapse:collapse;font-size:14px}th,td{text-align:left;vertical-align:top;padding:2px 16px 2px 0;overflow-wrap:anywhere}
th{font-weight:400;color:var(--quiet)}summary{cursor:pointer;padding:8px 0}`

/** Letters that were caught instead of sent, as a plain page for admins. Asked for JSON, it answers with JSON. */
export function caughtMailPage(deps: Deps): Router {
  const router = Router()
  router.use((_req, res, next) => {
    if (!deps.mailCaught) throw notFound('That address')
    const { user } = res.locals
    if (!user) return void refuse(res, 401, 'Sign in as an admin to read caught letters.')
    if (user.status !== 'active' || !roleCovers(user.role, 'admin'))
      return void refuse(res, 403, 'Only an admin can read caught letters.')
    res.set('Cache-Control', 'no-store')
    next()
  })
  router.get('/', (req, res) => {
    const cursor = typeof req.query.cursor === 'string' ? req.query.cursor : undefined
    const page = listCaught(deps, { limit: 50, cursor })
    res.format({
      html: () => void res.send(shell(res, 'Caught letters', list(page.items, page.nextCursor))),
      json: () => void res.json(page),
    })
  })
  router.get('/:id', (req, res) => {
    const letter = getCaught(deps, String(req.params.id))
    res.format({
      html: () => void res.send(shell(res, letter.subject, inFull(letter))),
      json: () => void res.json(letter),
    })
  })
  router.get('/:id/html', (req, res) => {
    const { html } = getCaught(deps, String(req.params.id))
    res.set('Content-Security-Policy', "default-src 'none'; style-src 'unsafe-inline'; sandbox allow-popups")
    res.type('html').send(html)
  })
  return router
}

function refuse(res: Response, status: 401 | 403, words: string) {
  const error = new AppError(status === 401 ? 'signed-out' : 'forbidden', words)
  res.status(status).format({
    html: () =>
      void res.send(
        shell(res, 'Caught letters', `<p>${words}</p><p><a href="/sign-in?next=/dev/mail">Sign in</a></p>`),
      ),
    default: () => {
      throw error
    },
  })
}

const shell = (res: Response, title: string, body: string) =>
  `<!doctype html><html lang="en-GB"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width,initial-scale=1">
<title>${escapeHtml(title)} · Barmhouse</title><style nonce="${res.locals.nonce}">${STYLE}</style></head><body><main>
<h1>${escapeHtml(title)}</h1>${body}</main></body></html>`

const list = (rows: CaughtRow[], nextCursor: string | null) =>
  rows.length === 0
    ? '<p>No letter has been caught yet. Book something, or have a booking approved, and look again.</p>'
    : `<p class="quiet">No relay is named in SMTP_URL, so letters end here, newest first.</p><ol>${rows
        .map(
          ({ id, to, subject, receivedAt }) =>
            `<li><a href="/dev/mail/${id}"><b>${escapeHtml(subject)}</b><span class="quiet">To ${escapeHtml(to)}, ${when(receivedAt)}</span></a></li>`,
        )
        .join(
          '',
        )}</ol>${nextCursor ? `<p><a href="/dev/mail?cursor=${encodeURIComponent(nextCursor)}">Older letters</a></p>` : ''}`

const inFull = (letter: CaughtLetter) =>
  `<p class="quiet">To ${escapeHtml(letter.to)}, ${when(letter.receivedAt)}</p>
<pre tabindex="0">${withLinks(letter.text)}</pre>
<p><a href="/dev/mail/${letter.id}/html">The same letter as HTML</a></p>
<details><summary>Headers</summary><table>${letter.headers
    .map(([name, value]) => `<tr><th scope="row">${escapeHtml(name)}</th><td>${escapeHtml(value)}</td></tr>`)
    .join('')}</table></details>
<p><a href="/dev/mail">All caught letters</a></p>`

const when = (at: string) => `${at.slice(0, 10)} ${at.slice(11, 16)} UTC`

const withLinks = (text: string) =>
  escapeHtml(text).replace(/https?:\/\/[^\s&<>]+/g, (url) => `<a href="${url}">${url}</a>`)
