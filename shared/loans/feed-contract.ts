import { z } from 'zod'
import { endpoint } from '../http/endpoint.ts'

export const feedEndpoints = {
  makeFeed: endpoint({
    method: 'POST',
    path: '/me/calendar-feed',
    access: 'member',
    summary: 'Make or replace the secret address at which a calendar program reads your loans.',
    reply: z.object({ url: z.url() }),
  }),
  revokeFeed: endpoint({
    method: 'DELETE',
    path: '/me/calendar-feed',
    access: 'member',
    summary: 'Stop the address.',
    whileSuspended: true,
    status: 204,
    reply: null,
  }),
}

/** Outside `/api`, since calendar programs fetch it: the token is the key. Unknown and revoked ones are 404 alike. */
export const feedFileEndpoints = {
  feed: endpoint({
    method: 'GET',
    path: '/calendar/:file',
    access: 'anyone',
    summary: 'A member’s loans as iCalendar (RFC 5545).',
    params: z.object({ file: z.string().regex(/^[A-Za-z0-9_-]{20,100}\.ics$/) }),
    reply: null,
    file: 'text/calendar; charset=utf-8',
  }),
}
