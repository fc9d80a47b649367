import type { z } from 'zod'

/** Who may call. Every endpoint states it; there is no default. A steward is also a member, an admin also a steward. */
export const ACCESS = ['anyone', 'member', 'steward', 'admin'] as const
export type Access = (typeof ACCESS)[number]

export interface Endpoint {
  method: 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE'
  path: `/${string}`
  access: Access
  /** One sentence for the API page. */
  summary: string
  /** Suspended members may read; a write is refused to them unless it says this. */
  whileSuspended?: true
  params?: z.ZodObject
  query?: z.ZodObject
  body?: z.ZodType
  /** Success status; 200 unless said. */
  status?: 200 | 201 | 202 | 204
  /** What comes back. `null`: nothing (204, 202) or a file. */
  reply: z.ZodType | null
  /** A creating POST: honours `Idempotency-Key`. `sync` runs handler and key in one transaction; `async` handlers await. */
  creates?: 'sync' | 'async'
  /** An edit of a versioned thing: wants `If-Match`. */
  versioned?: true
  /** Multipart with one file in this field. */
  upload?: string
  /** The file may also come as the bare body, under this media type. */
  uploadType?: 'text/csv'
  /** Answers with a file of this media type in place of JSON. */
  file?: string
  /** Goes into the audit trail though any member may do it. */
  audited?: true
  /** Not personal: may be kept by the browser and asked again by ETag. */
  cache?: 'revalidate'
}
export type Endpoints = Record<string, Endpoint>

type Names<P extends string> = P extends `${string}:${infer N}/${infer R}`
  ? N | Names<R>
  : P extends `${string}:${infer N}.${string}`
    ? N
    : P extends `${string}:${infer N}`
      ? N
      : never

/** Keeps the literal types, and insists that `params` names exactly what `path` names. */
export const endpoint = <const P extends `/${string}`, const E extends Omit<Endpoint, 'path' | 'params'>>(
  spec: E & { path: P } & ([Names<P>] extends [never]
      ? { params?: never }
      : { params: z.ZodObject<Record<Names<P>, z.ZodType>> }),
) => spec

type Part<E, K extends string, Side> = E extends { [k in K]: infer S extends z.ZodType }
  ? { [k in K]: Side extends 'in' ? z.input<S> : z.output<S> }
  : unknown
type Parts<E, Side> = Part<E, 'params', Side> & Part<E, 'query', Side> & Part<E, 'body', Side>

/** What a caller sends. */
export type Sent<E> = Parts<E, 'in'>
/** What a handler receives, after validation. */
export type Received<E> = Parts<E, 'out'>
/** What a caller gets back. */
export type Reply<E> = E extends { reply: infer R extends z.ZodType } ? z.output<R> : void
/** What a handler gives back, before it is cut to the reply schema. */
export type Given<E> = E extends { reply: infer R extends z.ZodType } ? z.input<R> : void
