import { batchEndpoints } from '#shared/batches/contract'
import { noticeEndpoints } from '#shared/notices/contract'
import { calendarEndpoints } from '#shared/loans/calendar-contract'
import { feedEndpoints } from '#shared/loans/feed-contract'
import { loanEndpoints } from '#shared/loans/contract'
import { deskEndpoints } from '#shared/loans/desk-contract'
import { waitingEndpoints } from '#shared/loans/waiting-contract'
import { peopleEndpoints } from '#shared/people/contract'
import { spaceEndpoints } from '#shared/space/contract'
import { larderEndpoints } from '#shared/larder/contract'
import { tabEndpoints } from '#shared/larder/tab-contract'
import { kitEndpoints } from '#shared/kit/contract'
import { yeastEndpoints } from '#shared/yeast/contract'
import { speakPlainly } from '#shared/http/messages'
import { createClient } from './client.ts'
import { sessionApi } from './session.ts'

// Here and not in main.ts: who loads the contracts needs their words, and a first visit needs neither.
speakPlainly()

/** Every call the client can make, by domain. */
export const api = {
  session: sessionApi,
  people: createClient(peopleEndpoints),
  space: createClient(spaceEndpoints),
  kit: createClient(kitEndpoints),
  loans: createClient({ ...loanEndpoints, ...feedEndpoints, ...deskEndpoints, ...calendarEndpoints }),
  waiting: createClient(waitingEndpoints),
  batches: createClient(batchEndpoints),
  yeast: createClient(yeastEndpoints),
  larder: createClient(larderEndpoints),
  tabs: createClient(tabEndpoints),
  notices: createClient(noticeEndpoints),
}
