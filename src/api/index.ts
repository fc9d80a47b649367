import { batchEndpoints } from '#shared/batches/contract'
import { sessionEndpoints } from '#shared/session/contract'
import { createClient } from './client.ts'

/** Every call the client can make, by domain. */
export const api = {
  session: createClient(sessionEndpoints),
  batches: createClient(batchEndpoints),
}
