import { createHash } from 'node:crypto'
import { describe, expect, it } from 'vitest'
import type { ImportReport } from '#shared/larder/contract'
import { lots } from '#server/db/schema/larder'
import { makeIngredient, makeLot } from '#tests/support/larder'
import { people } from '#tests/support/people'
import { testApp, type TestApp } from '#tests/support/test-app'

const digestOf = (app: TestApp) =>
  createHash('sha256')
    .update(
      JSON.stringify(
        ['lots', 'moves', 'ingredients', 'settlements', 'idempotency_keys'].map((table) =>
          app.db.$client.prepare(`SELECT * FROM ${table}`).all(),
        ),
      ),
    )
    .digest('hex')

const sheet = [
  'Ingredient,Quantity,Unit,Cost,Best before,Shelf,Colour',
  'heather honey,1.5,kg,18.20,31/12/2032,A1,amber',
  'Crown cap,200,each,4,,C3,',
].join('\r\n')

function larder() {
  const app = testApp()
  makeIngredient(app, { name: 'Heather honey' })
  makeIngredient(app, { name: 'Crown cap', unit: 'each', kind: 'closure' })
  return { app, ...people(app) }
}

describe('importing lots', () => {
  it('shows row by row what would happen, and writes nothing', async () => {
    const { app, sam } = larder()
    const before = digestOf(app)
    const reply = await sam.agent
      .post('/api/lots/import?dryRun=1')
      .attach('file', Buffer.from(`${sheet}\r\nMoon dust,1,g,,,,`), 'lots.csv')
    expect(reply.status).toBe(200)
    expect(reply.body).toMatchObject({
      dryRun: true,
      added: 2,
      problems: 1,
      ignoredColumns: ['colour'],
      rows: [
        { line: 2, outcome: 'add', ingredient: 'Heather honey', quantity: 1500, unit: 'g', costMinor: 1820 },
        { line: 3, outcome: 'add', quantity: 200, costMinor: 400, shelf: 'C3' },
        { line: 4, outcome: 'problem', messages: [{ column: 'ingredient' }] },
      ],
    })
    expect(digestOf(app)).toBe(before)
  })

  it('adds all rows or none', async () => {
    const { app, sam } = larder()
    const send = (text: string) => sam.agent.post('/api/lots/import').type('text/csv').send(text)
    const refused = await send(`${sheet}\nMoon dust,1,g,,,,`)
    expect(refused.status).toBe(400)
    expect(refused.body).toMatchObject({
      code: 'invalid',
      errors: [{ path: 'rows.4.ingredient' }],
      rows: [{ line: 4 }],
    })
    expect(app.db.select().from(lots).all()).toEqual([])
    const done = await send(sheet)
    expect(done.body).toMatchObject({ dryRun: false, added: 2, problems: 0 })
    expect(app.db.select().from(lots).all()).toHaveLength(2)
  })

  it('adds a file sent twice with one key only once', async () => {
    const { app, sam } = larder()
    const send = () =>
      sam.agent
        .post('/api/lots/import')
        .set('Idempotency-Key', 'k')
        .attach('file', Buffer.from(sheet), 'a.csv')
    await send()
    expect((await send()).get('idempotency-replayed')).toBe('true')
    expect(app.db.select().from(lots).all()).toHaveLength(2)
  })

  it('reads semicolons with a mark in front, and the Western code page', async () => {
    const { app, sam } = larder()
    makeIngredient(app, { name: 'Crème de sureau', unit: 'ml', kind: 'juice' })
    const text = '\uFEFFingredient;quantity;unit\r\n"Heather honey";1,5;kg\r\n'
    const bom = await sam.agent
      .post('/api/lots/import?dryRun=true')
      .attach('file', Buffer.from(text), 'a.csv')
    expect((bom.body as ImportReport).rows[0]).toMatchObject({ outcome: 'add', quantity: 1500 })
    const western = Buffer.from('ingredient\tquantity\nCr\xe8me de sureau\t700\n', 'latin1')
    const latin = await sam.agent.post('/api/lots/import?dryRun=1').attach('file', western, 'a.csv')
    expect((latin.body as ImportReport).rows[0]).toMatchObject({ outcome: 'add', quantity: 700 })
  })

  it.each([
    ['nothing', ''],
    ['a row with a stray comma', 'ingredient,quantity\nHeather honey,1,5'],
    ['no quantity column', 'ingredient,shelf\nHeather honey,A1'],
    ['an open quotation mark', 'ingredient,quantity\n"Heather honey,1'],
    ['bytes that are no text', '\u0000\u0001\u0002'],
    ['too many rows', `ingredient,quantity\n${'Heather honey,1\n'.repeat(1001)}`],
  ])('refuses %s', async (_name, text) => {
    const { app, sam } = larder()
    const reply = await sam.agent.post('/api/lots/import').attach('file', Buffer.from(text), 'a.csv')
    expect(reply.status).toBe(400)
    expect(reply.body).toMatchObject({ errors: [{ path: 'file' }] })
    expect(app.db.select().from(lots).all()).toEqual([])
  })

  it('is for stewards, wants a file, and takes bare CSV nowhere else', async () => {
    const { ada, sam } = larder()
    expect(
      (await ada.agent.post('/api/lots/import').attach('file', Buffer.from(sheet), 'a.csv')).status,
    ).toBe(403)
    expect((await sam.agent.post('/api/lots/import')).status).toBe(400)
    expect((await sam.agent.post('/api/lots').type('text/csv').send(sheet)).status).toBe(415)
  })
})

describe('exporting lots', () => {
  it('defuses formulas, and what it writes can be read in again', async () => {
    const { app, ada, sam } = larder()
    const trap = makeIngredient(app, { name: '=HYPERLINK("x")' })
    makeLot(app, sam, trap, {
      quantity: 12.5,
      costMinor: 305,
      donor: '+44 a friend',
      shelf: '@home',
      lotCode: '-7',
    })
    expect((await ada.agent.get('/api/lots.csv')).status).toBe(403)
    const file = await sam.agent.get('/api/lots.csv')
    expect(file.type).toBe('text/csv')
    expect(file.get('content-disposition')).toBe('attachment; filename=lots-2031-05-06.csv')
    expect(file.text).toContain("'@home,'+44 a friend,'-7")
    expect(file.text).not.toMatch(/(^|,)"?[=+@-][^,]/m)
    const again = await sam.agent.post('/api/lots/import?dryRun=1').type('text/csv').send(file.text)
    expect((again.body as ImportReport).rows).toMatchObject([
      {
        outcome: 'add',
        ingredient: '=HYPERLINK("x")',
        quantity: 12.5,
        costMinor: 305,
        donor: '+44 a friend',
        shelf: '@home',
        lotCode: '-7',
      },
    ])
  })
})
