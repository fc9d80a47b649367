import request from 'supertest'
import { describe, expect, it } from 'vitest'
import { ROLES, roleCovers, type Role } from '#shared/people/vocabulary'
import { ask, everyEndpoint, type Named } from '#tests/support/every-endpoint'
import { person } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'

const code = (reply: { body: unknown }) => (reply.body as { code?: string }).code

describe('every endpoint keeps out who may not call it', () => {
  const app = testApp()
  const nobody = request.agent(app.app)
  const cast = Object.fromEntries(ROLES.map((role) => [role, person(app, `A ${role}`, role)]))
  const paused = person(app, 'Paused Member', 'member', 'suspended')
  const pausedSteward = person(app, 'Paused Steward', 'steward', 'suspended')

  it.each(everyEndpoint.filter((spec) => spec.access !== 'anyone'))('$name: signed out', async (spec) => {
    const reply = await ask(nobody, spec)
    expect(reply.status).toBe(401)
    expect(code(reply)).toBe('signed-out')
  })

  const cells = everyEndpoint.flatMap((spec) => ROLES.map((role) => ({ ...spec, role })))
  it.each(cells)('$name: $role', async (spec: Named & { role: Role }) => {
    const who =
      spec.path === '/session' ? person(app, `Other ${spec.name} ${spec.role}`, spec.role) : cast[spec.role]
    const reply = await ask(who!.agent, spec)
    if (spec.access === 'anyone' || roleCovers(spec.role, spec.access)) {
      expect([reply.status, code(reply)]).not.toContain('forbidden')
      expect(reply.status).not.toBe(401)
      expect(reply.status).toBeLessThan(500)
    } else {
      expect(reply.status).toBe(403)
      expect(code(reply)).toBe('forbidden')
    }
  })

  const guarded = everyEndpoint.filter((spec) => spec.access !== 'anyone')
  it.each(guarded)('$name: suspended', async (spec) => {
    const may = spec.access === 'member' && (spec.method === 'GET' || spec.whileSuspended)
    for (const who of [paused, pausedSteward]) {
      const reply = await ask(who.agent, spec)
      if (may) expect(code(reply)).not.toBe('suspended')
      else expect(code(reply)).toBe('suspended')
    }
  })
})
