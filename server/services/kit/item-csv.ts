import { parse } from 'csv-parse/sync'
import { stringify } from 'csv-stringify/sync'
import { z } from 'zod'
import { line, prose } from '#shared/http/fields'
import type { Item } from '#shared/kit/item-contract'
import { Tag } from '#shared/kit/item-contract'
import { ITEM_STATUSES } from '#shared/kit/vocabulary'
import { AppError } from '../../errors.ts'

/** Rows of a list that can be brought in at once. */
const MOST_ROWS = 2000

const yes = z.stringbool({ truthy: ['yes', 'true', '1', 'wild'], falsy: ['no', 'false', '0', ''] })
const cell = <T extends z.ZodType>(schema: T) =>
  z.preprocess((text) => (text === '' ? undefined : text), schema.optional())

/** One row of an imported list. An empty cell leaves what is there. */
const ItemCells = z.strictObject({
  tag: Tag,
  kind: line(80),
  status: cell(z.enum(ITEM_STATUSES)),
  shelf: cell(line(60)),
  wild: cell(yes),
  note: cell(prose(2000)),
})
export type ItemCells = z.output<typeof ItemCells>

export type ReadRow = { row: number; tag: string } & (
  { ok: true; cells: ItemCells } | { ok: false; message: string }
)

/** Columns of the export; `status` to `note` can be brought back in. */
const COLUMNS = [
  'tag',
  'kind',
  'status',
  'shelf',
  'wild',
  'note',
  'hygiene',
  'sanitisedUntil',
  'calibrationOffsetSg',
  'calibratedOn',
  'openFaults',
] as const

/** RFC 4180, with cells that a spreadsheet would take for a formula made plain text. */
export function itemsToCsv(items: readonly Item[]): string {
  const rows = items.map((item) => [
    item.tag,
    plain(item.kindName),
    item.status,
    plain(item.shelf ?? ''),
    item.wild ? 'yes' : 'no',
    plain(item.note),
    item.hygiene,
    item.sanitisedUntil ?? '',
    item.calibration?.offsetSg ?? '',
    item.calibration?.calibratedOn ?? '',
    item.openFaults,
  ])
  return stringify([[...COLUMNS], ...rows], { record_delimiter: '\r\n' })
}

const plain = (text: string) => (/^[=+\-@\t\r]/.test(text) ? `'${text}` : text)
const unplain = (text: string) => (/^'[=+\-@\t\r]/.test(text) ? text.slice(1) : text)

/**
 * Reads a list of items. Columns that only the export has are passed over, so that an export can be brought back.
 * @throws AppError `invalid` for a file that is no list of items at all
 */
export function itemsFromCsv(bytes: Buffer): ReadRow[] {
  const refuse = (message: string) =>
    new AppError('invalid', message, { errors: [{ path: 'file', message }] })
  let records: Record<string, string>[]
  try {
    const text = new TextDecoder('utf-8', { fatal: true }).decode(bytes)
    records = parse(text, {
      columns: true,
      bom: true,
      trim: true,
      skip_empty_lines: true,
      max_record_size: 20_000,
    })
  } catch {
    throw refuse('That is not a CSV file in UTF-8 with a heading on every column.')
  }
  if (records.length > MOST_ROWS) throw refuse(`Bring in at most ${MOST_ROWS} rows at once.`)
  const headings = Object.keys(records[0] ?? {})
  for (const needed of ['tag', 'kind'])
    if (!headings.includes(needed)) throw refuse(`The list needs a column called ${needed}.`)
  const strange = headings.find((heading) => !COLUMNS.some((column) => column === heading))
  if (strange !== undefined) throw refuse(`There is no column called ${strange.slice(0, 40)}.`)
  return records.map((record, index) => readRow(record, index + 2))
}

function readRow(record: Record<string, string>, row: number): ReadRow {
  const wanted = ['tag', 'kind', 'status', 'shelf', 'wild', 'note']
  const cells = Object.fromEntries(
    wanted.filter((name) => name in record).map((name) => [name, unplain(record[name] ?? '')]),
  )
  const read = ItemCells.safeParse(cells)
  const tag = (record.tag ?? '').slice(0, 40)
  if (read.success) return { row, tag: read.data.tag, ok: true, cells: read.data }
  const issue = read.error.issues[0]
  return { row, tag, ok: false, message: `${String(issue?.path[0] ?? 'row')}: ${issue?.message ?? ''}` }
}
