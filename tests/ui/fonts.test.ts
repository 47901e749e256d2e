import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { fontCoverage } from './font-coverage'

const faces = readdirSync('fonts').filter((name) => name.endsWith('.woff2'))
const coverage = new Map(faces.map((name) => [name, fontCoverage(join('fonts', name))]))

/** The files that may draw a sign of each stack, as app/fonts.ts and globals.css arrange them. */
const stacks = {
  heading: ['besley-500.woff2', 'besley-ext-500.woff2'],
  sans: ['instrument-sans.woff2', 'instrument-sans-ext.woff2', 'noto-sans-signs.woff2'],
  mono: ['red-hat-mono.woff2', 'red-hat-mono-ext.woff2'],
}
const shared = ['noto-sans-greek.woff2', 'noto-sans-math-signs.woff2']

describe('the shipped faces', () => {
  it.each(Object.keys(stacks) as (keyof typeof stacks)[])(
    'draw every sign of the sources in the %s stack',
    (stack) => {
      const missing = [...signsOfSources()].filter(
        ([sign]) =>
          ![...stacks[stack], ...shared].some((face) => coverage.get(face)!.has(sign.codePointAt(0)!)),
      )
      expect(
        missing.map(([sign, file]) => `${sign} U+${sign.codePointAt(0)!.toString(16)} in ${file}`),
      ).toEqual([])
    },
  )

  it.each([...'σνχαβλΔΣ≤≥√±²³½×·−–—‘’“”…→←°µ\u202f\u2009\u00a0ŁłŠžőǎ'])('draw %j in running text', (sign) => {
    const drawn = [...stacks.sans, ...shared].some((face) => coverage.get(face)!.has(sign.codePointAt(0)!))
    expect(drawn).toBe(true)
  })

  it('draw no sign that the range in app/fonts.ts keeps from being asked for', () => {
    const source = readFileSync('app/fonts.ts', 'utf8')
    for (const face of ['noto-sans-greek', 'noto-sans-signs', 'noto-sans-math-signs']) {
      const declared = new RegExp(
        `${face}\\.woff2[\\s\\S]*?unicode-range'[\\s\\S]*?value:\\s*'([^']+)'`,
      ).exec(source)
      const reachable = rangeOf(declared![1]!)
      const useful = [...coverage.get(`${face}.woff2`)!].filter((code) => code > 0x7f && code !== 0x200b)
      const kept = useful.filter((code) => !reachable(code)).map((code) => code.toString(16))
      // The minus sign is in every text face; Noto's is a passenger and must not be preferred to theirs.
      expect({ face, kept: kept.filter((code) => code !== '2212') }).toEqual({ face, kept: [] })
    }
  })

  it('come each with their licence', () => {
    const families = new Set(
      faces.map((name) => /^(besley|instrument-sans|red-hat-mono|noto-sans-math|noto-sans)/.exec(name)?.[1]),
    )
    for (const family of families) {
      expect(readFileSync(`fonts/LICENSE-${family}.txt`, 'utf8')).toContain(
        'SIL Open Font License, Version 1.1',
      )
    }
  })
})

describe('fontCoverage', () => {
  it('finds what a latin face has and does not find what it lacks', () => {
    const text = coverage.get('instrument-sans.woff2')!
    expect([...'Aé−'].every((sign) => text.has(sign.codePointAt(0)!))).toBe(true)
    expect([...'σ≤²'].some((sign) => text.has(sign.codePointAt(0)!))).toBe(false)
  })
})

// It names the look-alikes that people paste, in order to fold them away; none is shown by us.
const readersOfForeignSigns = ['lib/domain/reported-value.ts']

/** Every sign beyond ASCII that our screens, mails and rules may show, with a file it stands in. */
function signsOfSources(): Map<string, string> {
  const signs = new Map<string, string>()
  for (const folder of ['app', 'lib/mail', 'lib/domain']) {
    for (const file of sourcesUnder(folder)) {
      if (readersOfForeignSigns.includes(file)) continue
      // Controls and format characters have no shape; where they stand in a source they are being refused.
      const text = unescaped(readFileSync(file, 'utf8')).replace(/[\p{Cc}\p{Cf}\p{Zl}\p{Zp}]/gu, '')
      for (const sign of text) if (sign.codePointAt(0)! > 0x7f) signs.set(sign, file)
    }
  }
  return signs
}

function sourcesUnder(folder: string): string[] {
  return readdirSync(folder, { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && /\.tsx?$/.test(entry.name))
    .map((entry) => join(entry.parentPath, entry.name))
}

/** Signs written as `\u202f` are shown as much as those written out. */
function unescaped(source: string): string {
  return source.replace(/\\u([0-9a-fA-F]{4})/g, (_, code: string) => String.fromCharCode(parseInt(code, 16)))
}

function rangeOf(declaration: string): (code: number) => boolean {
  const ranges = declaration.split(',').map((part) => {
    const [first, last = first] = part.trim().replace('U+', '').split('-')
    return [parseInt(first!, 16), parseInt(last!, 16)] as const
  })
  return (code) => ranges.some(([first, last]) => code >= first && code <= last)
}
