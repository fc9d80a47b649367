import type { Statement } from 'better-sqlite3'
import type { Db, Sqlite } from './open.ts'

const kept = new WeakMap<Sqlite, Map<string, Statement>>()

/**
 * A statement of hand-written SQL, prepared once per database. For the questions asked all day long; everything else goes
 * through the query builder. Runs on the connection's open transaction, if there is one.
 */
export function prepared<Bind extends object, Row>(db: Db, sql: string): Statement<[Bind], Row> {
  const client = db.$client
  const statements = kept.get(client) ?? new Map<string, Statement>()
  kept.set(client, statements)
  let statement = statements.get(sql)
  if (!statement) statements.set(sql, (statement = client.prepare(sql)))
  return statement as Statement<[Bind], Row>
}
