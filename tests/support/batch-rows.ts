import { batches } from '#server/db/schema/batches'
import { newId } from '#server/ids'
import type { Person } from './people.ts'
import type { TestApp } from './test-app.ts'

/** A planned batch of someone's, by id. */
export function addBatch(app: TestApp, by: Person, name = 'Windfall cyser'): string {
  const id = newId()
  const now = app.clock.now()
  app.db
    .insert(batches)
    .values({
      id,
      memberId: by.id,
      name,
      style: 'cyser',
      volumeLitres: 4.5,
      visibility: 'private',
      status: 'planned',
      createdAt: now,
      updatedAt: now,
    })
    .run()
  return id
}
