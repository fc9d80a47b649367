import { describe, expect, it } from 'vitest'
import { sql } from 'drizzle-orm'
import { ingredients, lots, moves } from '#server/db/schema/larder'
import { members } from '#server/db/schema/people'
import { seedDemo } from '#server/db/seed/index'
import { expiringLots, lowStock } from '#server/services/larder/low-stock'
import { listTabs } from '#server/services/larder/tabs'
import { testApp } from '#tests/support/test-app'

describe('the larder of the demo', () => {
  it('has something of everything, and its stock and tabs are those of its ledger', async () => {
    const app = testApp()
    await seedDemo(app.deps)
    const { db, deps } = app
    expect(db.select().from(ingredients).all().length).toBeGreaterThanOrEqual(20)
    expect(db.select().from(lots).all().length).toBeGreaterThanOrEqual(35)
    const low = lowStock(deps)
    expect(low.map((line) => line.name)).toContain('DAP')
    const dated = expiringLots(deps).map((lot) => lot.state)
    expect(dated).toContain('past')
    expect(dated).toContain('soon')
    const wrong = db
      .select({ id: lots.id })
      .from(lots)
      .where(
        sql`${lots.remainingMilli} <> (SELECT sum(${moves.deltaMilli}) FROM ${moves} WHERE ${moves.lotId} = ${lots.id})`,
      )
      .all()
    expect(wrong).toEqual([])
    const tabs = listTabs(deps).items
    const hester = db
      .select({ id: members.id })
      .from(members)
      .where(sql`${members.email} = 'member@barmhouse.example'`)
      .get()
    expect(tabs.find((tab) => tab.memberId === hester?.id)?.balanceMinor).toBeGreaterThan(0)
  })
})
