import { openDb } from '../db/open.ts'
import { backUpTo } from '../services/backup.ts'
import { command, CommandError } from './command.ts'

// npm run backup -- FILE
await command(async (env, [file]) => {
  if (!file) throw new CommandError('Say where to: npm run backup -- FILE')
  const db = openDb(env.databaseFile)
  await backUpTo(db.$client, env.uploadsDir, file)
  db.$client.close()
  console.log(`Backed up to ${file}, opened and checked.`)
})
