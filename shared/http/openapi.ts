import { z } from 'zod'
import type { Endpoint, Endpoints } from './endpoint.ts'
import { Problem, PROBLEM_CODES } from './problem.ts'

type Json = Record<string, unknown>

const ACCESS_WORDS = {
  anyone: 'Anyone.',
  member: 'Signed in.',
  steward: 'Stewards and admins.',
  admin: 'Admins.',
} as const

/** An OpenAPI 3.1 document of the contracts, from the very schemas that validate requests. */
export function openApiDocument(contracts: Record<string, Endpoints>): Json {
  const paths: Record<string, Json> = {}
  for (const [domain, endpoints] of Object.entries(contracts)) {
    for (const [name, spec] of Object.entries(endpoints)) {
      const path = spec.path.replace(/:(\w+)/g, '{$1}')
      paths[path] = { ...paths[path], [spec.method.toLowerCase()]: operation(domain, name, spec) }
    }
  }
  return {
    openapi: '3.1.0',
    info: {
      title: 'Barmhouse',
      version: '1',
      description:
        'JSON over a cookie session. Calendar days are YYYY-MM-DD in the space’s time zone; instants are ISO 8601 in UTC. Errors are RFC 9457 problem documents.',
    },
    servers: [{ url: '/api' }],
    tags: Object.keys(contracts).map((name) => ({ name })),
    paths,
    components: {
      securitySchemes: { session: { type: 'apiKey', in: 'cookie', name: 'sid' } },
      schemas: { Problem: schemaOf(Problem, 'output'), ProblemCode: { type: 'string', enum: PROBLEM_CODES } },
    },
  }
}

function operation(domain: string, name: string, spec: Endpoint): Json {
  const status = String(spec.status ?? 200)
  return {
    operationId: `${domain}.${name}`,
    tags: [domain],
    summary: spec.summary,
    description: `Who may call: ${ACCESS_WORDS[spec.access]}`,
    'x-access': spec.access,
    security: spec.access === 'anyone' ? [] : [{ session: [] }],
    parameters: [
      ...fields(spec.params, 'path'),
      ...fields(spec.query, 'query'),
      ...(spec.creates
        ? [
            header(
              'Idempotency-Key',
              false,
              'The same key with the same body gives the first answer again for 48 hours.',
            ),
          ]
        : []),
      ...(spec.versioned ? [header('If-Match', true, 'The version you are changing, from ETag.')] : []),
    ],
    ...(spec.upload && {
      requestBody: {
        required: true,
        content: {
          ...(spec.uploadType && { [spec.uploadType]: { schema: { type: 'string' } } }),
          'multipart/form-data': {
            schema: {
              type: 'object',
              required: [spec.upload],
              properties: { [spec.upload]: { type: 'string', format: 'binary' } },
            },
          },
        },
      },
    }),
    ...(spec.body &&
      !spec.upload && {
        requestBody: {
          required: true,
          content: { 'application/json': { schema: schemaOf(spec.body, 'input') } },
        },
      }),
    responses: {
      [status]: {
        description: 'Done.',
        ...(spec.file && { content: { [spec.file]: {} } }),
        ...(spec.reply && { content: { 'application/json': { schema: schemaOf(spec.reply, 'output') } } }),
      },
      default: {
        description: 'Refused.',
        content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } },
      },
    },
  }
}

const header = (name: string, required: boolean, description: string) => ({
  name,
  in: 'header',
  required,
  description,
  schema: { type: 'string' },
})

function fields(schema: z.ZodObject | undefined, where: 'path' | 'query'): Json[] {
  if (!schema) return []
  const json = schemaOf(schema, 'input') as { properties?: Record<string, Json>; required?: string[] }
  return Object.entries(json.properties ?? {}).map(([name, property]) => ({
    name,
    in: where,
    required: where === 'path' || (json.required ?? []).includes(name),
    schema: property,
  }))
}

function schemaOf(schema: z.ZodType, io: 'input' | 'output'): Json {
  const { $schema: _dialect, ...json } = z.toJSONSchema(schema, { io, unrepresentable: 'any' }) as Json
  return json
}
