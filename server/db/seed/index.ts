import { members } from '../schema/people.ts'
import { space } from '../schema/space.ts'
import { write, type Tx } from '../open.ts'
import type { Deps } from '../../deps.ts'
import { hashPassword } from '../../services/passwords.ts'
import { seedBatches } from './batches.ts'
import { seedKit } from './kit.ts'
import { seedLoans } from './loans.ts'
import { DEMO_PASSWORD, seedPeople } from './people.ts'
import { seedLarder } from './larder.ts'
import { seedYeast } from './yeast.ts'

/** What each domain's part of the demo is given: the people by login, the kinds and items by a short name as they come. */
export interface SeedContext {
  deps: Deps
  tx: Tx
  /** Member ids by login: `member`, `member2`, `steward`, `admin` … */
  people: Record<string, string>
  /** Kind ids by short name: `demijohn`, `siphon` … */
  kinds: Record<string, string>
  /** Item ids by tag: `DJ-07`. */
  items: Record<string, string>
}

/** Fills an empty database with the demo space, in one transaction; leaves any other database alone. */
export async function seedDemo(deps: Deps) {
  if (deps.db.select({ id: members.id }).from(members).limit(1).get()) return
  const passwordHash = await hashPassword(DEMO_PASSWORD)
  write(deps.db, (tx) => {
    tx.update(space).set({ name: 'Copperwell Cellar', demo: true, roomM3: 64, airChangesPerHour: 0.7 }).run()
    const people = seedPeople(deps, tx, passwordHash)
    const context: SeedContext = { deps, tx, people, kinds: {}, items: {} }
    for (const part of PARTS) part(context)
  })
}

/** One per domain, in the order they build on each other. */
const PARTS: ((context: SeedContext) => void)[] = [seedKit, seedLoans, seedYeast, seedLarder, seedBatches]
