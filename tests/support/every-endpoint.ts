import type { Test } from 'supertest'
import type { Agent } from 'supertest'
import type { Endpoint } from '#shared/http/endpoint'
import { contracts } from '#shared/contracts'

export interface Named extends Endpoint {
  name: string
}

/** Every endpoint of every contract, with a name to show in a failing test. */
export const everyEndpoint: Named[] = Object.values(contracts).flatMap((endpoints) =>
  Object.values(endpoints).map((spec) => ({ ...spec, name: `${spec.method} ${spec.path}` })),
)

/** An address of the endpoint with ids that nothing has. */
export const addressOf = (spec: Endpoint) => `/api${spec.path.replace(/:\w+/g, 'nothing-has-this-id')}`

/** A request to the endpoint, ready to be sent with a body. */
export function ask(agent: Agent, spec: Endpoint): Test {
  const test = agent[spec.method.toLowerCase() as 'get'](addressOf(spec))
  return spec.versioned ? test.set('If-Match', '"1"') : test
}
