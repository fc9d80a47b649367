import { createHash } from 'node:crypto'
import {
  chmodSync,
  existsSync,
  mkdirSync,
  readdirSync,
  readFileSync,
  renameSync,
  rmSync,
  statSync,
  writeFileSync,
} from 'node:fs'
import { dirname, join, relative, sep } from 'node:path'
import Database from 'better-sqlite3'
import { daysBetween, type CalendarDay } from '#shared/time/day'
import { toInstant } from '#shared/time/instant'
import type { Sqlite } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { AppError } from '../errors.ts'

/**
 * A backup is one SQLite file: the whole database, and the uploaded files in a table of their own with their digests.
 * Any copy can be opened by any SQLite.
 */
const FILES_TABLE = `CREATE TABLE backup_files (path TEXT PRIMARY KEY, sha256 TEXT NOT NULL, bytes BLOB NOT NULL) STRICT`
const NAME = /^barmhouse-(\d{4}-\d{2}-\d{2})T(\d{2})(\d{2})(\d{2})Z\.db$/

const sha256 = (bytes: Buffer) => createHash('sha256').update(bytes).digest('hex')

export class BackupError extends Error {}

/**
 * Writes a backup to `file`: copied while the application runs, then opened and checked before it takes its name.
 * @throws BackupError when the copy does not pass its checks
 */
export async function backUpTo(sqlite: Sqlite, uploadsDir: string, file: string) {
  mkdirSync(dirname(file), { recursive: true, mode: 0o700 })
  const part = `${file}.part`
  rmSync(part, { force: true })
  await sqlite.backup(part)
  chmodSync(part, 0o600)
  const copy = new Database(part)
  try {
    copy.pragma('journal_mode = DELETE')
    copy.exec(FILES_TABLE)
    const add = copy.prepare('INSERT INTO backup_files VALUES (?, ?, ?)')
    copy.transaction(() => {
      for (const path of filesUnder(uploadsDir)) {
        const bytes = readFileSync(path)
        add.run(relative(uploadsDir, path).split(sep).join('/'), sha256(bytes), bytes)
      }
    })()
    check(copy)
  } finally {
    copy.close()
  }
  renameSync(part, file)
}

/** Whole pages, whole references, and every file as it was. */
function check(copy: Sqlite) {
  const integrity: unknown = copy.pragma('integrity_check', { simple: true })
  if (integrity !== 'ok') throw new BackupError(`the copy is damaged: ${String(integrity)}`)
  if ((copy.pragma('foreign_key_check') as unknown[]).length > 0)
    throw new BackupError('the copy has broken references')
  for (const row of copy.prepare('SELECT path, sha256, bytes FROM backup_files').iterate()) {
    const { path, sha256: expected, bytes } = row as { path: string; sha256: string; bytes: Buffer }
    if (sha256(bytes) !== expected) throw new BackupError(`a file in the copy is damaged: ${path}`)
  }
}

/**
 * Puts a backup in the place of the database and the uploads. What was there is kept beside it, with `.before-restore`.
 * The application must not be running.
 * @throws BackupError when the file is no backup of ours or does not pass its checks
 */
export function restoreFrom(file: string, databaseFile: string, uploadsDir: string) {
  if (!existsSync(file)) throw new BackupError(`${file} is not there`)
  const staged = `${databaseFile}.restoring`
  mkdirSync(dirname(databaseFile), { recursive: true, mode: 0o700 })
  writeFileSync(staged, readFileSync(file), { mode: 0o600 })
  const files: { path: string; bytes: Buffer }[] = []
  let copy: Sqlite | undefined
  try {
    copy = new Database(staged)
    const known = copy
      .prepare(`SELECT count(*) FROM sqlite_schema WHERE name IN ('backup_files', 'members')`)
      .pluck()
      .get()
    if (known !== 2) throw new BackupError(`${file} is not a Barmhouse backup`)
    check(copy)
    files.push(...(copy.prepare('SELECT path, bytes FROM backup_files').all() as typeof files))
    copy.exec('DROP TABLE backup_files')
    copy.exec('VACUUM')
  } catch (error) {
    copy?.close()
    rmSync(staged, { force: true })
    if (error instanceof BackupError) throw error
    throw new BackupError(`${file} is not a Barmhouse backup`)
  }
  copy.close()
  for (const path of [databaseFile, `${databaseFile}-wal`, `${databaseFile}-shm`])
    if (existsSync(path)) renameSync(path, `${path}.before-restore`)
  renameSync(staged, databaseFile)
  for (const { path, bytes } of files) {
    if (path.split('/').includes('..')) throw new BackupError(`a file in the copy has a bad name: ${path}`)
    const target = join(uploadsDir, path)
    mkdirSync(dirname(target), { recursive: true, mode: 0o700 })
    writeFileSync(target, bytes, { mode: 0o600 })
  }
  return { files: files.length }
}

function* filesUnder(dir: string): Generator<string> {
  if (!existsSync(dir)) return
  for (const entry of readdirSync(dir, { withFileTypes: true })) {
    const path = join(dir, entry.name)
    if (entry.isDirectory()) yield* filesUnder(path)
    else if (entry.isFile() && !entry.name.startsWith('.')) yield path
  }
}

/** Where the copies of this machine are kept: beside the database. */
const backupsDir = (deps: Deps) => join(dirname(deps.db.$client.name), 'backups')

/** Makes a copy in the usual place, then lets go of the ones that the rotation no longer keeps. */
export async function makeBackup(deps: Deps) {
  if (deps.db.$client.memory)
    throw new AppError(
      'wrong-state',
      'This database lives in memory: there is no file to keep copies beside.',
    )
  const madeAt = deps.clock.now()
  const name = `barmhouse-${madeAt.slice(0, 19).replaceAll(':', '')}Z.db`
  const file = join(backupsDir(deps), name)
  await backUpTo(deps.db.$client, deps.uploadsDir, file)
  for (const old of lettingGo(
    listBackups(deps).map((backup) => backup.name),
    madeAt,
  ))
    rmSync(join(backupsDir(deps), old))
  return { name, madeAt, bytes: statSync(file).size }
}

/** Copies kept on this machine, newest first. */
export function listBackups(deps: Deps) {
  const dir = backupsDir(deps)
  if (deps.db.$client.memory || !existsSync(dir)) return []
  return readdirSync(dir)
    .filter((name) => NAME.test(name))
    .sort()
    .reverse()
    .map((name) => ({ name, madeAt: madeAtOf(name), bytes: statSync(join(dir, name)).size }))
}

const madeAtOf = (name: string) => {
  const [, on, hour, minute, second] = NAME.exec(name) ?? []
  return toInstant(Date.parse(`${on}T${hour}:${minute}:${second}Z`))
}

/** What the rotation drops: it keeps every copy of a day, then one a day for a week, one a week for five, one a month for twelve. */
export function lettingGo(names: string[], now: string): string[] {
  const kept = new Set<string>()
  const today = now.slice(0, 10) as CalendarDay
  return [...names]
    .sort()
    .reverse()
    .filter((name) => {
      const on = name.slice(10, 20) as CalendarDay
      const age = daysBetween(on, today)
      const slot =
        age <= 1
          ? name
          : age <= 7
            ? on
            : age <= 35
              ? `week ${Math.floor(age / 7)}`
              : age <= 366
                ? `month ${on.slice(0, 7)}`
                : undefined
      if (slot === undefined || kept.has(slot)) return true
      kept.add(slot)
      return false
    })
}
