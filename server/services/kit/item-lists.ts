import type { ItemImport } from '#shared/kit/item-contract'
import { isKept } from '#shared/kit/item-lifecycle'
import { kinds } from '../../db/schema/kit.ts'
import { write } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError } from '../../errors.ts'
import type { FileReply } from '../../http/serve.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { itemsFromCsv, itemsToCsv, type ItemCells } from './item-csv.ts'
import { selectItems } from './item-rows.ts'
import { addItem, changeItem } from './items.ts'

export const exportItems = (deps: Deps, user: SignedIn): FileReply => ({
  body: itemsToCsv(selectItems(deps, deps.db, user, undefined, -1)),
  type: 'text/csv; charset=utf-8',
  downloadName: 'items.csv',
})

type Outcome = ItemImport['rows'][number]['outcome']

/** Thrown to take back what a dry run, or a list with a bad row in it, has written. */
class TakeBack extends Error {}

/**
 * Brings in a list of items by tag, all of it or nothing. A dry run goes the whole way and is taken back, so that what it
 * says is what would happen.
 */
export function importItems(deps: Deps, user: SignedIn, bytes: Buffer, dryRun: boolean): ItemImport {
  const read = itemsFromCsv(bytes)
  const rows: ItemImport['rows'] = []
  const count = (outcome: Outcome) => rows.filter((row) => row.outcome === outcome).length
  try {
    write(deps.db, (tx) => {
      const kindIds = new Map(
        tx
          .select({ id: kinds.id, name: kinds.name })
          .from(kinds)
          .all()
          .map((kind) => [kind.name.toLowerCase(), kind.id]),
      )
      const known = new Map(
        selectItems(deps, tx, user, undefined, -1).map((item) => [item.tag.toLowerCase(), item]),
      )
      const seen = new Set<string>()
      for (const { row, tag, ...rest } of read) {
        const say = (outcome: Outcome, message: string | null = null) =>
          void rows.push({ row, tag, outcome, message })
        if (!rest.ok) {
          say('refused', rest.message)
          continue
        }
        const key = tag.toLowerCase()
        const kindId = kindIds.get(rest.cells.kind.toLowerCase())
        if (seen.has(key)) say('refused', 'This tag is in the list twice.')
        else if (kindId === undefined) say('refused', `There is no kind called ${rest.cells.kind}.`)
        else say(...bringIn(rest.cells, kindId, known.get(key)))
        seen.add(key)
      }
      if (dryRun || count('refused') > 0) throw new TakeBack()
    })
  } catch (error) {
    if (!(error instanceof TakeBack)) throw error
  }
  return {
    dryRun,
    written: !dryRun && count('refused') === 0,
    added: count('add'),
    changed: count('change'),
    unchanged: count('unchanged'),
    refused: count('refused'),
    rows,
  }

  function bringIn(
    { kind: _name, ...row }: ItemCells,
    kindId: string,
    before: ReturnType<typeof selectItems>[number] | undefined,
  ): [Outcome, (string | null)?] {
    const said = Object.entries(row).filter(([, value]) => value !== undefined)
    const cells = Object.fromEntries(said) as typeof row
    try {
      if (!before) {
        addItem(deps, user, { ...cells, kindId })
        return ['add']
      }
      const patch = { ...cells, kindId }
      const differs = (Object.keys(patch) as (keyof typeof patch)[]).some(
        (name) => name !== 'tag' && patch[name] !== before[name],
      )
      if (!differs) return ['unchanged']
      changeItem(deps, user, before.id, before.version, { ...patch, reason: 'brought in from a list' })
      return ['change', isKept(before.status) ? null : `It was ${before.status}.`]
    } catch (error) {
      if (error instanceof AppError) return ['refused', error.message]
      throw error
    }
  }
}
