import { addMinutes } from '#shared/time/instant'
import type { Deps } from '../deps.ts'
import { listBackups, makeBackup } from '../services/backup.ts'

/** Makes a copy when the newest is an hour old. Databases in memory have none. */
export async function backUpHourly(deps: Deps) {
  if (deps.db.$client.memory) return
  const newest = listBackups(deps)[0]
  if (newest && newest.madeAt > addMinutes(deps.clock.now(), -60)) return
  const { name, bytes } = await makeBackup(deps)
  deps.log.info({ name, bytes }, 'backed up')
}
