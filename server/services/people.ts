import type { Role } from '#shared/people/vocabulary'
import { members } from '../db/schema/people.ts'
import type { Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { newId } from '../ids.ts'

interface NewMember {
  name: string
  email: string
  role: Role
  passwordHash: string | null
  phone?: string
}

/** Adds a member and gives back their id. The address is kept in lower case; it can belong to one member only. */
export function addMember(deps: Deps, member: NewMember, db: Deps['db'] | Tx = deps.db): string {
  const id = newId()
  const now = deps.clock.now()
  db.insert(members)
    .values({
      ...member,
      id,
      email: member.email.toLowerCase(),
      phone: member.phone ?? null,
      status: 'active',
      createdAt: now,
      updatedAt: now,
    })
    .run()
  return id
}
