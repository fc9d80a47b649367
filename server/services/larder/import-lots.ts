import { eq } from 'drizzle-orm'
import type { ImportReport } from '#shared/larder/contract'
import { LOT_COLUMNS, readLotRow, type KnownIngredient } from '#shared/larder/lot-row'
import { ingredients } from '../../db/schema/larder.ts'
import { write } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, invalidField } from '../../errors.ts'
import { readCsv } from '../../http/csv.ts'
import { spaceBrief } from '../space.ts'
import { addLot } from './lots.ts'

const ROWS_MAX = 1000

/**
 * Adds the lots of a CSV file, all of them or none. A dry run says row by row what would happen and writes nothing.
 * @throws AppError `invalid` with an entry for each cell at fault, and the same rows a dry run shows
 */
export function importLots(deps: Deps, memberId: string, bytes: Buffer, dryRun: boolean): ImportReport {
  const table = readCsv('file', bytes, ROWS_MAX)
  for (const needed of ['ingredient', 'quantity'])
    if (!table.columns.includes(needed))
      throw invalidField('file', `There is no column called ${needed}. Columns: ${LOT_COLUMNS.join(', ')}.`)
  const { currency } = spaceBrief(deps)
  const known = knownIngredients(deps)
  const context = { find: (name: string) => known.get(fold(name)), currency, today: deps.clock.today() }
  const rows = table.rows.map((row) => readLotRow(row, context))
  const problems = rows.filter((row) => row.outcome === 'problem').length
  const report: ImportReport = {
    dryRun,
    added: rows.length - problems,
    problems,
    ignoredColumns: table.columns.filter((name) => !LOT_COLUMNS.some((column) => column === name)),
    currency,
    rows,
  }
  if (dryRun) return report
  if (problems > 0) throw refusal(report)
  write(deps.db, (tx) => {
    for (const row of rows)
      addLot(
        deps,
        memberId,
        {
          ingredientId: row.ingredientId as string,
          quantity: row.quantity as number,
          costMinor: row.costMinor ?? 0,
          bestBefore: row.bestBefore,
          openedOn: row.openedOn,
          shelf: row.shelf,
          donor: row.donor,
          lotCode: row.lotCode,
        },
        tx,
      )
  })
  return report
}

function knownIngredients(deps: Deps): Map<string, KnownIngredient> {
  const rows = deps.db.select().from(ingredients).where(eq(ingredients.archived, false)).all()
  return new Map(rows.map((row) => [fold(row.name), row]))
}

const fold = (name: string) => name.trim().toLowerCase().replace(/\s+/g, ' ')

function refusal({ rows, problems }: ImportReport) {
  const errors = rows.flatMap((row) =>
    row.messages.map(({ column, message }) => ({ path: `rows.${row.line}.${column}`, message })),
  )
  const which = problems === 1 ? 'One row needs' : `${problems} rows need`
  return new AppError('invalid', `${which} another look. Nothing was added.`, {
    errors: errors.slice(0, 200),
    body: { rows: rows.filter((row) => row.outcome === 'problem').slice(0, 200) },
  })
}
