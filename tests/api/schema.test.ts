import { getTableConfig, SQLiteTable } from 'drizzle-orm/sqlite-core'
import { is } from 'drizzle-orm'
import { describe, expect, it } from 'vitest'
import { emptyImage } from '#server/db/image'
import { openDb } from '#server/db/open'
import * as schema from '#server/db/schema/index'

const sqlite = openDb(emptyImage()).$client
const tables = Object.values(schema).filter((value) => is(value, SQLiteTable)) as SQLiteTable[]

interface Column {
  name: string
  type: string
  notnull: number
  pk: number
}
const liveColumns = (table: string) => sqlite.pragma(`table_info(${table})`) as Column[]
const liveTables = (
  sqlite.pragma('table_list') as { schema: string; name: string; type: string; strict: number }[]
).filter((t) => t.schema === 'main' && t.type === 'table' && !/^(sqlite_|__)/.test(t.name))

describe('the schema in code and the migrated database', () => {
  it('name the same tables', () => {
    const inCode = tables.map((table) => getTableConfig(table).name).sort()
    expect(inCode).toEqual(liveTables.map((t) => t.name).sort())
  })

  it.each(tables.map((table) => [getTableConfig(table).name, table] as const))(
    'agree on the columns of %s',
    (name, table) => {
      const inCode = getTableConfig(table).columns.map((c) => ({
        name: c.name,
        type: c.getSQLType().toUpperCase(),
        required: c.notNull || c.primary,
      }))
      const live = liveColumns(name).map((c) => ({
        name: c.name,
        type: c.type,
        required: c.notnull === 1 || c.pk > 0,
      }))
      const byName = (a: { name: string }, b: { name: string }) => (a.name < b.name ? -1 : 1)
      expect(inCode.sort(byName)).toEqual(live.sort(byName))
    },
  )

  it('holds nothing but STRICT tables', () => {
    expect(liveTables.filter((t) => t.strict !== 1).map((t) => t.name)).toEqual([])
  })

  it.each(liveTables.map((t) => t.name))(
    'finds rows by every foreign key of %s through an index',
    (table) => {
      const keys = sqlite.pragma(`foreign_key_list(${table})`) as { from: string }[]
      const firsts = (sqlite.pragma(`index_list(${table})`) as { name: string; partial: number }[]).map(
        ({ name, partial }) => {
          const first = (sqlite.pragma(`index_info(${name})`) as { name: string }[])[0]?.name ?? ''
          const sql = sqlite.prepare('SELECT sql FROM sqlite_schema WHERE name = ?').pluck().get(name)
          // A partial index finds every reference only when all it leaves out are nulls.
          return partial === 0 || String(sql).endsWith(`WHERE ${first} IS NOT NULL`) ? first : undefined
        },
      )
      for (const key of keys) expect(firsts, `${table}.${key.from}`).toContain(key.from)
    },
  )

  it('counts the serviceable items of a kind by searching indexes', () => {
    const plan = sqlite
      .prepare('EXPLAIN QUERY PLAN SELECT count(*) FROM serviceable_items WHERE kind_id = ? AND wild = 0')
      .all('k') as { detail: string }[]
    const steps = plan.map((step) => step.detail).join('\n')
    expect(steps).toMatch(/SEARCH i USING .*INDEX items_in_service/)
    expect(steps).toMatch(/SEARCH f USING .*INDEX faults_blocking/)
    expect(steps).not.toMatch(/SCAN [if]\b/)
  })
})
