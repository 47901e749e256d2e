import { existsSync, mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { dirname, join } from 'node:path'
import ts from 'typescript'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'

/** A folder of statistics and the folder of their tests, each by its path from the root of a checkout. */
const CORE = 'lib/statistics'
const TESTS = 'tests/statistics'

interface Source {
  /** From the folder of the core. */
  path: string
  text: string
  /** Functions, constants and classes that the file itself makes and exports. */
  exported: { name: string; comment: string }[]
}

function sourcesOf(root: string): Source[] {
  const paths = readdirSync(join(root, CORE), { recursive: true, encoding: 'utf8' })
  return paths
    .filter((path) => path.endsWith('.ts'))
    .map((path) => {
      const text = readFileSync(join(root, CORE, path), 'utf8')
      return { path, text, exported: exportedFrom(text) }
    })
}

function exportedFrom(text: string): Source['exported'] {
  const file = ts.createSourceFile('one.ts', text, ts.ScriptTarget.Latest, true)
  return file.statements.flatMap((statement) => {
    const isMade =
      ts.isFunctionDeclaration(statement) ||
      ts.isVariableStatement(statement) ||
      ts.isClassDeclaration(statement)
    const isExported =
      isMade && statement.modifiers?.some(({ kind }) => kind === ts.SyntaxKind.ExportKeyword) === true
    if (!isExported) return []
    const names = ts.isVariableStatement(statement)
      ? statement.declarationList.declarations.map(({ name }) => name.getText())
      : [statement.name?.text ?? 'default']
    // The nearest comment alone: one that heads the file belongs to no function.
    const ranges = ts.getLeadingCommentRanges(text, statement.pos) ?? []
    const nearest = ranges.at(-1)
    const comment = nearest === undefined ? '' : text.slice(nearest.pos, nearest.end)
    return names.map((name) => ({ name, comment: comment.startsWith('/**') ? comment : '' }))
  })
}

/** What the comment says in words, before the tags and without signs. */
function purposeIn(comment: string): string {
  return comment
    .replace(/^\/\*\*|\*\/$/g, '')
    .replace(/^\s*\* ?/gm, '')
    .split(/^\s*@\w+|\s@throws/m)[0]!
    .trim()
}

function undocumented(sources: readonly Source[]): string[] {
  return sources.flatMap(({ path, exported }) =>
    exported.filter(({ comment }) => purposeIn(comment).length < 10).map(({ name }) => `${path}: ${name}`),
  )
}

/** Reason codes that a file throws and that none of its own comments names. */
function unnamedReasons(sources: readonly Source[]): string[] {
  return sources.flatMap(({ path, text }) => {
    const comments = [...text.matchAll(/\/\*\*[\s\S]*?\*\//g)].join('\n')
    return reasonsThrown(text)
      .filter((reason) => !comments.includes(`\`${reason}\``))
      .map((reason) => `${path}: ${reason}`)
  })
}

function reasonsThrown(text: string): string[] {
  return [...new Set([...text.matchAll(/\b[nN]otComputable\(\s*'([a-z-]+)'/g)].map(([, reason]) => reason!))]
}

interface Row {
  /** Names of the files in the second column; one that ends in a slash stands for the whole folder. */
  files: string[]
  /** Other words in code beside them: functions of those files. */
  functions: string[]
  tests: string[]
}

/** The rows of all tables: a statistic with file, source, convention and test, or a part with its file. */
function rowsOf(root: string): Row[] {
  return readmeOf(root)
    .split('\n')
    .filter((line) => line.startsWith('| '))
    .map((line) => line.split('|').slice(1, -1))
    .map((cells) => ({
      files: inCode(cells[1]!).filter(isPath),
      functions: inCode(cells[1]!).filter((word) => !isPath(word)),
      tests: inCode(cells[4] ?? '').filter(isPath),
    }))
    .filter(({ files }) => files.length > 0)
}

function readmeOf(root: string): string {
  return readFileSync(join(root, CORE, 'README.md'), 'utf8')
}

function inCode(cell: string): string[] {
  return [...cell.matchAll(/`([^`]+)`/g)].map(([, word]) => word!)
}

function isPath(word: string): boolean {
  return /^[\w/.-]+(\.ts|\.csv|\/)$/.test(word)
}

function missingFiles(root: string): string[] {
  return rowsOf(root).flatMap(({ files, tests }) =>
    [...files.map((path) => `${CORE}/${path}`), ...tests.map((path) => `${TESTS}/${path}`)].filter(
      (path) => !existsSync(join(root, path)),
    ),
  )
}

function misplacedFunctions(root: string, sources: readonly Source[]): string[] {
  return rowsOf(root).flatMap(({ files, functions }) => {
    const own = sources.filter(({ path }) => files.includes(path)).flatMap(({ exported }) => exported)
    return functions.filter((name) => !own.some((one) => one.name === name))
  })
}

/** A file that makes and exports something and stands in no row. */
function unlistedFiles(root: string, sources: readonly Source[]): string[] {
  const named = rowsOf(root).flatMap(({ files }) => files)
  return sources
    .filter(({ exported }) => exported.length > 0)
    .map(({ path }) => path)
    .filter((path) => !named.some((one) => (one.endsWith('/') ? path.startsWith(one) : path === one)))
}

describe('the numerical core', () => {
  const sources = sourcesOf('.')

  it('says of every exported function what it is for', () => {
    expect(sources.flatMap(({ exported }) => exported).length).toBeGreaterThan(100)
    expect(undocumented(sources)).toEqual([])
  })

  it('names in its comments every reason for which a file refuses', () => {
    expect(unnamedReasons(sources)).toEqual([])
  })
})

describe('the table of the numerical core', () => {
  const sources = sourcesOf('.')

  it('names files and tests that exist', () => {
    expect(rowsOf('.').length).toBeGreaterThan(30)
    expect(missingFiles('.')).toEqual([])
  })

  it('names functions that the file beside them exports', () => {
    expect(misplacedFunctions('.', sources)).toEqual([])
  })

  it('names every file that exports a function', () => {
    expect(unlistedFiles('.', sources)).toEqual([])
  })

  it('is followed by every reason code there is, and no other', () => {
    const lists = readmeOf('.').match(/^(Reason codes of these|Of the second half): .*$/gm)!
    const listed = lists.flatMap(inCode).sort()
    expect(listed).toEqual([...new Set(sources.flatMap(({ text }) => reasonsThrown(text)))].sort())
  })
})

describe('the search', () => {
  let root: string

  beforeAll(() => {
    root = mkdtempSync(join(tmpdir(), 'evenlot-statistics-'))
    plant(`${CORE}/bare.ts`, 'export function bare(): void {}\n')
    plant(`${CORE}/tags-only.ts`, "/** @throws {RangeError} always. */\nexport const tagsOnly = () => ''\n")
    plant(`${CORE}/headed.ts`, '/** A head, and no more. */\nimport "x"\n\nexport class Headed {}\n')
    plant(`${CORE}/typed.ts`, 'export type Typed = string\nfunction own(): void {}\n')
    plant(
      `${CORE}/parts/good.ts`,
      "/** Half of a number. */\nexport function good(): void {\n  throw new NotComputable('no-half', 'x')\n}\n",
    )
    plant(`${TESTS}/good.test.ts`, '')
    plant(
      `${CORE}/README.md`,
      [
        '| statistic | file | source | convention | test |',
        '|---|---|---|---|---|',
        '| a half | `parts/good.ts` `good`, `bad` | – | – | `good.test.ts`, `gone.test.ts` |',
        '| whole folder | `parts/` | – | – | same |',
        '| nothing | `gone.ts`, `bare.ts` | – | – | same |',
      ].join('\n'),
    )
  })

  afterAll(() => rmSync(root, { recursive: true, force: true }))

  function plant(path: string, text: string): void {
    mkdirSync(dirname(join(root, path)), { recursive: true })
    writeFileSync(join(root, path), text)
  }

  it('finds what has no comment, tags alone, or only the head of a file', () => {
    expect(undocumented(sourcesOf(root)).sort()).toEqual([
      'bare.ts: bare',
      'headed.ts: Headed',
      'tags-only.ts: tagsOnly',
    ])
  })

  it('finds a reason that no comment names', () => {
    expect(unnamedReasons(sourcesOf(root))).toEqual(['parts/good.ts: no-half'])
  })

  it('finds a file and a test that do not exist', () => {
    expect(missingFiles(root)).toEqual([`${TESTS}/gone.test.ts`, `${CORE}/gone.ts`])
  })

  it('finds a function that is not there', () => {
    expect(misplacedFunctions(root, sourcesOf(root))).toEqual(['bad'])
  })

  it('finds an unlisted file, but none that exports types alone', () => {
    expect(unlistedFiles(root, sourcesOf(root)).sort()).toEqual(['headed.ts', 'tags-only.ts'])
  })
})
