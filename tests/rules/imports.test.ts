import { cpSync, existsSync, mkdirSync, mkdtempSync, rmSync, symlinkSync, writeFileSync } from 'node:fs'
import { execFileSync } from 'node:child_process'
import { tmpdir } from 'node:os'
import { dirname, join, resolve } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import rules from '@/.dependency-cruiser.mjs'

interface Violation {
  rule: { name: string }
  from: string
}

// One violation of each rule at least: the file that sins, and the line it sins with.
const PLANTED: Record<string, [file: string, line: string][]> = {
  'no-cycles': [
    ['lib/domain/planted-a.ts', "import './planted-detour'"],
    ['lib/domain/planted-detour.ts', "import './planted-a'"],
  ],
  'nothing-unresolved': [['lib/domain/planted-unresolved.ts', "import './nowhere'"]],
  'product-without-development-packages': [['lib/web/planted-development.ts', "import 'fast-check'"]],
  'app-decides-nothing': [
    ['app/planted-query.ts', "import '@/db/connection'"],
    ['app/planted-kysely.ts', "import { sql } from 'kysely'\nexport const one = sql`1`"],
    ['app/planted-type.ts', "import type { DB } from '@/db/tables'\nexport type Rows = DB"],
  ],
  'statistics-stand-alone': [['lib/statistics/planted-ours.ts', "import '@/lib/domain/errors'"]],
  'statistics-few-packages': [['lib/statistics/planted-package.ts', "import 'luxon'"]],
  'distributions-behind-one-door': [
    ['lib/statistics/planted-jstat.ts', "import 'jstat'"],
    ['lib/statistics/planted-random.ts', "import 'pure-rand/generator/mersenne'"],
    ['lib/use-cases/planted-stdlib.ts', "import '@stdlib/stats-base-dists-t-cdf'"],
  ],
  'mathjs-behind-two-doors': [['lib/statistics/planted-mathjs.ts', "import 'mathjs'"]],
  'domain-is-pure': [
    ['lib/domain/planted-query.ts', "import '@/db/connection'"],
    ['lib/domain/planted-config.ts', "import '@/lib/config'"],
  ],
  'anonymous-knows-no-names': [['db/anonymous/planted.ts', "import '@/db/queries/laboratories'"]],
  'committee-and-public-reach-no-vault': [
    ['app/(public)/planted.ts', "import '@/lib/use-cases/planted-detour'"],
    ['app/(work)/committee/planted.ts', "import '@/lib/use-cases/planted-detour'"],
    ['lib/use-cases/planted-detour.ts', "import '@/db/queries/laboratories'"],
  ],
  'queries-know-no-layer-above': [['db/queries/planted.ts', "import '@/lib/config'"]],
  'framework-stays-outside': [['lib/use-cases/planted-next.ts', "import 'next/headers'"]],
  'use-cases-know-no-door': [['lib/use-cases/planted-web.ts', "import '@/lib/web/paths'"]],
  'sheets-stand-below': [['lib/spreadsheet/planted.ts', "import '@/db/connection'"]],
  'one-writer-of-workbooks': [['lib/web/planted-exceljs.ts', "import 'exceljs'"]],
  'migrations-describe-the-past': [['migrations/planted.ts', "import '@/lib/domain/errors'"]],
  'roots-are-not-imported': [['lib/web/planted-root.ts', "import '@/lib/commands/free-port'"]],
  'demonstration-stays-in-its-place': [['lib/web/planted-seed.ts', "import '@/db/seed/planted'"]],
  'nothing-imports-fakes': [['lib/mail/planted-fake.ts', "import '@/fakes/mail-relay'"]],
  'nothing-imports-tests': [['lib/mail/planted-test.ts', "import '@/tests/support/planted'"]],
}

// Files that planted lines point at, as bare as they can be: the rules look at paths alone.
const TARGETS = [
  'db/connection.ts',
  'db/queries/laboratories.ts',
  'db/seed/planted.ts',
  'db/tables.ts',
  'fakes/mail-relay.ts',
  'lib/commands/free-port.ts',
  'lib/config.ts',
  'lib/domain/errors.ts',
  'lib/web/paths.ts',
  'tests/support/planted.ts',
]

const ROOT = resolve('.')
const FOLDERS = ['app', 'db', 'fakes', 'lib', 'migrations', 'tests']

function cruise(folder: string): Violation[] {
  const program = join(ROOT, 'node_modules/dependency-cruiser/bin/dependency-cruise.mjs')
  const flags = ['--config', '.dependency-cruiser.mjs', '--output-type', 'json']
  const output = execFileSync(process.execPath, [program, ...flags, ...FOLDERS], {
    cwd: folder,
    encoding: 'utf8',
    maxBuffer: 64 * 1024 * 1024,
  })
  return (JSON.parse(output) as { summary: { violations: Violation[] } }).summary.violations
}

describe('the import rules', () => {
  it('hold in this checkout', () => {
    expect(cruise(ROOT).map(({ rule, from }) => `${rule.name}: ${from}`)).toEqual([])
  }, 60_000)

  it('advise in one sentence each', () => {
    for (const { comment } of rules.forbidden ?? []) expect(comment).toMatch(/^[A-Z@][^\n]+\.$/)
  })

  it('name only folders and files that exist', () => {
    const missing = patternsOf(rules.forbidden)
      .flatMap(pathsNamedBy)
      .filter((path) => !existsSync(path))
    expect(missing).toEqual([])
  })

  it('have a planted violation each', () => {
    expect(Object.keys(PLANTED).sort()).toEqual((rules.forbidden ?? []).map(({ name }) => name!).sort())
  })
})

describe('a planted violation', () => {
  const folder = mkdtempSync(join(tmpdir(), 'evenlot-rules-'))
  let violations: Violation[]

  beforeAll(() => {
    for (const name of ['.dependency-cruiser.mjs', 'tsconfig.json', 'package.json'])
      cpSync(name, join(folder, name))
    symlinkSync(join(ROOT, 'node_modules'), join(folder, 'node_modules'))
    for (const name of FOLDERS) mkdirSync(join(folder, name))
    for (const path of TARGETS) plant(folder, path, 'export const nothing = 0')
    for (const [path, line] of Object.values(PLANTED).flat()) plant(folder, path, line)
    violations = cruise(folder)
  }, 60_000)
  afterAll(() => rmSync(folder, { recursive: true, force: true }))

  for (const [name, files] of Object.entries(PLANTED)) {
    it(`of ${name} is caught`, () => {
      const caught = violations.filter(({ rule }) => rule.name === name).map(({ from }) => from)
      // A detour only leads there; the one that takes it is reported.
      const guilty = files.map(([path]) => path).filter((path) => !path.includes('detour'))
      expect(caught).toEqual(expect.arrayContaining(guilty))
    })
  }
})

function plant(folder: string, path: string, text: string): void {
  mkdirSync(join(folder, dirname(path)), { recursive: true })
  writeFileSync(join(folder, path), `${text}\n`)
}

/** Every pattern of our own paths that stands anywhere in the rules. */
function patternsOf(part: unknown): string[] {
  if (typeof part === 'string') return part.startsWith('^') ? [part] : []
  return part && typeof part === 'object' ? Object.values(part).flatMap(patternsOf) : []
}

/** The paths a pattern stands for: the rules use plain names, choices between them, and "all but these". */
function pathsNamedBy(pattern: string): string[] {
  const plain = pattern.replace(/^\^/, '').replaceAll('$', '').replaceAll('\\(', '<').replaceAll('\\)', '>')
  return choices(plain.replaceAll('\\', '').replaceAll('(?!', '(')).map((path) =>
    path.replaceAll('<', '(').replaceAll('>', ')').replace(/\/$/, ''),
  )
}

function choices(text: string): string[] {
  const choice = /^([^(]*)\(([^)]*)\)(.*)$/.exec(text)
  if (!choice) return [text]
  const [, before, words, after] = choice
  return words!.split('|').flatMap((word) => choices(`${before}${word}${after}`))
}
