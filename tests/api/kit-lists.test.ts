import { parse } from 'csv-parse/sync'
import { describe, expect, it } from 'vitest'
import type { ItemImport } from '#shared/kit/item-contract'
import { items } from '#server/db/schema/kit'
import { makeItem, makeKind } from '#tests/support/makers/kit'
import { people } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'

function shelf() {
  const app = testApp()
  const cast = people(app)
  const kind = makeKind(app, cast.sam, { name: 'Demijohn 4.5 L' })
  const bring = (csv: string, query = '') =>
    cast.sam.agent.post(`/api/items/import${query}`).attach('file', Buffer.from(csv), 'items.csv')
  return { app, ...cast, kind, bring }
}

describe('the list of items as CSV', () => {
  it('reads back as it was, with no cell a spreadsheet would run', async () => {
    const { app, sam, ada, kind } = shelf()
    makeItem(app, sam, kind.id, { tag: 'DJ-01', shelf: '=1+1', note: '@SUM(A1)\n"quoted", it says' })
    makeItem(app, sam, kind.id, { tag: 'DJ-02', shelf: '+44', note: '-2' })
    expect((await ada.agent.get('/api/items.csv')).status).toBe(403)
    const reply = await sam.agent.get('/api/items.csv')
    expect(reply.status).toBe(200)
    expect(reply.type).toBe('text/csv')
    expect(reply.get('content-disposition')).toContain('items.csv')
    const rows = parse(reply.text)
    expect(rows).toHaveLength(3)
    for (const cell of rows.flat()) expect(cell).not.toMatch(/^[=+\-@\t\r]/)
    expect(rows[1]).toContain('\'@SUM(A1)\n"quoted", it says')
  })

  it('brought back in changes nothing', async () => {
    const { app, sam, kind, bring } = shelf()
    makeItem(app, sam, kind.id, { tag: 'DJ-01', shelf: '=1+1', note: 'two\nlines' })
    const csv = (await sam.agent.get('/api/items.csv')).text
    const reply = await bring(csv)
    expect(reply.body).toMatchObject({ added: 0, changed: 0, unchanged: 1, refused: 0 })
  })
})

describe('bringing in a list of items', () => {
  const csv = 'tag,kind,shelf,wild\nDJ-01,demijohn 4.5 l,A1,\nDJ-02,Demijohn 4.5 L,A1,yes\n'

  it('says first what would happen, and writes nothing', async () => {
    const { app, bring } = shelf()
    const dry = (await bring(csv, '?dryRun=1')).body as ItemImport
    expect(dry).toMatchObject({ dryRun: true, written: false, added: 2, refused: 0 })
    expect(dry.rows).toEqual([
      { row: 2, tag: 'DJ-01', outcome: 'add', message: null },
      { row: 3, tag: 'DJ-02', outcome: 'add', message: null },
    ])
    expect(app.db.select().from(items).all()).toEqual([])
  })

  it('adds, changes and leaves alone by tag', async () => {
    const { app, bring } = shelf()
    expect((await bring(csv)).body).toMatchObject({ written: true, added: 2 })
    const next =
      'tag,kind,shelf,wild\ndj-01,Demijohn 4.5 L,B2,\nDJ-02,Demijohn 4.5 L,A1,yes\nDJ-03,Demijohn 4.5 L,,\n'
    expect((await bring(next)).body).toMatchObject({ written: true, added: 1, changed: 1, unchanged: 1 })
    const rows = app.db.select().from(items).orderBy(items.tag).all()
    expect(rows.map((r) => [r.tag, r.shelf, r.wild])).toEqual([
      ['DJ-01', 'B2', false],
      ['DJ-02', 'A1', true],
      ['DJ-03', null, false],
    ])
  })

  it('is whole or not at all', async () => {
    const { app, bring } = shelf()
    const bad = 'tag,kind\nDJ-01,Demijohn 4.5 L\nDJ 02,Demijohn 4.5 L\nDJ-03,Sofa\nDJ-01,Demijohn 4.5 L\n'
    const reply = (await bring(bad)).body as ItemImport
    expect(reply).toMatchObject({ written: false, refused: 3 })
    expect(reply.rows.map((row) => row.outcome)).toEqual(['add', 'refused', 'refused', 'refused'])
    expect(app.db.select().from(items).all()).toEqual([])
  })

  it.each([
    ['no tag column', 'kind\nDemijohn 4.5 L\n'],
    ['a strange column', 'tag,kind,colour\nDJ-01,Demijohn 4.5 L,red\n'],
    ['uneven rows', 'tag,kind\nDJ-01\n'],
    ['a picture', '\xff\xd8\xff\xe0'],
    ['too many rows', `tag,kind\n${'DJ-01,Demijohn 4.5 L\n'.repeat(2001)}`],
  ])('refuses %s', async (_name, text) => {
    const { sam } = shelf()
    const reply = await sam.agent
      .post('/api/items/import')
      .attach('file', Buffer.from(text, text.startsWith('\xff') ? 'latin1' : 'utf8'), 'items.csv')
    expect(reply.status).toBe(400)
    expect(reply.body).toMatchObject({ code: 'invalid', errors: [{ path: 'file' }] })
  })
})
