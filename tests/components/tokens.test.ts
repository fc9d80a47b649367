import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { DARK, LIGHT } from '@/theme/palette'

const css = readFileSync('src/theme/tokens.css', 'utf8')
const tokensIn = (selector: string) => {
  const block = css.slice(css.indexOf(selector)).split('}')[0] ?? ''
  return Object.fromEntries(
    [...block.matchAll(/--([\w-]+): (#[0-9a-f]{6});/g)].map(([, name, value]) => [name, value]),
  )
}
const lower = (palette: Record<string, string>) =>
  Object.fromEntries(Object.entries(palette).map(([name, value]) => [name, value.toLowerCase()]))

describe('the colours of the style sheet are those of the palette', () => {
  it('in the light', () => expect(tokensIn(':root {')).toEqual(lower(LIGHT)))
  it('where the device is dark', () =>
    expect(tokensIn(":root:not([data-theme='light']) {")).toEqual(lower(DARK)))
  it('where dark was chosen', () => expect(tokensIn(":root[data-theme='dark'] {")).toEqual(lower(DARK)))
})
