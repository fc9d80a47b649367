import { execFileSync } from 'node:child_process'
import { mkdtempSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { labelOf, strengthWords } from '#shared/batches/label'
import { day } from '#shared/time/day'
import { ask, makeCyser, makeLarder, makeShelf } from '#tests/support/makers/batches'
import { people } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'

/** A reader of PDF files, where the machine has one: without it the words in the file cannot be looked at. */
const hasReader = (() => {
  try {
    execFileSync('pdftotext', ['-v'], { stdio: 'ignore' })
    return true
  } catch {
    return false
  }
})()

function textOf(pdf: Buffer): string {
  const file = join(mkdtempSync(join(tmpdir(), 'barmhouse-label-')), 'labels.pdf')
  writeFileSync(file, pdf)
  return execFileSync('pdftotext', ['-layout', file, '-'], { encoding: 'utf8' })
}

async function house() {
  const app = testApp()
  const cast = people(app)
  makeShelf(app)
  const larder = makeLarder(app, cast.sam)
  const batch = await makeCyser(cast.ada, larder, {
    name: 'Łódź windfall, café style',
    og: 1.07,
    sulphiteMgPerLitre: 40,
    recipe: [
      { ingredientId: larder.juice, ml: 3600 },
      { name: 'Barley malt', grams: 200, allergens: ['cereals-with-gluten'] },
      { ingredientId: larder.corks, each: 1, stage: 'bottling', perBottle: true },
    ],
  })
  const path = `/api/batches/${batch.id}`
  const reading = { at: app.clock.now(), gravity: 1.001, temperatureC: 20 }
  await ask(cast.ada.agent.post(`${path}/readings`).send(reading), 201)
  const sheet = (query = '') => cast.ada.agent.get(`${path}/label.pdf${query}`).buffer(true)
  return { ...cast, path, sheet }
}

describe('a label', () => {
  const facts = {
    name: 'Windfall',
    style: 'cyser' as const,
    maker: 'Ada Marsh',
    abvPercent: 9.04,
    bottledOn: day('2031-11-08'),
    bottleMl: 750,
    ingredients: [
      { name: 'Apple juice', allergens: [] },
      { name: 'Barley malt', allergens: ['cereals-with-gluten' as const] },
      { name: 'Milk sugar', allergens: ['milk' as const] },
    ],
    sulphiteMgPerLitre: 0,
    carbonated: false,
  }
  const text = (runs: { text: string }[]) => runs.map((run) => run.text).join('')

  it('gives the strength as an estimate, in whole per cent', () => {
    expect(strengthWords(9.04)).toBe('about 9 % vol')
    expect(strengthWords(0.8)).toBe('under 1.2 % vol')
    expect(strengthWords(undefined)).toBeUndefined()
    expect(labelOf(facts).what).toBe('Apple and honey mead, about 9 % vol')
    expect(labelOf({ ...facts, abvPercent: undefined }).what).toBe('Apple and honey mead')
  })

  it('puts what may harm in bold, and names its group where the name does not', () => {
    const { ingredients } = labelOf(facts)
    expect(text(ingredients)).toBe('Ingredients: apple juice, barley malt (cereals with gluten), milk sugar.')
    expect(ingredients.filter((run) => run.bold).map((run) => run.text)).toEqual([
      'barley malt',
      'cereals with gluten',
      'milk sugar',
    ])
  })

  it.each([
    [0, undefined],
    [10, undefined],
    [10.1, 'Contains sulphites.'],
  ])('with %d mg/L of sulphite says %s', (sulphiteMgPerLitre, words) => {
    // Above 10 mg/L: Regulation (EU) No 1169/2011, Annex II, kept in UK law.
    const { sulphites } = labelOf({ ...facts, sulphiteMgPerLitre })
    expect(sulphites && text(sulphites)).toBe(words)
  })

  it('says when it is under pressure, and that it is not for sale', () => {
    expect(labelOf({ ...facts, carbonated: true }).keep).toMatch(/^Under pressure/)
    expect(labelOf(facts).notForSale).toBe('Home made. Not for sale.')
    expect(labelOf({ ...facts, ingredients: [] }).ingredients).toEqual([])
  })
})

describe('a sheet of labels', () => {
  it('is one page of A4 and the same file each time', async () => {
    const { sheet } = await house()
    const reply = await sheet()
    expect(reply.status).toBe(200)
    expect(reply.type).toBe('application/pdf')
    expect(reply.get('content-disposition')).toContain('.pdf')
    const pdf = reply.body as Buffer
    expect(pdf.subarray(0, 5).toString()).toBe('%PDF-')
    const latin = pdf.toString('latin1')
    expect(latin.match(/\/Type \/Page\b/g)).toHaveLength(1)
    expect(latin).toContain('/MediaBox [0 0 595.28 841.89]')
    expect(((await sheet()).body as Buffer).equals(pdf)).toBe(true)
  })

  it.each([
    ['?rows=0', 'rows'],
    ['?rows=99', 'rows'],
    ['?columns=5', 'columns'],
    ['?rows=two', 'rows'],
    ['?pages=2', 'pages'],
  ])('is refused for %s', async (query, at) => {
    const { sheet } = await house()
    const reply = await sheet(query).buffer(false)
    expect(reply.status).toBe(400)
    expect((reply.body as { errors: { path: string }[] }).errors.map(({ path }) => path)).toEqual([at])
  })

  it('is not for strangers', async () => {
    const { bo, path } = await house()
    expect((await bo.agent.get(`${path}/label.pdf`)).status).toBe(404)
  })

  it.skipIf(!hasReader).each([
    ['', 8],
    ['?rows=1&columns=1', 1],
    ['?rows=8&columns=4', 32],
  ])('%s carries every line on each of its labels', async (query, labels) => {
    const { sheet } = await house()
    const text = textOf((await sheet(query)).body as Buffer)
    const squashed = text.replace(/\s+/g, ' ')
    const times = (words: RegExp) => squashed.match(words)?.length ?? 0
    expect(times(/Not for sale\./g)).toBeGreaterThanOrEqual(labels === 32 ? 1 : labels)
    expect(times(/sulphites/g)).toBe(labels)
    expect(times(/Łódź/g)).toBe(labels)
    expect(times(/about/g)).toBe(labels)
    expect(squashed).not.toContain('cork')
  })
})
