/** Reads what a person typed: a comma or a point, thin spaces between thousands. Undefined when empty, NaN when no number. */
export function readNumber(text: string): number | undefined {
  const plain = text.replace(/[\s\u00A0\u202F]/g, '').replace('\u2212', '-')
  if (plain === '') return undefined
  return /^[+-]?(\d+([.,]\d*)?|[.,]\d+)$/.test(plain) ? Number(plain.replace(',', '.')) : NaN
}

export function writeNumber(value: number | undefined, decimals?: number): string {
  if (value === undefined || Number.isNaN(value)) return ''
  return decimals === undefined ? String(value) : value.toFixed(decimals)
}
