import { fileURLToPath } from 'node:url'
import { chmodSync, mkdirSync } from 'node:fs'
import { dirname } from 'node:path'
import Database from 'better-sqlite3'
import { drizzle, type BetterSQLite3Database } from 'drizzle-orm/better-sqlite3'
import { migrate } from 'drizzle-orm/better-sqlite3/migrator'
import * as schema from './schema/index.ts'

export type Sqlite = Database.Database
export type Db = BetterSQLite3Database<typeof schema> & { $client: Sqlite }
/** What services write through: the database inside a transaction. */
export type Tx = Parameters<Parameters<Db['transaction']>[0]>[0]

const MIGRATIONS = fileURLToPath(new URL('./migrations', import.meta.url))

/** `Barm` in ASCII: tells this file from any other SQLite file. */
const APPLICATION_ID = 0x4261726d

/** Read back at start; a difference stops the server. WAL alone would quietly mean synchronous=NORMAL in this build. */
const PRAGMAS: [name: string, value: string | number, readsBack: string | number][] = [
  ['synchronous', 'FULL', 2],
  ['busy_timeout', 5000, 5000],
  ['recursive_triggers', 'ON', 1],
  ['trusted_schema', 'OFF', 0],
  ['cell_size_check', 'ON', 1],
  ['secure_delete', 'ON', 1],
  ['cache_size', -65_536, -65_536],
  ['temp_store', 'MEMORY', 2],
  ['journal_size_limit', 67_108_864, 67_108_864],
]

interface Options {
  /** Called with the text of every statement; the tests count with it. */
  onStatement?: (sql: string) => void
}

/** Opens a file (or a serialised image), applies what migrations are missing, and reads the settings back. */
export function openDb(source: string | Buffer, options: Options = {}): Db {
  const onDisk = typeof source === 'string' && source !== ':memory:'
  if (onDisk) mkdirSync(dirname(source), { recursive: true, mode: 0o700 })
  const { onStatement } = options
  const sqlite = new Database(
    source,
    onStatement ? { verbose: (sql?: unknown) => onStatement(String(sql)) } : undefined,
  )
  if (onDisk) chmodSync(source, 0o600)
  sqlite.pragma('journal_mode = WAL')
  for (const [name, value] of PRAGMAS) sqlite.pragma(`${name} = ${value}`)
  const db = drizzle({ client: sqlite, schema })
  if (typeof source === 'string') migrateDb(db)
  sqlite.pragma('foreign_keys = ON')
  checkSettings(sqlite, onDisk)
  return db
}

/**
 * Foreign keys are off while tables are rebuilt: inside the migrator's transaction the pragma would do nothing, and
 * dropping a parent would cascade to its children. Checked before they go on again.
 */
function migrateDb(db: Db) {
  const sqlite = db.$client
  sqlite.pragma('foreign_keys = OFF')
  sqlite.pragma(`application_id = ${APPLICATION_ID}`)
  migrate(db, { migrationsFolder: MIGRATIONS })
  const broken = sqlite.pragma('foreign_key_check') as unknown[]
  if (broken.length > 0) throw new Error(`Broken references after migration: ${broken.length} rows`)
}

function checkSettings(sqlite: Sqlite, onDisk: boolean) {
  const expected: [string, string | number][] = [
    ...PRAGMAS.map(([name, , back]) => [name, back] as [string, string | number]),
    ['foreign_keys', 1],
  ]
  if (onDisk) expected.push(['journal_mode', 'wal'])
  for (const [name, value] of expected) {
    const found: unknown = sqlite.pragma(name, { simple: true })
    if (found !== value) throw new Error(`SQLite setting ${name} is ${String(found)}, not ${value}`)
  }
}

/** One user action, one transaction: takes the write lock at once, so that what was checked is what is written. */
export const write = <T>(db: Db | Tx, action: (tx: Tx) => T): T =>
  db.transaction((tx) => action(tx), { behavior: 'immediate' })
