import { createHash } from 'node:crypto'
import { readFile } from 'node:fs/promises'
import { Readable } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import { type AnalyseOptions, readAnalyseOptions } from '@/lib/commands/analyse-options'
import { documentPieces } from '@/lib/commands/document-pieces'
import { type AnalysisFileProblem, readAnalysisFile } from '@/lib/commands/read-analysis-file'
import { analyse, type AnalysisResult, type AnalysisSettings } from '@/lib/statistics'

/*
 * Analyses a file with the core the server uses, so that anybody can recompute
 * a published study: one JSON document on standard output, or every problem on
 * standard error and nothing else.
 */

const MOST_PROBLEMS = 50

type ReadFile = { results: AnalysisResult[]; otherMeasurands: AnalysisResult[]; bytes: Uint8Array }

const NO_FILE: ReadFile = { results: [], otherMeasurands: [], bytes: new Uint8Array() }

await main(process.argv.slice(2))

async function main(args: readonly string[]): Promise<void> {
  const { options, problems } = readAnalyseOptions(args)
  if (options === null) return refuse(problems.map((words) => `analyse: ${words}`))

  const settings = await withUnits(options)
  if (settings === null) return

  const read = options.file === null ? NO_FILE : await readResults(options)
  if (read === null) return

  const document = analyse({
    results: read.results,
    otherMeasurands: read.otherMeasurands,
    nesting: options.nesting,
    settings,
    sha256: createHash('sha256').update(read.bytes).digest('hex'),
    version: await ownVersion(),
  })
  await writeOut(Readable.from(documentPieces(document)))
}

async function writeOut(pieces: Readable): Promise<void> {
  try {
    await pipeline(pieces, process.stdout, { end: false })
  } catch (error) {
    // A reader such as `head` may stop reading early; that is no fault of the analysis.
    if (!(error instanceof Error && 'code' in error && error.code === 'EPIPE')) throw error
  }
}

/** The tables of units are large, so they are loaded only for those who name one. */
async function withUnits({ unit, settings }: AnalyseOptions): Promise<AnalysisSettings | null> {
  if (unit === null) return settings
  const { otherUnitsThan } = await import('@/lib/statistics/units')
  try {
    return { ...settings, units: [...(settings.units ?? []), ...otherUnitsThan(unit)] }
  } catch (error) {
    if (!(error instanceof RangeError)) throw error
    refuse([`analyse: option --unit: found ${JSON.stringify(unit)}, expected a unit such as mg/L`])
    return null
  }
}

async function readResults(options: AnalyseOptions): Promise<ReadFile | null> {
  const file = options.file!
  let bytes: Uint8Array
  try {
    bytes = await readFile(file)
  } catch (error) {
    const code = error instanceof Error && 'code' in error ? String(error.code) : String(error)
    refuse([`${file}: the file cannot be read (${code})`])
    return null
  }
  const { results, otherMeasurands, problems } = await readAnalysisFile(bytes, options)
  const all = [...problems, ...unknownMaterials(options, results)]
  if (all.length > 0) {
    refuse(all.map((problem) => inWords(file, problem)))
    return null
  }
  return { results, otherMeasurands, bytes }
}

/** Materials that an option names and the file does not have. */
function unknownMaterials(
  { settings }: AnalyseOptions,
  results: readonly AnalysisResult[],
): AnalysisFileProblem[] {
  if (results.length === 0) return []
  const known = new Set(results.map(({ material }) => material))
  const named = [
    ...Object.keys(settings.references ?? {}),
    ...Object.keys(settings.sigmas ?? {}),
    ...Object.keys(settings.decimals ?? {}),
    ...(settings.pairs ?? []).flat(),
  ]
  return [...new Set(named)]
    .filter((name) => !known.has(name))
    .map((name) => ({
      row: null,
      column: 'material',
      found: [...known].join(', '),
      expected: `${JSON.stringify(name)}, which an option names`,
    }))
}

function inWords(file: string, { row, column, found, expected }: AnalysisFileProblem): string {
  const place = [row === null ? null : `row ${row}`, column === null ? null : `column ${column}`]
  const where = place.filter((part) => part !== null).join(', ')
  return `${file}: ${where === '' ? '' : `${where}: `}found ${found}, expected ${expected}`
}

/** A problem is one line, whatever a heading or a name holds; a terminal is to show it and not to obey it. */
function asOneLine(words: string): string {
  return words.replace(/\p{Cc}/gu, toEscape)
}

function toEscape(character: string): string {
  return `\\u${character.charCodeAt(0).toString(16).padStart(4, '0')}`
}

function refuse(lines: readonly string[]): void {
  const shown = lines.slice(0, MOST_PROBLEMS).map(asOneLine)
  if (lines.length > MOST_PROBLEMS) shown.push(`and ${lines.length - MOST_PROBLEMS} more`)
  process.stderr.write(`${shown.join('\n')}\n`)
  process.exitCode = 2
}

async function ownVersion(): Promise<string> {
  const text = await readFile(new URL('../../package.json', import.meta.url), 'utf8')
  return (JSON.parse(text) as { version: string }).version
}
