import { sql } from 'drizzle-orm'
import type { Db } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { meOf } from './people.ts'

/** Never leaves, not even to its owner: it opens doors. */
const SECRET = /password_hash|digest|secret|token|^data$/

interface Reference {
  table: string
  column: string
}

/** Every column of every table that points at a member, read from the database itself: a new table is in by being there. */
export function memberColumns(db: Db): Reference[] {
  return db.all<Reference>(sql`
    SELECT m.name AS "table", f."from" AS "column"
    FROM sqlite_schema m, pragma_foreign_key_list(m.name) f
    WHERE m.type = 'table' AND f."table" = 'members'
    ORDER BY 1, 2`)
}

/** Whole rows are a member's where they own them; where they only acted (approved, checked in), it says that they did. */
const owns = (column: string) => column === 'member_id' || column === 'owner_id'

/** Everything held about a member, by table, without secrets. */
export function exportOf(deps: Deps, memberId: string) {
  const owned: Record<string, unknown[]> = {}
  const acted: Record<string, unknown[]> = {}
  for (const { table, column } of memberColumns(deps.db)) {
    const rows = deps.db.all<Record<string, unknown>>(
      sql`SELECT * FROM ${sql.identifier(table)} WHERE ${sql.identifier(column)} = ${memberId}`,
    )
    if (rows.length === 0) continue
    if (owns(column)) owned[table] = rows.map(withoutSecrets)
    else acted[`${table}.${column}`] = rows.map((row) => ({ id: row.id ?? null }))
  }
  return { exportedAt: deps.clock.now(), member: meOf(deps, memberId), owned, acted }
}

const withoutSecrets = (row: Record<string, unknown>) =>
  Object.fromEntries(Object.entries(row).filter(([column]) => !SECRET.test(column)))
