import { describe, expect, it } from 'vitest'
import { sessionEndpoints } from '#shared/session/contract'
import type { Endpoint } from '#shared/http/endpoint'
import { SESSION_ROUTES } from '@/api/session'

describe('the routes a first visit loads', () => {
  it('are those of the session contract', () => {
    const wanted = Object.entries<Endpoint>(sessionEndpoints).map(
      ([name, { method, path, access, reply, creates, upload, file }]) => [
        name,
        { method, path, access, reply: reply === null ? null : true, creates, upload, file },
      ],
    )
    expect(SESSION_ROUTES).toEqual(Object.fromEntries(wanted))
  })
})
