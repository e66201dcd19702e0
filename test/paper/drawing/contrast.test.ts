/** Contrast of the theme by WCAG 2.2's formula (relative luminance of sRGB): 4.5 for words, 3 for lines that mean something. */
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { expect, test } from 'vitest'
import { themes } from '../../../src/paper/drawing/theme.ts'

function luminance(colour: string): number {
  const [r, g, b] = [1, 3, 5].map((at) => {
    const c = Number.parseInt(colour.slice(at, at + 2), 16) / 255
    return c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4
  })
  return 0.2126 * r! + 0.7152 * g! + 0.0722 * b!
}

function ratio(a: string, b: string): number {
  const [high, low] = [luminance(a), luminance(b)].sort((p, q) => q - p)
  return (high! + 0.05) / (low! + 0.05)
}

test('the formula gives 21 for black on white (exact: WCAG 2.2, contrast ratio)', () => {
  expect(ratio('#000000', '#FFFFFF')).toBeCloseTo(21, 9)
})

for (const [name, theme] of Object.entries(themes)) {
  test(`${name}: words have 4.5 on everything that they stand on, lines 3`, () => {
    for (const words of ['ink', 'ink2', 'hand', 'fault', 'valley'] as const) expect(ratio(theme[words], theme.paper), `${words} on paper`).toBeGreaterThanOrEqual(4.5)
    for (const tone of ['cool1', 'cool2', 'cool3', 'cool4', 'cool5', 'cool6', 'warm1', 'warm2', 'group1', 'group2', 'group3', 'group4', 'handWash', 'faultWash'] as const) {
      expect(ratio(theme.ink, theme[tone]), `ink on ${tone}`).toBeGreaterThanOrEqual(4.5)
    }
    expect(ratio(theme.fault, theme.faultWash), 'fault on its wash').toBeGreaterThanOrEqual(4.5)
    expect(ratio(theme.rule, theme.paper), 'rule').toBeGreaterThanOrEqual(3)
  })
}

test('the style sheet repeats the tokens as they are', () => {
  const css = readFileSync(join(import.meta.dirname, '../../../src/page/app/sheet.css'), 'utf8')
  const [day, night] = [/:root \{([^}]*)\}/, /:root\[data-theme='night'\] \{([^}]*)\}/].map((pattern) => pattern.exec(css)![1]!)
  for (const [block, theme] of [[day!, themes.day], [night!, themes.night]] as const) {
    for (const [, token, colour] of block.matchAll(/--([a-z0-9-]+): (#[0-9A-F]{6})/g)) {
      const key = token!.replace(/-w/, 'W') as keyof typeof theme
      expect(theme[key], token).toBe(colour)
    }
  }
})
