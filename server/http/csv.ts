import { CsvError, parse } from 'csv-parse/sync'
import { stringify } from 'csv-stringify/sync'
import { invalidField } from '../errors.ts'
import type { FileReply } from './serve.ts'

export type CsvCell = string | number | null

/**
 * A CSV file (RFC 4180, with the byte-order mark that spreadsheets want). Text that a spreadsheet would take for a formula
 * gets an apostrophe in front.
 */
export function csvFile(name: string, columns: string[], rows: CsvCell[][]): FileReply {
  const body = stringify([columns, ...rows], {
    bom: true,
    escape_formulas: true,
    record_delimiter: 'windows',
  })
  return { body, type: 'text/csv; charset=utf-8', downloadName: name }
}

export interface CsvTable {
  columns: string[]
  /** One per row that holds anything, with the line it begins on. */
  rows: { line: number; cells: Record<string, string> }[]
}

/**
 * Reads a table with a header: comma, semicolon or tab, UTF-8 or the Western code page older spreadsheets write. Headers
 * are read in lower case with `_` for what is no letter or digit; an apostrophe put before a formula is taken off.
 * @throws AppError `invalid` when it is no table, or is longer than `maxRows`
 */
export function readCsv(field: string, bytes: Buffer, maxRows: number): CsvTable {
  const text = decode(bytes)
  if (text.includes('\u0000'))
    throw invalidField(field, 'That is not a CSV file. Save the sheet as CSV first.')
  const records = parseRecords(field, text)
  const [header, ...rows] = records
  if (!header || header.cells.every((cell) => cell === ''))
    throw invalidField(field, 'The file is empty. Its first line should name the columns.')
  if (rows.length > maxRows)
    throw invalidField(field, `That is ${rows.length} rows. Send no more than ${maxRows} at once.`)
  const columns = header.cells.map(columnName)
  const wide = rows.find(({ cells }) => cells.slice(columns.length).some((cell) => cell !== ''))
  if (wide)
    throw invalidField(
      field,
      `Line ${wide.line} has more cells than the first line has names. Look for a stray comma.`,
    )
  return {
    columns: columns.filter((name) => name !== ''),
    rows: rows.map(({ line, cells }) => ({
      line,
      cells: Object.fromEntries(columns.map((name, index) => [name, undefuse(cells[index] ?? '')])),
    })),
  }
}

function parseRecords(field: string, text: string): { line: number; cells: string[] }[] {
  try {
    const parsed = parse(text, {
      bom: true,
      delimiter: likelyDelimiter(text),
      info: true,
      record_delimiter: ['\r\n', '\n', '\r'],
      relax_column_count: true,
      skip_empty_lines: true,
      skip_records_with_empty_values: true,
      trim: true,
      max_record_size: 20_000,
    }) as unknown as { info: { lines: number }; record: string[] }[]
    return parsed.map(({ info, record }) => ({ line: info.lines, cells: record }))
  } catch (error) {
    if (!(error instanceof CsvError)) throw error
    throw invalidField(field, 'That could not be read as CSV. Look for a quotation mark that is not closed.')
  }
}

function decode(bytes: Buffer): string {
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes)
  } catch {
    return new TextDecoder('windows-1252').decode(bytes)
  }
}

function likelyDelimiter(text: string): string {
  const header = text.slice(0, text.search(/[\r\n]|$/))
  const count = (mark: string) => header.split(mark).length
  return [',', ';', '\t'].sort((a, b) => count(b) - count(a))[0] as string
}

const columnName = (text: string) =>
  undefuse(text)
    .toLowerCase()
    .replace(/[^\p{L}\p{N}]+/gu, '_')
    .replace(/^_+|_+$/g, '')

const undefuse = (cell: string) => (/^'[=+\-@\t\r\uFF1D\uFF0B\uFF0D\uFF20]/.test(cell) ? cell.slice(1) : cell)
