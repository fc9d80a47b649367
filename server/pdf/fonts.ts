import { readFileSync } from 'node:fs'
import { createRequire } from 'node:module'
import { dirname, join } from 'node:path'

const require = createRequire(import.meta.url)
const FAMILY = 'atkinson-hyperlegible-next'

/** Letters the Latin file does not have: central European and the like stand in a second file, and only they do. */
const EXTENDED = /[\u0100-\u0152\u0154-\u02ba\u02bd-\u02c5\u1e00-\u1eff]/u

export type FontName = 'plain' | 'bold' | 'plain-extended' | 'bold-extended'

let loaded: Record<FontName, Buffer> | undefined

/** The house type as pdf files take it, read once. */
export function pdfFonts(): Record<FontName, Buffer> {
  loaded ??= {
    plain: file('latin-400'),
    bold: file('latin-700'),
    'plain-extended': file('latin-ext-400'),
    'bold-extended': file('latin-ext-700'),
  }
  return loaded
}

function file(part: string): Buffer {
  const folder = dirname(require.resolve(`@fontsource/${FAMILY}/package.json`))
  return readFileSync(join(folder, 'files', `${FAMILY}-${part}-normal.woff`))
}

/** A stretch of text with the file it is set from. */
export interface Piece {
  text: string
  font: FontName
}

/** A word cut where its letters come from the other file: `Łódź` is four pieces in two fonts. */
export function piecesOf(word: string, bold: boolean): Piece[] {
  const weight = bold ? 'bold' : 'plain'
  const pieces: Piece[] = []
  for (const letter of word) {
    const font: FontName = EXTENDED.test(letter) ? `${weight}-extended` : weight
    const last = pieces.at(-1)
    if (last?.font === font) last.text += letter
    else pieces.push({ text: letter, font })
  }
  return pieces
}
