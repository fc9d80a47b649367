import type { Sqlite } from '#server/db/open'

/** Bare rows for tests of the database itself. Everything else goes through services. */
const AT = '2031-01-01T10:00:00.000Z'

export function insertMember(sqlite: Sqlite, id: string) {
  sqlite
    .prepare(
      `INSERT INTO members (id, name, email, role, status, created_at, updated_at)
       VALUES (@id, 'Member', @id || '@barmhouse.example', 'member', 'active', @at, @at)`,
    )
    .run({ id, at: AT })
}

export function insertKind(sqlite: Sqlite, id: string) {
  sqlite
    .prepare(
      `INSERT INTO kinds (id, name, category, turnaround_days, max_loan_days, max_ahead_days, max_per_member, created_at,
       updated_at) VALUES (@id, @id, 'vessel', 1, 28, 90, 3, @at, @at)`,
    )
    .run({ id, at: AT })
}

export function insertItem(sqlite: Sqlite, item: { id: string; kindId: string; wild?: boolean }) {
  sqlite
    .prepare(
      `INSERT INTO items (id, tag, kind_id, hygiene, wild, created_at, updated_at)
       VALUES (@id, @id, @kindId, 'clean', @wild, @at, @at)`,
    )
    .run({ ...item, wild: item.wild ? 1 : 0, at: AT })
}
