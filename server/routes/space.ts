import { spaceEndpoints } from '#shared/space/contract'
import type { Deps } from '../deps.ts'
import { serve } from '../http/serve.ts'
import { checkAudit, listAudit } from '../services/audit.ts'
import { listBackups, makeBackup } from '../services/backup.ts'
import { editSpace, getSpace } from '../services/space.ts'

export const spaceRoutes = (deps: Deps) =>
  serve(deps, spaceEndpoints, {
    get: () => getSpace(deps),
    edit: ({ body }, { version }) => editSpace(deps, version, body),
    audit: ({ query }) => listAudit(deps, query),
    checkAudit: () => checkAudit(deps.db),
    backups: () => ({ items: listBackups(deps) }),
    backUp: () => makeBackup(deps),
  })
