/**
 * The tag that comes after those of a kind: `DJ-09`, `DJ-10` give `DJ-11`. Undefined where they do not end in a number.
 */
export function nextTag(tags: readonly string[]): string | undefined {
  const numbered = tags
    .map((tag) => /^(.*?)(\d+)$/.exec(tag))
    .filter((match) => match !== null)
    .sort((a, b) => Number(a[2]) - Number(b[2]))
  const last = numbered.at(-1)
  if (!last) return undefined
  const [, stem = '', digits = ''] = last
  return stem + String(Number(digits) + 1).padStart(digits.length, '0')
}
