/** Something that moved an estimate, with which way. */
export interface Reason {
  fact: string
  why?: string
  effect: 'lowers' | 'raises' | 'little'
}
