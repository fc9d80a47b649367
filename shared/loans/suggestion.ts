import type { Instant } from '../time/instant.ts'

/** An item as check-out sees it. */
export interface ShelfItem {
  id: string
  tag: string
  hygiene: 'dirty' | 'clean' | 'sanitised'
  sanitisedUntil: Instant | undefined
  /** In service and without an open blocking fault. */
  usable: boolean
  /** On a loan right now. */
  out: boolean
}

export type Obstacle = 'not-available' | 'blocked-by-fault' | 'not-clean'

/**
 * Why an item should not be handed out now, if anything: it is out already, it is out of service, or it is not clean (for
 * a kind that must be sanitised: not sanitised, or no longer). A steward may override the last two with a reason.
 */
export function checkOutObstacle(
  item: Omit<ShelfItem, 'tag'>,
  needsSanitised: boolean,
  now: Instant,
): Obstacle | undefined {
  if (item.out) return 'not-available'
  if (!item.usable) return 'blocked-by-fault'
  if (item.hygiene === 'dirty') return 'not-clean'
  if (!needsSanitised) return undefined
  return isSanitised(item, now) ? undefined : 'not-clean'
}

/** Sanitised, and not for so long that it must be done again. */
export function isSanitised(item: Pick<ShelfItem, 'hygiene' | 'sanitisedUntil'>, now: Instant): boolean {
  return item.hygiene === 'sanitised' && (item.sanitisedUntil === undefined || item.sanitisedUntil > now)
}

/**
 * An item for each collection, in the order of collection, no item twice. What must be sanitised takes the one whose
 * sanitising runs out first; what need only be clean leaves sanitised ones for others. Then by tag.
 */
export function suggestItems(
  loanIds: readonly string[],
  items: readonly ShelfItem[],
  needsSanitised: boolean,
  now: Instant,
): Map<string, string> {
  const ready = items
    .filter((item) => checkOutObstacle(item, needsSanitised, now) === undefined)
    .map((item) => ({ id: item.id, order: [preference(item, needsSanitised, now), item.tag].join(' ') }))
    .sort((a, b) => (a.order < b.order ? -1 : 1))
  const given = new Map<string, string>()
  loanIds.slice(0, ready.length).forEach((loanId, index) => given.set(loanId, ready[index]?.id ?? ''))
  return given
}

function preference(item: ShelfItem, needsSanitised: boolean, now: Instant): string {
  if (needsSanitised) return item.sanitisedUntil ?? '9'
  return isSanitised(item, now) ? '1' : '0'
}
