import { z } from 'zod'
import type { Endpoint, Endpoints } from '#shared/http/endpoint'
import { PROBLEM_STATUS, PROBLEM_TITLE, type ProblemCode } from '#shared/http/problem'

const escapeHtml = (text: string) => text.replace(/[&<>"']/g, (c) => `&#${c.charCodeAt(0)};`)

const STYLE = `
:root{color-scheme:light dark;--paper:#FBF8F2;--ink:#20292B;--quiet:#566063;--line:#CFC6B4;--barm:#1C5F5A;--well:#F3EDE1}
@media (prefers-color-scheme:dark){:root{--paper:#171C1D;--ink:#ECE7DC;--quiet:#A9B1AE;--line:#4A5455;--barm:#7CC6BD;--well:#111516}}
body{margin:0 auto;max-width:1000px;padding:32px 16px;background:var(--paper);color:var(--ink);font:16px/1.5 system-ui,sans-serif}
a{color:var(--barm)}h2{border-bottom:2px solid var(--line);margin-top:48px}
details{border-bottom:1px solid var(--line);padding:8px 0}summary{cursor:pointer;padding:8px 0}
code,pre{font:14px/1.5 ui-monospace,monospace}pre{background:var(--well);padding:12px;overflow:auto;border-radius:8px}
.who{color:var(--quiet)}table{border-collapse:collapse}td,th{text-align:left;padding:4px 16px 4px 0}`

/** A page to read the API by: no script, nothing from another host. */
export function docsPage(contracts: Record<string, Endpoints>): string {
  const domains = Object.keys(contracts)
  return `<!doctype html><html lang="en-GB"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width,initial-scale=1">
<title>Barmhouse API</title><style nonce="__CSP_NONCE__">${STYLE}</style></head><body><main>
<h1>Barmhouse API</h1>
<p>JSON under <code>/api</code>, with the cookie that signing in gives. Days are <code>YYYY-MM-DD</code> in the space’s time zone, instants are ISO 8601 in UTC.
The same as a document for programs: <a href="/api/openapi.json">OpenAPI 3.1</a>.</p>
<p>A creating POST takes an <code>Idempotency-Key</code>. An edit wants <code>If-Match</code> with the version from <code>ETag</code>. Lists take <code>?limit=</code> (50, at most 200) and <code>?cursor=</code>.</p>
<nav aria-label="Domains"><ul>${domains.map((name) => `<li><a href="#${name}">${name}</a></li>`).join('')}<li><a href="#problems">Problems</a></li></ul></nav>
${domains.map((name) => section(name, contracts[name] ?? {})).join('\n')}
${problems()}
</main></body></html>`
}

const section = (name: string, endpoints: Endpoints) =>
  `<section aria-labelledby="${name}"><h2 id="${name}">${name}</h2>${Object.values(endpoints).map(entry).join('')}</section>`

function entry(spec: Endpoint): string {
  const parts = [
    part('Query', spec.query, 'input'),
    part('Body', spec.body, 'input'),
    spec.upload ? `<p>One file in the multipart field <code>${spec.upload}</code>.</p>` : '',
    part(`Reply ${spec.status ?? 200}`, spec.reply ?? undefined, 'output'),
    spec.file ? `<p>Replies with a file: <code>${spec.file}</code>.</p>` : '',
  ]
  return `<details><summary><code><b>${spec.method}</b> /api${escapeHtml(spec.path)}</code> <span class="who">${spec.access}</span><br>${escapeHtml(spec.summary)}</summary>${parts.join('')}</details>`
}

function part(title: string, schema: z.ZodType | undefined, io: 'input' | 'output'): string {
  if (!schema) return ''
  const { $schema: _dialect, ...json } = z.toJSONSchema(schema, { io, unrepresentable: 'any' })
  return `<h3>${title}</h3><pre tabindex="0">${escapeHtml(JSON.stringify(json, null, 2))}</pre>`
}

const problems = () =>
  `<section aria-labelledby="problems"><h2 id="problems">Problems</h2><p>Refusals are <code>application/problem+json</code> with one of these codes.</p>
<table><thead><tr><th scope="col">Code</th><th scope="col">Status</th><th scope="col">Meaning</th></tr></thead><tbody>${Object.entries(
    PROBLEM_STATUS,
  )
    .map(
      ([code, status]) =>
        `<tr id="${code}"><td><code>${code}</code></td><td>${status}</td><td>${PROBLEM_TITLE[code as ProblemCode]}</td></tr>`,
    )
    .join('')}</tbody></table></section>`
