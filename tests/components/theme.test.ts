import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { DARK, LIGHT, type Token } from '@/theme/palette'

const css = readFileSync('src/theme/tokens.css', 'utf8')

/** Relative luminance and contrast, WCAG 2.2, definitions of "relative luminance" and "contrast ratio". */
function luminance(hex: string): number {
  const [r, g, b] = [1, 3, 5].map((at) => {
    const part = parseInt(hex.slice(at, at + 2), 16) / 255
    return part <= 0.04045 ? part / 12.92 : ((part + 0.055) / 1.055) ** 2.4
  }) as [number, number, number]
  return 0.2126 * r + 0.7152 * g + 0.0722 * b
}
function contrast(a: string, b: string): number {
  const [high, low] = [luminance(a), luminance(b)].sort((x, y) => y - x) as [number, number]
  return (high + 0.05) / (low + 0.05)
}

const GROUNDS: Token[] = ['paper', 'sheet', 'well']
const TEXTS: [Token, Token[]][] = [
  [
    'ink',
    [...GROUNDS, 'barm-tint', 'barm-mid', 'must-tint', 'sound-tint', 'warn-tint', 'fault-tint', 'sloe-tint'],
  ],
  ['quiet', GROUNDS],
  ['barm', [...GROUNDS, 'barm-tint', 'warn-tint']],
  ['on-barm', ['barm']],
  ['must', [...GROUNDS, 'must-tint']],
  ['sound', [...GROUNDS, 'sound-tint']],
  ['warn', [...GROUNDS, 'warn-tint']],
  ['fault', [...GROUNDS, 'fault-tint']],
  ['sloe', [...GROUNDS, 'sloe-tint']],
]

describe.each([
  ['light', LIGHT],
  ['dark', DARK],
] as const)('the %s colours', (_name, palette) => {
  it.each(TEXTS.flatMap(([text, grounds]) => grounds.map((ground) => [text, ground] as const)))(
    '%s on %s reads at 4.5 to 1 or better (WCAG 2.2, 1.4.3)',
    (text, ground) => {
      expect(contrast(palette[text], palette[ground])).toBeGreaterThanOrEqual(4.5)
    },
  )
  it.each(GROUNDS)('edges of controls and the liquid show on %s at 3 to 1 (WCAG 2.2, 1.4.11)', (ground) => {
    expect(contrast(palette.edge, palette[ground])).toBeGreaterThanOrEqual(3)
    expect(contrast(palette['must-fill'], palette[ground])).toBeGreaterThanOrEqual(3)
  })
})

describe('tokens.css', () => {
  const blocks = css.split('--paper:').slice(1)
  const read = (block: string) =>
    new Map(
      [...`--paper:${block}`.matchAll(/--([\w-]+): (#\w{6});/g)].map(
        (match) => [match[1], match[2]] as const,
      ),
    )

  it('carries the palette: light, dark by device, dark by choice', () => {
    const wanted = (palette: object) =>
      new Map(Object.entries(palette).map(([name, value]) => [name, String(value).toLowerCase()]))
    expect(blocks.map(read)).toEqual([wanted(LIGHT), wanted(DARK), wanted(DARK)])
  })
})
