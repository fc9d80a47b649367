const SPACES = /[\s\u00A0\u202F]/g
const NUMBER = /^[+-]?(\d+([.,]\d*)?|[.,]\d+)$/

/**
 * Reads a number as people type it: a comma or a point for the decimals, thin spaces between thousands.
 * `parseFigure('1,066')` is 1.066. Undefined for empty text and for what is no number.
 */
export function parseFigure(text: string): number | undefined {
  const plain = text.replace(SPACES, '').replace('\u2212', '-')
  return NUMBER.test(plain) ? Number(plain.replace(',', '.')) : undefined
}

/**
 * Writes a number with exactly so many decimals, 0 to 6, and a point. Never "-0", and a dash for what is no number.
 * `formatFigure(-0.0004, 3)` is "0.000".
 */
export function formatFigure(value: number | undefined, decimals: number): string {
  if (value === undefined || !Number.isFinite(value)) return '–'
  const text = Math.abs(value).toFixed(decimals)
  return value < 0 && Number(text) !== 0 ? `\u2212${text}` : text
}

/**
 * Writes an amount to about three figures, as a scale shows it: 2.36, 26.8, 1490.
 * Trailing zeros after the point are left out.
 */
export function formatAmount(value: number | undefined): string {
  if (value === undefined || !Number.isFinite(value)) return '–'
  const size = Math.abs(value)
  const decimals = size >= 100 ? 0 : size >= 10 ? 1 : size >= 0.1 ? 2 : 3
  const rounded = size >= 1000 ? Math.round(value / 10) * 10 : value
  const text = formatFigure(rounded, decimals)
  return text.includes('.') ? text.replace(/\.?0+$/, '') : text
}
