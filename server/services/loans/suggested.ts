import { type ShelfItem, suggestItems } from '#shared/loans/suggestion'
import type { Instant } from '#shared/time/instant'
import { prepared } from '../../db/prepared.ts'
import type { Deps } from '../../deps.ts'
import type { LoanRow } from './rows.ts'

/**
 * What is in front of a loan in its pool, and the items that could be handed out: usable, not dirty, not out. As one list, so
 * that it is one statement.
 */
const SUGGESTABLE = `
SELECT 'loan' AS what, l.id, '' AS tag, '' AS hygiene, NULL AS sanitisedUntil, k.needs_sanitised AS needsSanitised, l.from_on AS "order", l.requested_at, l.rowid
FROM loans AS l JOIN kinds AS k ON k.id = l.kind_id
WHERE l.blocking = 1 AND l.kind_id = @kindId AND l.wild = @wild AND l.status = 'approved'
  AND (l.from_on < @from OR (l.from_on = @from AND (l.requested_at, l.rowid) < (SELECT requested_at, rowid FROM loans WHERE id = @id)) OR l.id = @id)
UNION ALL
SELECT 'item', i.id, i.tag, i.hygiene, i.sanitised_until, k.needs_sanitised, i.tag, '', i.rowid
FROM items AS i JOIN kinds AS k ON k.id = i.kind_id
WHERE i.kind_id = @kindId AND i.wild = @wild AND i.status = 'in-service' AND i.hygiene <> 'dirty'
  AND EXISTS (SELECT 1 FROM serviceable_items AS s WHERE s.id = i.id)
  AND NOT EXISTS (SELECT 1 FROM loans AS l WHERE l.item_id = i.id AND l.status = 'out')
ORDER BY 7, 8, 9`

interface Row {
  what: 'loan' | 'item'
  id: string
  tag: string
  hygiene: ShelfItem['hygiene']
  sanitisedUntil: Instant | null
  needsSanitised: 0 | 1
}

/** The item that would be handed out for an approved loan; those who collect before it are served first. */
export function suggestedItem(
  deps: Deps,
  loan: LoanRow,
): { suggestedItemId: string | null; suggestedTag: string | null } {
  const none = { suggestedItemId: null, suggestedTag: null }
  if (loan.status !== 'approved') return none
  const bind = {
    id: loan.id,
    kindId: loan.kindId,
    wild: loan.wild ? 1 : 0,
    from: loan.fromOn,
  }
  const rows = prepared<typeof bind, Row>(deps.db, SUGGESTABLE).all(bind)
  const shelf = rows
    .filter(({ what }) => what === 'item')
    .map((row) => ({ ...row, sanitisedUntil: row.sanitisedUntil ?? undefined, usable: true, out: false }))
  const queue = rows.filter(({ what, id }) => what === 'loan' && id !== loan.id).map(({ id }) => id)
  const needsSanitised = rows[0]?.needsSanitised === 1
  const given = suggestItems([...queue, loan.id], shelf, needsSanitised, deps.clock.now()).get(loan.id)
  const item = shelf.find(({ id }) => id === given)
  return item ? { suggestedItemId: item.id, suggestedTag: item.tag } : none
}
