/**
 * The colours, once, as data: the theme of Naive UI needs real values, and the contrast test reads them.
 * `tokens.css` carries the same values as custom properties; a test holds the two together.
 */
export const LIGHT = {
  paper: '#FBF8F2',
  sheet: '#FFFDF9',
  well: '#F3EDE1',
  ink: '#20292B',
  quiet: '#566063',
  board: '#CFC6B4',
  hair: '#E6DFD1',
  edge: '#857C6B',
  barm: '#1C5F5A',
  'on-barm': '#FFFDF9',
  'barm-tint': '#DCEAE5',
  'barm-mid': '#BBD9D2',
  must: '#9C4F08',
  'must-fill': '#C07218',
  'must-tint': '#F8E5C9',
  bubble: '#F8E5C9',
  sound: '#2B7146',
  'sound-tint': '#DFEDDD',
  warn: '#835600',
  'warn-tint': '#FAEBC4',
  fault: '#A3352B',
  'fault-tint': '#F8E1DB',
  sloe: '#5B3B74',
  'sloe-tint': '#EBE2F1',
} as const

export type Token = keyof typeof LIGHT

export const DARK: Record<Token, `#${string}`> = {
  paper: '#171C1D',
  sheet: '#1F2627',
  well: '#111516',
  ink: '#ECE7DC',
  quiet: '#A9B1AE',
  board: '#4A5455',
  hair: '#2F3839',
  edge: '#818B8A',
  barm: '#7CC6BD',
  'on-barm': '#0F2422',
  'barm-tint': '#213B3A',
  'barm-mid': '#2F5552',
  must: '#E9A759',
  'must-fill': '#C98A3B',
  'must-tint': '#3A2D1B',
  bubble: '#F6E2BE',
  sound: '#86CF9F',
  'sound-tint': '#20372A',
  warn: '#E5B95C',
  'warn-tint': '#3A3018',
  fault: '#F0968C',
  'fault-tint': '#422724',
  sloe: '#C3A4DC',
  'sloe-tint': '#34293E',
}
