import { parseArgs } from 'node:util'
import { pino } from 'pino'
import { InstantInput, instantMs, type Instant } from '#shared/time/instant'
import { clockFrom, systemClock } from '../clock.ts'
import { openDb } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { queueAt } from '../jobs/queue-notices-at.ts'
import { zoneReader } from '../services/space.ts'
import { command, CommandError } from './command.ts'

// npm run notices -- --at INSTANT [--dry-run]: the notices that would be queued at that moment, one JSON object a line
await command((env, args) => {
  const { at, dryRun } = optionsOf(args)
  const db = openDb(env.databaseFile)
  const zone = zoneReader(db, env.timeZone)
  const deps: Deps = {
    db,
    clock: at ? clockFrom(() => instantMs(at), zone) : systemClock(zone),
    log: pino({ level: 'silent' }),
    appUrl: env.appUrl,
    uploadsDir: env.uploadsDir,
    mailFrom: env.mailFrom,
    demo: env.demo,
    mailCaught: env.smtpUrl === undefined,
    mailAlive: () => false,
  }
  const leaveAt = systemClock(zone).now()
  for (const notice of queueAt(deps, { dryRun, leaveAt })) console.log(JSON.stringify(notice))
  db.$client.close()
})

function optionsOf(args: string[]): { at: Instant | undefined; dryRun: boolean } {
  const usage = 'Say when: npm run notices -- --at 2031-05-09T09:00:00Z [--dry-run]'
  try {
    const { values } = parseArgs({
      args,
      options: { at: { type: 'string' }, 'dry-run': { type: 'boolean' } },
    })
    const at = values.at === undefined ? undefined : InstantInput.parse(values.at)
    return { at, dryRun: values['dry-run'] ?? false }
  } catch {
    throw new CommandError(usage)
  }
}
