import type { Role } from '#shared/people/vocabulary'
import type { Deps } from '../../deps.ts'
import { addMember } from '../../services/people.ts'
import type { Tx } from '../open.ts'

export const DEMO_PASSWORD = 'barmhouse-demo-space'

/** Invented people of the demo space; the part before `@` says who they are. */
const CAST: [login: string, name: string, role: Role, phone?: string][] = [
  ['admin', 'Orla Fenwright', 'admin', '01632 960112'],
  ['steward', 'Tobias Rook', 'steward', '01632 960145'],
  ['steward2', 'Nessa Quillan', 'steward', '01632 960178'],
  ['member', 'Hester Vale', 'member', '01632 960201'],
  ['member2', 'Idris Lockwood', 'member'],
  ['member3', 'Mabel Strand', 'member', '01632 960233'],
  ['member4', 'Caspian Doyle', 'member'],
  ['member5', 'Ottilie Brand', 'member', '01632 960266'],
  ['member6', 'Rafe Underhill', 'member'],
  ['member7', 'Signe Marlow', 'member'],
  ['member8', 'Bram Tolland', 'member', '01632 960299'],
  ['member9', 'Yusra Penn', 'member'],
  ['member10', 'Leopold Ashby', 'member'],
  ['member11', 'Wilf Garrow', 'member'],
]

export const DEMO_SIGN_INS = CAST.filter(([login]) => !/\d\d$/.test(login)).map(([login, , role]) => ({
  email: `${login}@barmhouse.example`,
  role,
}))

/** Adds the cast and gives back their ids by login (`member2`). */
export function seedPeople(deps: Deps, tx: Tx, passwordHash: string): Record<string, string> {
  return Object.fromEntries(
    CAST.map(([login, name, role, phone]) => [
      login,
      addMember(
        deps,
        { name, email: `${login}@barmhouse.example`, role, passwordHash, ...(phone && { phone }) },
        tx,
      ),
    ]),
  )
}
