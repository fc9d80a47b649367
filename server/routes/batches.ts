import { batchEndpoints } from '#shared/batches/contract'
import type { Deps } from '../deps.ts'
import { serve } from '../http/serve.ts'
import { changeBatch, listBatches, readBatch, startBatch } from '../services/batches/book.ts'

export const batchRoutes = (deps: Deps) =>
  serve(deps, batchEndpoints, {
    list: ({ query }, { user }) => listBatches(deps, user.id, query),
    create: ({ body }, { user }) => startBatch(deps, user.id, body),
    get: ({ params }, { user }) => readBatch(deps, user.id, params.id),
    change: ({ params, body }, { user, version }) => changeBatch(deps, user.id, params.id, version, body),
  })
