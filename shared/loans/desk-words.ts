const NUMBERS = [
  'nothing',
  'one',
  'two',
  'three',
  'four',
  'five',
  'six',
  'seven',
  'eight',
  'nine',
  'ten',
  'eleven',
  'twelve',
]

/** Small counts as words, larger ones as figures: `7` is `seven`, `31` is `31`; 0 is `nothing`. */
export const countInWords = (count: number) => NUMBERS[count] ?? String(count)

const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1)

/** The title of the desk is its count: `Six to decide, eight to handle`. */
export function deskTitle(decide: number, handle: number): string {
  if (decide === 0 && handle === 0) return 'The desk is clear'
  if (decide === 0) return `${capital(countInWords(handle))} to handle`
  if (handle === 0) return `${capital(countInWords(decide))} to decide`
  return `${capital(countInWords(decide))} to decide, ${countInWords(handle)} to handle`
}

/** `1 day`, `3 days`. */
export const inDays = (days: number) => `${days} ${days === 1 ? 'day' : 'days'}`
