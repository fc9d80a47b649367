import type { Endpoint, Endpoints, Reply, Sent } from '#shared/http/endpoint'
import type { FieldError, Problem, ProblemCode } from '#shared/http/problem'

/** A refusal from the server, or `offline` when it could not be reached. Switch on `code`, never on words. */
export class ApiError extends Error {
  readonly status: number
  readonly code: ProblemCode | 'offline'
  /** One message per field at fault. */
  readonly fields: FieldError[]
  /** The whole problem document: some refusals carry more, such as `nearest`. */
  readonly body: Record<string, unknown>

  constructor(
    status: number,
    code: ProblemCode | 'offline',
    detail: string,
    body: Record<string, unknown> = {},
  ) {
    super(detail)
    this.status = status
    this.code = code
    this.body = body
    this.fields = (body.errors as FieldError[] | undefined) ?? []
  }
}

interface Options {
  signal?: AbortSignal
  /** Version for `If-Match`. */
  version?: number
  /** One key per act, so that a retry cannot do it twice. Made here unless given. */
  idempotencyKey?: string
}

/** What a call takes: the contract's parts, and the file where there is one to send. */
type Given<E> = Sent<E> & (E extends { upload: string } ? { file: Blob } : unknown)
type NothingNeeded<E> = Record<never, never> extends Given<E> ? true : false
type Args<E> =
  NothingNeeded<E> extends true ? [input?: Given<E>, options?: Options] : [input: Given<E>, options?: Options]

type Answered<E> = E extends { file: string } ? Blob : Reply<E>
export type Client<C extends Endpoints> = { [K in keyof C]: (...args: Args<C[K]>) => Promise<Answered<C[K]>> }

interface Input {
  params?: Record<string, string>
  query?: Record<string, string | number | boolean | null | undefined>
  body?: unknown
  /** For uploads. */
  file?: File | Blob
}

/** Functions that call a contract's endpoints, typed by it. Throws {@link ApiError}. */
export function createClient<C extends Endpoints>(endpoints: C): Client<C> {
  const calls = Object.entries(endpoints).map(([name, spec]) => [
    name,
    (input?: Input, options?: Options) => call(spec, input ?? {}, options ?? {}),
  ])
  return Object.fromEntries(calls) as Client<C>
}

/** What a call needs to know of its endpoint: everything but the schemas. */
export type Route = Pick<Endpoint, 'method' | 'path' | 'access' | 'creates' | 'upload' | 'file'> & {
  /** Whether something comes back. */
  reply: true | null
}

/** The same for routes written without their schemas; a test holds them to the contract. */
export const createLightClient = <C extends Endpoints>(routes: Record<keyof C, Route>) =>
  createClient(routes as unknown as C)

/** The address of an endpoint, for links and images. */
export function addressOf(spec: Pick<Endpoint, 'path'>, { params = {}, query = {} }: Input = {}): string {
  const path = spec.path.replace(/:(\w+)/g, (_, name: string) => encodeURIComponent(params[name] ?? ''))
  const search = new URLSearchParams()
  for (const [name, value] of Object.entries(query))
    if (value !== undefined && value !== null && value !== '') search.set(name, String(value))
  const text = search.toString()
  return `/api${path}${text ? `?${text}` : ''}`
}

let onSignedOut: () => void = () => undefined
/** What to do when the session has ended under an open page. */
export const whenSignedOut = (act: () => void) => void (onSignedOut = act)

async function call(spec: Endpoint, input: Input, options: Options): Promise<unknown> {
  const headers: Record<string, string> = { Accept: 'application/json' }
  if (spec.creates) headers['Idempotency-Key'] = options.idempotencyKey ?? crypto.randomUUID()
  if (options.version !== undefined) headers['If-Match'] = `"${options.version}"`
  let body: BodyInit | undefined
  if (spec.upload && input.file) {
    const form = new FormData()
    form.set(spec.upload, input.file)
    for (const [name, value] of Object.entries(input.body ?? {})) form.set(name, String(value))
    body = form
  } else if (input.body !== undefined) {
    headers['Content-Type'] = 'application/json'
    body = JSON.stringify(input.body)
  }
  const response = await reach(addressOf(spec, input), {
    method: spec.method,
    headers,
    body,
    signal: options.signal,
  })
  if (!response.ok) throw await refusal(response, spec)
  if (spec.file) return response.blob()
  return spec.reply === null || response.status === 204 ? undefined : response.json()
}

async function reach(address: string, init: RequestInit): Promise<Response> {
  try {
    return await fetch(address, { credentials: 'same-origin', ...init })
  } catch (error) {
    if (error instanceof DOMException && error.name === 'AbortError') throw error
    throw new ApiError(0, 'offline', 'Barmhouse cannot be reached. Check your connection, then try again.')
  }
}

async function refusal(response: Response, spec: Endpoint): Promise<ApiError> {
  const problem: unknown = await response.json().catch(() => undefined)
  if (!isProblem(problem))
    return new ApiError(
      response.status,
      'unavailable',
      'Something went wrong on our side. Try again in a moment.',
    )
  if (response.status === 401 && spec.access !== 'anyone') onSignedOut()
  const { code, detail } = problem
  return new ApiError(response.status, code as ProblemCode, detail, problem)
}

/** By hand, so that a first visit does not load the validation library. */
function isProblem(value: unknown): value is Problem {
  if (typeof value !== 'object' || value === null || !('code' in value) || !('detail' in value)) return false
  return typeof value.code === 'string' && typeof value.detail === 'string'
}
