import { describe, expect, it } from 'vitest'
import { faults, items, kinds } from '#server/db/schema/kit'
import { seedDemo } from '#server/db/seed/index'
import { person } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'
import type { Kind } from '#shared/kit/kind-contract'

describe('the shelves of the demo space', () => {
  it('hold fourteen kinds and sixty items, in every state', async () => {
    const app = testApp({ demo: true })
    await seedDemo(app.deps)
    expect(app.db.select().from(kinds).all()).toHaveLength(14)
    const all = app.db.select().from(items).all()
    expect(all).toHaveLength(60)
    expect(new Set(all.map((item) => item.status))).toEqual(
      new Set(['in-service', 'repair', 'retired', 'lost']),
    )
    expect(new Set(all.map((item) => item.hygiene))).toEqual(new Set(['dirty', 'clean', 'sanitised']))
    expect(
      app.db
        .select()
        .from(faults)
        .all()
        .filter((fault) => fault.resolvedAt === null && fault.blocking),
    ).toHaveLength(2)
    const { agent } = person(app, 'Ada Marsh')
    const shelf = (await agent.get('/api/kinds')).body as { items: Kind[] }
    const demijohns = shelf.items.find((kind) => kind.name.startsWith('Demijohn 4.5'))
    expect(demijohns?.items).toEqual({ total: 10, serviceable: 9 })
    const buckets = shelf.items.find((kind) => kind.name.startsWith('Bucket'))
    expect(buckets?.items).toEqual({ total: 5, serviceable: 4 })
  })
})
