import PDFDocument from 'pdfkit'
import { create as createQr } from 'qrcode'
import type { Label, LabelRun } from '#shared/batches/label'
import { pdfFonts, piecesOf, type Piece } from './fonts.ts'

interface Sheet {
  label: Label
  /** Where the QR code leads. */
  address: string
  rows: number
  columns: number
  /** Written into the file, so that the same label gives the same file. */
  madeAt: Date
}

interface Box {
  x: number
  y: number
  width: number
  height: number
}

/** One paragraph of a label. `spare`: left out first when the label is small. */
interface Paragraph {
  runs: LabelRun[]
  size: number
  spare?: boolean
}

interface Word {
  pieces: (Piece & { width: number })[]
  blank: boolean
  width: number
}

const MM = 72 / 25.4
const A4 = { width: 210 * MM, height: 297 * MM }
const MARGIN = 10 * MM
const PADDING = 3 * MM
const LEADING = 1.22
/** Type shrinks to fit, in steps, and never under this share of its size. */
const SHRINKS = [1, 0.92, 0.85, 0.78, 0.72, 0.66, 0.6, 0.55, 0.5]

type Doc = InstanceType<typeof PDFDocument>

/** A sheet of A4 with the same label in every cell, black on white, with hairlines to cut along. */
export function drawLabelSheet(sheet: Sheet): Doc {
  const doc = new PDFDocument({
    size: 'A4',
    margin: 0,
    lang: 'en-GB',
    displayTitle: true,
    info: { Title: `Labels: ${sheet.label.title}`, CreationDate: sheet.madeAt, Producer: 'Barmhouse' },
  })
  for (const [name, bytes] of Object.entries(pdfFonts())) doc.registerFont(name, bytes)
  const width = (A4.width - 2 * MARGIN) / sheet.columns
  const height = (A4.height - 2 * MARGIN) / sheet.rows
  for (let row = 0; row < sheet.rows; row++)
    for (let column = 0; column < sheet.columns; column++)
      drawLabel(doc, sheet, { x: MARGIN + column * width, y: MARGIN + row * height, width, height })
  doc.end()
  return doc
}

function drawLabel(doc: Doc, { label, address }: Sheet, cell: Box) {
  doc.lineWidth(0.3).strokeColor('#000').rect(cell.x, cell.y, cell.width, cell.height).stroke()
  const box = {
    x: cell.x + PADDING,
    y: cell.y + PADDING,
    width: cell.width - 2 * PADDING,
    height: cell.height - 2 * PADDING,
  }
  const qr = Math.min(24 * MM, box.height * 0.42, box.width * 0.3)
  drawQr(doc, address, { x: box.x + box.width - qr, y: box.y + box.height - qr, width: qr, height: qr })
  const paragraphs = paragraphsOf(label, box)
  for (const shrink of SHRINKS) {
    for (const kept of [paragraphs, paragraphs.filter(({ spare }) => !spare)]) {
      const lines = layOut(doc, kept, box, qr, shrink)
      if (!lines && shrink !== SHRINKS.at(-1)) continue
      for (const line of lines ?? []) drawLine(doc, line)
      return
    }
  }
}

/** Sizes follow the height of the cell: a big label is read from across the table. */
function paragraphsOf(label: Label, box: Box): Paragraph[] {
  const base = Math.min(11, Math.max(7, box.height / 17))
  const plain = (text: string): LabelRun[] => [{ text, bold: false }]
  return [
    { runs: [{ text: label.title, bold: true }], size: base * 1.75 },
    { runs: [{ text: label.what, bold: true }], size: base * 1.1 },
    { runs: plain(label.from), size: base },
    ...(label.ingredients.length > 0 ? [{ runs: label.ingredients, size: base }] : []),
    ...(label.sulphites ? [{ runs: label.sulphites, size: base }] : []),
    { runs: plain(label.keep), size: base * 0.9, spare: true },
    { runs: [{ text: label.notForSale, bold: true }], size: base },
  ]
}

interface Line {
  words: Word[]
  x: number
  y: number
  size: number
}

/** Words set in lines that run around the QR code; undefined when they do not fit. */
function layOut(
  doc: Doc,
  paragraphs: readonly Paragraph[],
  box: Box,
  qr: number,
  shrink: number,
): Line[] | undefined {
  const lines: Line[] = []
  let y = box.y
  for (const paragraph of paragraphs) {
    const size = paragraph.size * shrink
    const height = size * LEADING
    let line: Line | undefined
    let used = 0
    for (const word of wordsOf(doc, paragraph.runs, size)) {
      const beside = y + height > box.y + box.height - qr - PADDING
      const room = box.width - (beside ? qr + PADDING : 0)
      if (line && used + word.width > room && !word.blank) {
        y += height
        line = undefined
      }
      if (!line) {
        if (y + height > box.y + box.height + 0.5) return undefined
        line = { words: [], x: box.x, y, size }
        lines.push(line)
        used = 0
        if (word.blank) continue
      }
      line.words.push(word)
      used += word.width
    }
    y += height * 1.18
  }
  return lines
}

/**
 * Words and the spaces between them. A word may change its weight on the way: `gluten),` breaks nowhere. One
 * too long for any line breaks after 22 letters.
 */
function wordsOf(doc: Doc, runs: readonly LabelRun[], size: number): Word[] {
  const words: Word[] = []
  for (const run of runs)
    for (const [at, text] of (run.text.match(/\s+|\S{1,22}/gu) ?? []).entries()) {
      const pieces = piecesOf(text, run.bold).map((piece) => ({
        ...piece,
        width: doc.font(piece.font).fontSize(size).widthOfString(piece.text),
      }))
      const width = pieces.reduce((sum, piece) => sum + piece.width, 0)
      const blank = text.trim() === ''
      const last = words.at(-1)
      if (at === 0 && last && !last.blank && !blank) {
        last.pieces.push(...pieces)
        last.width += width
      } else words.push({ pieces, blank, width })
    }
  return words
}

function drawLine(doc: Doc, { words, x, y, size }: Line) {
  let at = x
  doc.fillColor('#000').fontSize(size)
  for (const { text, font, width } of words.flatMap((word) => word.pieces)) {
    doc.font(font).text(text, at, y, { lineBreak: false })
    at += width
  }
}

function drawQr(doc: Doc, address: string, box: Box) {
  const { modules } = createQr(address, { errorCorrectionLevel: 'M' })
  const dot = box.width / modules.size
  for (let row = 0; row < modules.size; row++)
    for (let column = 0; column < modules.size; column++)
      if (modules.get(row, column)) doc.rect(box.x + column * dot, box.y + row * dot, dot, dot)
  doc.fillColor('#000').fill()
}
