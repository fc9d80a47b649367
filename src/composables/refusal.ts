import type { FieldError } from '#shared/http/problem'

/** The part of a failed request that a page shows. `ApiError` of the client has this shape. */
export interface Refusal {
  status: number
  code: string
  message: string
  fields: FieldError[]
}

export function asRefusal(error: unknown): Refusal | undefined {
  if (!(error instanceof Error) || !('code' in error) || !('status' in error)) return undefined
  const { code, status, message } = error
  if (typeof code !== 'string' || typeof status !== 'number') return undefined
  const fields = 'fields' in error && Array.isArray(error.fields) ? (error.fields as FieldError[]) : []
  return { code, status, message, fields }
}

/** One sentence that says what went wrong and what to do. What is no refusal is a slip of ours. */
export function sayWhy(error: unknown): string {
  return asRefusal(error)?.message ?? 'Something went wrong on our side. Try again in a moment.'
}
