/** Fewest characters of a password that stands alone (NIST SP 800-63B-4, 3.1.1.2). */
export const PASSWORD_MIN = 15
/** Longest taken; more is refused, never cut. */
export const PASSWORD_MAX = 256

/** Words of this place: a password made of them is the first that anyone would try. */
const CONTEXT = [
  'barmhouse',
  'demijohn',
  'homebrew',
  'password',
  'passphrase',
  'fermentation',
  'letmein',
  'qwertyuiop',
]

export type PasswordFault = 'too-short' | 'too-long' | 'common' | 'personal' | 'repetitive'

const WORDS: Record<PasswordFault, string> = {
  'too-short': `Use at least ${PASSWORD_MIN} characters: four or five words in a row will do.`,
  'too-long': `Keep it to ${PASSWORD_MAX} characters.`,
  common: 'Too many people use that one. Choose words that only you would put together.',
  personal: 'That is mostly your name, your e-mail address or a word from here. Choose other words.',
  repetitive: 'That repeats itself or runs along the keyboard. Choose other words.',
}

/** What to tell a person whose password was refused. */
export const passwordFaultInWords = (fault: PasswordFault) => WORDS[fault]

/**
 * Why a password is refused, or undefined when it may be used: length first, no rules about kinds of characters.
 * `isCommon` looks it up in whatever list of common passwords the caller has. Counted in code points after NFC.
 */
export function passwordFault(
  password: string,
  about: { name: string; email: string },
  isCommon: (password: string) => boolean = () => false,
): PasswordFault | undefined {
  const text = password.normalize('NFC')
  const length = [...text].length
  if (length < PASSWORD_MIN) return 'too-short'
  if (length > PASSWORD_MAX) return 'too-long'
  const folded = text.toLowerCase()
  if (isCommon(folded)) return 'common'
  if (new Set(folded.replace(/\s/g, '')).size < 5 || isRun(folded)) return 'repetitive'
  const personal = [...about.name.split(/\s+/), ...about.email.split(/[@.]/), ...CONTEXT]
    .map((word) => word.toLowerCase())
    .filter((word) => word.length >= 3)
    .sort((a, b) => b.length - a.length)
  const rest = personal.reduce((left, word) => left.replaceAll(word, ''), folded).replace(/[\s\d\W_]/g, '')
  if (rest.length < 5) return 'personal'
  return undefined
}

/** `abcdefghijklmnop`, `987654321098765`: each character one step on from the last, either way. */
function isRun(text: string): boolean {
  const steps = [...text].slice(1).map((c, i) => (c.codePointAt(0) ?? 0) - (text.codePointAt(i) ?? 0))
  const same = (step: number) => steps.filter((s) => s === step || s === -9 * step).length
  return Math.max(same(1), same(-1)) >= steps.length - 2
}
