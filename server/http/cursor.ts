import { AppError } from '../errors.ts'

/** A cursor is the sort key of the last row shown; opaque to clients. */
export const encodeCursor = (key: (string | number)[]) =>
  Buffer.from(JSON.stringify(key)).toString('base64url')

/**
 * @throws AppError `invalid` when the cursor was not made here
 */
export function decodeCursor(cursor: string, length: number): (string | number)[] {
  let key: unknown
  try {
    key = JSON.parse(Buffer.from(cursor, 'base64url').toString('utf8'))
  } catch {
    key = undefined
  }
  if (
    Array.isArray(key) &&
    key.length === length &&
    key.every((k) => typeof k === 'string' || typeof k === 'number')
  )
    return key
  const message = 'That cursor is not one of ours. Start again without it.'
  throw new AppError('invalid', message, { errors: [{ path: 'cursor', message }] })
}

/** Cuts one row too many into a page and its cursor. Ask the database for `limit + 1` rows. */
export function pageFrom<Row>(rows: Row[], limit: number, keyOf: (row: Row) => (string | number)[]) {
  const items = rows.slice(0, limit)
  const last = items.at(-1)
  return { items, nextCursor: rows.length > limit && last ? encodeCursor(keyOf(last)) : null }
}
