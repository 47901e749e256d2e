import { CsvError, parse } from 'csv-parse/sync'
import { Refusal } from '@/lib/domain/errors'
import {
  cellAddress,
  workbookLimits,
  type SheetCell,
  type Workbook,
  type WorkbookLimits,
} from '@/lib/spreadsheet/workbook'

/** The one sheet of a text file needs a name, so that its cells can be spoken of. */
const csvSheetName = 'File'

/** Reads a table from UTF-8 text; throws a `Refusal` that names what is wrong with the file. */
export function readCsv(bytes: Uint8Array, limits: Partial<WorkbookLimits> = {}): Workbook {
  const within = { ...workbookLimits, ...limits }
  const text = decodeText(bytes, within)
  const hint = /^sep=([,;\t])\r?\n/i.exec(text)
  const cells: SheetCell[] = []
  const left = { cells: within.cells, text: within.text }
  let row = 0
  const takeRecord = (record: string[]): null => {
    row += 1
    if (row > within.rows) throw tooMuch('csv-too-many-rows', `more than ${within.rows} rows`)
    if (hint !== null && row === 1) return null
    if (record.length > within.columns)
      throw tooMuch('csv-too-many-columns', `more than ${within.columns} columns`)
    record.forEach((value, index) => {
      if (value === '') return
      if (value.length > within.cellText)
        throw tooMuch('csv-text-too-long', 'a value longer than any cell can show')
      left.cells -= 1
      left.text -= value.length
      if (left.cells < 0) throw tooMuch('csv-too-many-cells', `more than ${within.cells} filled cells`)
      if (left.text < 0) throw tooMuch('csv-too-much-text', 'far more text than a return')
      const at = { row, column: index + 1 }
      cells.push({ address: cellAddress(at), ...at, text: value, kind: 'text' })
    })
    return null
  }
  try {
    parse(text, {
      delimiter: hint?.[1] ?? guessDelimiter(text),
      relax_column_count: true,
      max_record_size: within.run,
      // Records are taken one by one, so that a limit stops the work and not only its outcome.
      on_record: takeRecord,
    })
  } catch (error) {
    if (error instanceof CsvError) throw damagedCsv(error)
    throw error
  }
  return { sheets: [{ name: csvSheetName, cells }], notices: [] }
}

function decodeText(bytes: Uint8Array, limits: WorkbookLimits): string {
  if (bytes.length === 0) throw new Refusal('file-empty', 'This file is empty: it holds no bytes at all.')
  if (bytes.length > limits.packedBytes) {
    const message = `This file is larger than ${limits.packedBytes / 1_000_000} MB. Send only the table with the results.`
    throw new Refusal('file-too-large', message)
  }
  const [first, second] = bytes
  if ((first === 0xff && second === 0xfe) || (first === 0xfe && second === 0xff)) {
    throw new Refusal('csv-utf-16', 'This text file is in UTF-16. Save it as CSV in UTF-8 and send that.')
  }
  if (bytes.includes(0)) {
    throw new Refusal(
      'not-a-text-file',
      'This is not a text file, whatever its name says. Send an .xlsx or .csv file.',
    )
  }
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes)
  } catch {
    throw new Refusal(
      'csv-not-utf-8',
      'The letters in this text file are not UTF-8. Save it as CSV in UTF-8 and send that.',
    )
  }
}

/**
 * The mark that stands outside quotes in the first lines. A tab or a semicolon is never a decimal mark, so
 * where one of them parts the line, a comma beside it belongs to the numbers.
 */
function guessDelimiter(text: string): string {
  const seen = { '\t': 0, ';': 0 }
  let quoted = false
  let lines = 0
  for (let at = 0; at < text.length && at < 20_000 && lines < 20; at += 1) {
    const character = text[at]
    if (character === '"') quoted = !quoted
    else if (quoted) continue
    else if (character === '\n') lines += 1
    else if (character === '\t' || character === ';') seen[character] += 1
  }
  if (seen['\t'] > 0 && seen['\t'] >= seen[';']) return '\t'
  return seen[';'] > 0 ? ';' : ','
}

function damagedCsv(error: CsvError): Refusal {
  if (error.code === 'CSV_MAX_RECORD_SIZE')
    return tooMuch('csv-text-too-long', 'a line far longer than a return')
  const line = typeof error.lines === 'number' ? `, near line ${error.lines}` : ''
  return new Refusal(
    'csv-damaged',
    `The quotation marks in this file do not match${line}. Save it as CSV again.`,
  )
}

function tooMuch(code: string, what: string): Refusal {
  return new Refusal(code, `This file has ${what}. Send only the table with the results.`)
}
