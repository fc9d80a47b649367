import { sessionEndpoints } from '#shared/session/contract'
import { createClient } from './client.ts'

/** Apart from the other calls: the shell needs only these, so a first visit loads only these. */
export const sessionApi = createClient(sessionEndpoints)
