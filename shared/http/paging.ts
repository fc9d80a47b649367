import { z } from 'zod'

/** `?limit=&cursor=` of every list: 50 rows unless asked, never more than 200. Spread into a query schema. */
export const pageQuery = {
  limit: z.coerce.number<string | number>().int().min(1).max(200).default(50),
  cursor: z.string().min(1).max(400).optional(),
}

/** The shape of every list. */
export const pageOf = <T extends z.ZodType>(item: T) =>
  z.object({ items: z.array(item), nextCursor: z.string().nullable() })

export interface Page<T> {
  items: T[]
  nextCursor: string | null
}
