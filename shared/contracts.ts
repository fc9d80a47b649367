import { batchEndpoints } from './batches/contract.ts'
import type { Endpoints } from './http/endpoint.ts'
import { noticeEndpoints } from './notices/contract.ts'
import { calendarEndpoints } from './loans/calendar-contract.ts'
import { feedEndpoints } from './loans/feed-contract.ts'
import { loanEndpoints } from './loans/contract.ts'
import { deskEndpoints } from './loans/desk-contract.ts'
import { waitingEndpoints } from './loans/waiting-contract.ts'
import { peopleEndpoints } from './people/contract.ts'
import { spaceEndpoints } from './space/contract.ts'
import { larderEndpoints } from './larder/contract.ts'
import { tabEndpoints } from './larder/tab-contract.ts'
import { kitEndpoints } from './kit/contract.ts'
import { sessionEndpoints } from './session/contract.ts'
import { yeastEndpoints } from './yeast/contract.ts'

/** Every endpoint there is, by domain: the API page and the access tests read this list. */
export const contracts: Record<string, Endpoints> = {
  session: sessionEndpoints,
  people: peopleEndpoints,
  kit: kitEndpoints,
  loans: loanEndpoints,
  waiting: waitingEndpoints,
  desk: deskEndpoints,
  calendar: calendarEndpoints,
  feed: feedEndpoints,
  batches: batchEndpoints,
  yeast: yeastEndpoints,
  space: spaceEndpoints,
  larder: larderEndpoints,
  tabs: tabEndpoints,
  notices: noticeEndpoints,
}
