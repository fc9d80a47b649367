import type { YeastForm } from '../brewing/vocabulary.ts'

interface LotFacts {
  strain: string
  form: YeastForm
  lotCode: string | null
}

const plain = (text: string) => text.normalize('NFKC').toLowerCase().replace(/\s+/g, ' ').trim()

/**
 * What packets of one lot have in common: strain, form and lot code, whatever the capitals and spaces. Undefined without
 * a code: such a packet shares its past with no other.
 */
export function lotKey({ strain, form, lotCode }: LotFacts): string | undefined {
  return lotCode ? JSON.stringify([plain(strain), form, plain(lotCode)]) : undefined
}
