import { openDb } from '../db/open.ts'
import { restoreFrom } from '../services/backup.ts'
import { command, CommandError } from './command.ts'

// npm run restore -- FILE, with the application stopped
await command((env, [file]) => {
  if (!file) throw new CommandError('Say what from: npm run restore -- FILE')
  const { files } = restoreFrom(file, env.databaseFile, env.uploadsDir)
  openDb(env.databaseFile).$client.close()
  console.log(
    `Restored ${env.databaseFile} and ${files} uploaded files. What was there is kept as *.before-restore.`,
  )
})
