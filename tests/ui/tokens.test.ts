import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'

// What design.md, "Colour", sets; the washes and the edge of controls are the product's own additions.
const designed = {
  light: {
    paper: '#F7F5F0',
    sheet: '#FFFFFF',
    ink: '#1B2528',
    'ink-soft': '#55625F',
    rule: '#DAD6CB',
    verdigris: '#0E5E5C',
    'verdigris-wash': '#E3EFEC',
    ochre: '#8A5A00',
    madder: '#9B2335',
    moss: '#45662A',
    indigo: '#2F4B7C',
  },
  dark: {
    paper: '#121918',
    sheet: '#1A2322',
    ink: '#E9ECE7',
    'ink-soft': '#A3AFAB',
    rule: '#33403E',
    verdigris: '#6FC2B8',
    'verdigris-wash': '#17302E',
    ochre: '#E0B25A',
    madder: '#EE8A93',
    moss: '#A7C785',
    indigo: '#9DB4E3',
  },
}

const css = readFileSync('app/globals.css', 'utf8')
const themes = {
  light: tokensUnder(":root,\n[data-theme='light'] {"),
  dark: tokensUnder("\n[data-theme='dark'] {"),
}
const grounds = ['paper', 'sheet']
const hues = ['verdigris', 'ochre', 'madder', 'moss', 'indigo']

describe.each(['light', 'dark'] as const)('the %s tokens', (theme) => {
  const tokens = themes[theme]

  it('are those of the design', () => {
    expect(tokens).toMatchObject(
      Object.fromEntries(Object.entries(designed[theme]).map(([name, value]) => [name, value.toLowerCase()])),
    )
  })

  const textPairs = [
    ...['ink', 'ink-soft', ...hues].flatMap((text) => grounds.map((ground) => [text, ground])),
    // On its own wash a hue is the word of a notice or the text of a pressed button; ink and soft ink lie on all.
    ...hues.flatMap((hue) => [
      [hue, `${hue}-wash`],
      ['ink', `${hue}-wash`],
      ['ink-soft', `${hue}-wash`],
    ]),
    // The text of a filled button, at rest and under the pointer.
    ['paper', 'verdigris'],
    ['paper', 'ink'],
  ] as [string, string][]

  it.each(textPairs)('give %s on %s at least 4.5 to 1, for text', (text, ground) => {
    expect(contrast(colour(tokens, text), colour(tokens, ground))).toBeGreaterThanOrEqual(4.5)
  })

  it.each(grounds)('give the edge of a control at least 3 to 1 on %s', (ground) => {
    expect(contrast(colour(tokens, 'edge'), colour(tokens, ground))).toBeGreaterThanOrEqual(3)
  })
})

describe('the tokens of globals.css', () => {
  it('are the same by the system and by choice, when dark', () => {
    expect(tokensUnder('  :root:not([data-theme]) {')).toEqual(themes.dark)
  })

  it('are light on paper, whose ground is white', () => {
    expect(tokensUnder('  :root:root,\n  [data-theme][data-theme] {\n    color-scheme: light;')).toEqual({
      ...themes.light,
      paper: '#ffffff',
    })
  })

  it('are each named in the Tailwind configuration', () => {
    const configuration = readFileSync('tailwind.config.ts', 'utf8')
    const missing = Object.keys(themes.light).filter((name) => !configuration.includes(`var(--${name})`))
    expect(missing).toEqual([])
  })
})

describe('contrast', () => {
  // WCAG 2.2, definition of contrast ratio: 21 for black on white, 1 for a colour on itself. #767676 is the
  // lightest grey that passes 4.5 on white (4.54, WebAIM's and W3C's examples, from memory).
  it.each([
    ['#000000', '#ffffff', 21],
    ['#ffffff', '#ffffff', 1],
    ['#767676', '#ffffff', 4.54],
  ])('of %s on %s is %d', (text, ground, ratio) => {
    expect(contrast(text, ground)).toBeCloseTo(ratio, 2)
  })
})

function tokensUnder(opening: string): Record<string, string> {
  const start = css.indexOf(opening)
  if (start < 0) throw new Error(`globals.css has no rule that opens with ${opening}`)
  const body = css.slice(start + opening.length, css.indexOf('}', start))
  return Object.fromEntries(
    Array.from(body.matchAll(/--([\w-]+): (#[0-9a-f]{6});/g), ([, name, value]) => [name, value]),
  )
}

function colour(tokens: Record<string, string>, name: string): string {
  const value = tokens[name]
  if (!value) throw new Error(`There is no token called ${name}.`)
  return value
}

function contrast(one: string, other: string): number {
  const [lighter, darker] = [luminance(one), luminance(other)].sort((a, b) => b - a) as [number, number]
  return (lighter + 0.05) / (darker + 0.05)
}

/** WCAG 2.2, relative luminance. */
function luminance(hex: string): number {
  const [red, green, blue] = [1, 3, 5].map((at) => {
    const channel = parseInt(hex.slice(at, at + 2), 16) / 255
    return channel <= 0.04045 ? channel / 12.92 : ((channel + 0.055) / 1.055) ** 2.4
  }) as [number, number, number]
  return 0.2126 * red + 0.7152 * green + 0.0722 * blue
}
