import { count, eq, and } from 'drizzle-orm'
import { z } from 'zod'
import { systemClock } from '../clock.ts'
import { members } from '../db/schema/people.ts'
import { openDb, write } from '../db/open.ts'
import { issueToken } from '../services/tokens.ts'
import { command, CommandError } from './command.ts'

// npm run admin -- EMAIL: a one-time link with which the first admin of a real, empty space sets up their account
await command((env, [email]) => {
  const address = z.email().safeParse(email?.toLowerCase())
  if (!address.success) throw new CommandError('Say who: npm run admin -- EMAIL')
  const db = openDb(env.databaseFile)
  const admins = db
    .select({ n: count() })
    .from(members)
    .where(and(eq(members.role, 'admin'), eq(members.status, 'active')))
    .get()
  if (admins?.n)
    throw new CommandError('This space has an admin already. They can invite others under Members.')
  const clock = systemClock(() => env.timeZone)
  const { secret } = write(db, (tx) =>
    issueToken(tx, { clock }, { purpose: 'first-admin', email: address.data, role: 'admin' }),
  )
  db.$client.close()
  console.log(
    `Open this link within a day, once, to set up the first admin:\n${env.appUrl}/invitations/${secret}`,
  )
})
