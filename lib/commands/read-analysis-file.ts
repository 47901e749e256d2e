import { CsvError, parse } from 'csv-parse/sync'
import { Refusal } from '@/lib/domain/errors'
import { readWorkbook } from '@/lib/spreadsheet/read-workbook'
import { type AnalysisResult, decimalToNumber, parseDecimal } from '@/lib/statistics'

/** One thing that is wrong with a file or an option, to be shown as one line. */
export type AnalysisFileProblem = {
  row: number | null
  column: string | null
  found: string
  expected: string
}

export type AnalysisFileReading = {
  results: AnalysisResult[]
  /** The rest of the file where one measurand of several was chosen. */
  otherMeasurands: AnalysisResult[]
  problems: AnalysisFileProblem[]
}

export type AnalysisFileOptions = {
  nesting: readonly string[]
  /** Column headings by role, where they are not called as expected. */
  columns: ReadonlyMap<string, string>
  /** Keep rows that are marked as excluded. */
  keepExcluded: boolean
  measurand: string | null
}

/** The name of the material where the file has no such column. */
export const ONLY_MATERIAL = 'material'

/**
 * Reads the results of a study from a CSV or XLSX file. Every problem is
 * reported with its row and column, not only the first, so that a file can be
 * put right in one go.
 */
export async function readAnalysisFile(
  bytes: Uint8Array,
  options: AnalysisFileOptions,
): Promise<AnalysisFileReading> {
  const problems: AnalysisFileProblem[] = []
  const table = await readTable(bytes, problems)
  if (table === null) return { ...NOTHING, problems }

  const columns = findColumns(table.header, options, problems)
  if (columns === null) return { ...NOTHING, problems }

  const reading: Reading = { columns, options, table, problems, names: new Map() }
  const results: AnalysisResult[] = []
  let rows = 0
  for (const row of table.rows) {
    if (row.values.every((value) => value === '')) continue
    rows += 1
    const result = readRow(reading, row)
    if (result !== null) results.push(result)
  }
  if (rows === 0) {
    problems.push({ row: null, column: null, found: 'no row below the header', expected: 'one row a result' })
  }
  return { ...ofOneMeasurand(results, columns, options, problems), problems }
}

type Measurands = Omit<AnalysisFileReading, 'problems'>

const NOTHING: Measurands = { results: [], otherMeasurands: [] }

/** A row of texts and where it stands in the file, counted from 1. */
type Row = { at: number; values: readonly string[] }

/** Rows are read one at a time: a large file is not held as a table beside its results. */
type Table = { header: readonly string[]; rows: Iterable<Row>; commaIsDecimal: boolean }

type Rows = { rows: Iterable<Row>; commaIsDecimal: boolean }

type Columns = {
  laboratory: number
  value: number
  nesting: readonly number[]
  material: number | null
  measurand: number | null
  excluded: number | null
  order: number | null
  uncertainty: number | null
}

async function readTable(bytes: Uint8Array, problems: AnalysisFileProblem[]): Promise<Table | null> {
  const isPackage = bytes[0] === 0x50 && bytes[1] === 0x4b
  const table = isPackage ? await readFirstSheet(bytes, problems) : readText(bytes, problems)
  if (table === null) return null
  const rows = table.rows[Symbol.iterator]()
  const header = rows.next()
  if (header.done === true) {
    problems.push({
      row: null,
      column: null,
      found: 'an empty file',
      expected: 'a header line and one row a result',
    })
    return null
  }
  return {
    header: header.value.values,
    rows: { [Symbol.iterator]: () => rows },
    commaIsDecimal: table.commaIsDecimal,
  }
}

function readText(bytes: Uint8Array, problems: AnalysisFileProblem[]): Rows | null {
  let text: string
  try {
    text = new TextDecoder('utf-8', { fatal: true }).decode(bytes)
  } catch {
    problems.push({ row: null, column: null, found: 'bytes that are not UTF-8', expected: 'text in UTF-8' })
    return null
  }
  const firstLine = text.slice(0, text.search(/[\r\n]|$/))
  const isSemicolon = firstLine.includes(';')
  // Without quotation marks a line is a record and a separator parts two values; that is read many times faster.
  if (!text.includes('"'))
    return { rows: plainRows(text, isSemicolon ? ';' : ','), commaIsDecimal: isSemicolon }
  try {
    const records = parse(text, {
      delimiter: isSemicolon ? ';' : ',',
      relax_column_count: true,
      skip_empty_lines: true,
      trim: true,
      info: true,
    }) as unknown as { record: string[]; info: { lines: number } }[]
    const rows = records.map(({ record, info }) => ({ at: info.lines, values: record }))
    return { rows, commaIsDecimal: isSemicolon }
  } catch (error) {
    if (!(error instanceof CsvError)) throw error
    const row = typeof error['lines'] === 'number' ? error['lines'] : null
    problems.push({ row, column: null, found: 'quotation marks that do not match', expected: 'valid CSV' })
    return null
  }
}

function* plainRows(text: string, separator: string): Generator<Row> {
  const lines = text.includes('\r') ? text.replaceAll(/\r\n?/g, '\n') : text
  let at = 0
  for (let start = 0; start < lines.length;) {
    const found = lines.indexOf('\n', start)
    const end = found === -1 ? lines.length : found
    at += 1
    if (end > start) yield { at, values: trimmed(lines.slice(start, end).split(separator)) }
    start = end + 1
  }
}

function trimmed(values: string[]): string[] {
  for (let place = 0; place < values.length; place += 1) values[place] = values[place]!.trim()
  return values
}

/** A study of any size fits; what is held off is a file made to exhaust the machine. */
const WORKBOOK_LIMITS = {
  packedBytes: 50_000_000,
  unpackedBytes: 500_000_000,
  cells: 2_000_000,
  rows: 1_048_576,
  elements: 20_000_000,
  text: 50_000_000,
}

async function readFirstSheet(bytes: Uint8Array, problems: AnalysisFileProblem[]): Promise<Rows | null> {
  try {
    const { sheets } = await readWorkbook(bytes, WORKBOOK_LIMITS)
    const byRow = new Map<number, string[]>()
    let width = 0
    for (const { row, column, text } of sheets[0]?.cells ?? []) {
      const values = byRow.get(row) ?? []
      byRow.set(row, values)
      values[column - 1] = text.trim()
      width = Math.max(width, column)
    }
    const rows = [...byRow]
      .sort(([one], [other]) => one - other)
      .map(([at, values]) => ({
        at,
        values: Array.from({ length: width }, (_, index) => values[index] ?? ''),
      }))
    return { rows, commaIsDecimal: false }
  } catch (error) {
    if (!(error instanceof Refusal)) throw error
    problems.push({ row: null, column: null, found: error.publicMessage, expected: 'an XLSX workbook' })
    return null
  }
}

/** Names a column may go by when `--columns` does not say otherwise. */
const ALIASES: ReadonlyMap<string, readonly string[]> = new Map([
  ['laboratory', ['laboratory', 'lab']],
  ['value', ['value', 'result']],
])

function findColumns(
  header: readonly string[],
  { nesting, columns: renamed }: AnalysisFileOptions,
  problems: AnalysisFileProblem[],
): Columns | null {
  const before = problems.length
  const headings = header.map((heading) => withoutGuard(heading).toLowerCase())

  const find = (role: string): number | null => {
    const names = renamed.has(role) ? [renamed.get(role)!] : (ALIASES.get(role) ?? [role])
    for (const name of names) {
      const first = headings.indexOf(name.toLowerCase())
      if (first === -1) continue
      if (headings.lastIndexOf(name.toLowerCase()) !== first) {
        problems.push({ row: 1, column: name, found: 'two columns of this name', expected: 'one' })
      }
      return first
    }
    if (renamed.has(role)) missing(names[0]!)
    return null
  }
  const missing = (name: string): void => {
    problems.push({
      row: 1,
      column: name,
      found: `the columns ${header.join(', ')}`,
      expected: `a column ${name}`,
    })
  }
  const need = (role: string): number => {
    const index = find(role)
    if (index === null && !renamed.has(role)) missing(role)
    return index ?? -1
  }

  const found: Columns = {
    laboratory: need('laboratory'),
    value: need('value'),
    nesting: nesting.map(need),
    material: find('material'),
    measurand: find('measurand'),
    excluded: find('excluded'),
    order: find('order'),
    uncertainty: find('uncertainty'),
  }
  return problems.length > before ? null : found
}

const NO_GROUPS: readonly string[] = []

type Reading = {
  columns: Columns
  options: AnalysisFileOptions
  table: Table
  problems: AnalysisFileProblem[]
  /** Each name once, however many rows bear it. */
  names: Map<string, string>
}

type RowReading = Omit<Reading, 'names'> & { row: Row }

function readRow(of: Reading, row: Row): AnalysisResult | null {
  const { columns, options, table, problems, names } = of
  const reading: RowReading = { columns, options, table, problems, row }
  const before = problems.length
  if (row.values.length > table.header.length && row.values.slice(table.header.length).join('') !== '') {
    const found = `${row.values.length} values`
    problems.push({ row: row.at, column: null, found, expected: `${table.header.length}, as in the header` })
    return null
  }
  const { text, censored } = readValue(reading)
  const result: AnalysisResult = {
    laboratory: readName(reading, names, columns.laboratory),
    material: columns.material === null ? ONLY_MATERIAL : readName(reading, names, columns.material),
    measurand: columns.measurand === null ? null : readName(reading, names, columns.measurand),
    groups:
      columns.nesting.length === 0
        ? NO_GROUPS
        : columns.nesting.map((column) => readName(reading, names, column)),
    text,
    censored,
    excluded:
      columns.excluded !== null && (row.values[columns.excluded] ?? '') !== '' && !options.keepExcluded,
    order: columns.order === null ? null : optionalNumber(reading, columns.order, 'a number or nothing'),
    uncertainty: columns.uncertainty === null ? null : readUncertainty(reading, columns.uncertainty),
  }
  return problems.length > before ? null : result
}

function readName(reading: RowReading, names: Map<string, string>, column: number): string {
  const written = reading.row.values[column] ?? ''
  if (written === '') problem(reading, column, 'a name')
  let name = names.get(written)
  if (name === undefined) {
    name = withoutGuard(written)
    names.set(written, name)
  }
  return name
}

/** The product's own files put an apostrophe before a name that a spreadsheet would take for a formula. */
function withoutGuard(name: string): string {
  return name.replace(/^'(?=[=+\-@\t\r])/, '')
}

const EXPECTED_VALUE = 'a decimal number, a limit such as <0.5 or >99, or nothing'

function readValue(reading: RowReading): Pick<AnalysisResult, 'text' | 'censored'> {
  const { row, columns, table } = reading
  const written = row.values[columns.value] ?? ''
  if (written === '') return { text: '', censored: null }
  const mark = written.startsWith('<') ? '<' : written.startsWith('>') ? '>' : null
  const text = decimalText(mark === null ? written : written.slice(1).trim(), table.commaIsDecimal)
  if (text === null) problem(reading, columns.value, EXPECTED_VALUE)
  return { text: text ?? '', censored: mark }
}

function readUncertainty(reading: RowReading, column: number): number | null {
  const value = optionalNumber(reading, column, 'a number above 0 or nothing')
  if (value !== null && !(value > 0)) problem(reading, column, 'a number above 0 or nothing')
  return value
}

function optionalNumber(reading: RowReading, column: number, expected: string): number | null {
  const written = reading.row.values[column] ?? ''
  if (written === '') return null
  const text = decimalText(written, reading.table.commaIsDecimal)
  const value = text === null ? null : decimalToNumber(parseDecimal(text))
  if (value !== null && Number.isFinite(value)) return value
  problem(reading, column, expected)
  return null
}

const PLAIN = /^-?\d{1,15}(\.\d{1,15})?$/

/**
 * The number as decimal text with a point and an ASCII minus, or `null` where it is none. How large it is, is for the
 * analysis to judge, which has better words for it.
 */
function decimalText(written: string, commaIsDecimal: boolean): string | null {
  // Nearly every result is a short plain number, about which there is nothing more to ask.
  if (PLAIN.test(written)) return written
  const text = (commaIsDecimal ? written.replace(',', '.') : written).replaceAll('\u2212', '-')
  if (commaIsDecimal && written.includes(',') && written.includes('.')) return null
  try {
    parseDecimal(text)
  } catch (error) {
    if (error instanceof RangeError) return null
    throw error
  }
  return text
}

function problem({ row, table, problems }: RowReading, column: number, expected: string): void {
  const written = row.values[column] ?? ''
  const found = written === '' ? 'nothing' : JSON.stringify(written.slice(0, 60))
  problems.push({ row: row.at, column: table.header[column] ?? null, found, expected })
}

function ofOneMeasurand(
  results: AnalysisResult[],
  columns: Columns,
  { measurand }: AnalysisFileOptions,
  problems: AnalysisFileProblem[],
): Measurands {
  if (columns.measurand === null) {
    if (measurand === null) return { results, otherMeasurands: [] }
    problems.push({
      row: 1,
      column: 'measurand',
      found: 'no such column',
      expected: `one that holds ${measurand}`,
    })
    return NOTHING
  }
  const names = [...new Set(results.map((result) => result.measurand))]
  if (measurand === null) {
    if (names.length <= 1) return { results, otherMeasurands: [] }
    const expected = 'one of them, chosen by --measurand'
    problems.push({ row: null, column: 'measurand', found: names.join(', '), expected })
    return NOTHING
  }
  const own = results.filter((result) => result.measurand === measurand)
  if (own.length === 0) {
    problems.push({ row: null, column: 'measurand', found: names.join(', '), expected: measurand })
  }
  return { results: own, otherMeasurands: results.filter((result) => result.measurand !== measurand) }
}
