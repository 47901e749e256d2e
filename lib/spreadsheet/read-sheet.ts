import { Refusal } from '@/lib/domain/errors'
import { shortenText } from '@/lib/domain/reported-value'
import { showDate, showNumber, type NumberFormat } from '@/lib/spreadsheet/number-format'
import { parseXml } from '@/lib/spreadsheet/parse-xml'
import {
  decodeEscapes,
  tooMuchText,
  type Reading,
  type SheetEntry,
} from '@/lib/spreadsheet/read-workbook-parts'
import { cellAddress, parseCellAddress, type SheetCell } from '@/lib/spreadsheet/workbook'

export type SheetReading = Reading & {
  strings: readonly string[]
  formats: readonly NumberFormat[]
  from1904: boolean
  /** Drawn down across all sheets of one workbook. */
  left: { cells: number; text: number }
}

type RawCell = {
  row: number
  column: number
  type: string
  style: number
  value: string
  formula: string | null
}

/** The non-empty cells of one sheet, in the order of the file. */
export async function readSheet(reading: SheetReading, sheet: SheetEntry): Promise<SheetCell[]> {
  const cells: SheetCell[] = []
  const taken = new Set<string>()
  let at = { row: 0, column: 0 }
  let cell: RawCell | null = null
  let gathering: 'value' | 'formula' | null = null
  let phonetic = 0

  function finish(raw: RawCell): void {
    const shown = show(raw, reading)
    if (shown.text === '') return
    const address = cellAddress(raw)
    refuseFar({ raw, address, sheet, reading })
    if (taken.has(address)) {
      throw new Refusal(
        'workbook-damaged',
        `The sheet “${sheet.name}” holds cell ${address} twice. Save the file again as .xlsx and send that copy.`,
      )
    }
    taken.add(address)
    cells.push({ address, row: raw.row, column: raw.column, ...shown })
    draw(shown.text, reading)
  }

  await parseXml(
    reading.parts.read(sheet.part),
    {
      open(name, attributes) {
        if (name === 'row') {
          at = { row: attributes.r === undefined ? at.row + 1 : rowNumber(attributes.r), column: 0 }
        } else if (name === 'c') {
          // Programs may leave out addresses; cells then follow one another.
          const given = attributes.r === undefined ? undefined : parseCellAddress(attributes.r)
          if (attributes.r !== undefined && given === undefined) throw strangeAddress(attributes.r)
          at = given ?? { row: at.row, column: at.column + 1 }
          cell = {
            ...at,
            type: attributes.t ?? 'n',
            style: Number(attributes.s ?? 0),
            value: '',
            formula: null,
          }
        } else if (cell !== null) {
          if (name === 'rPh') phonetic += 1
          if (name === 'f') cell.formula = ''
          gathering =
            name === 'f' ? 'formula' : name === 'v' || (name === 't' && phonetic === 0) ? 'value' : null
        }
      },
      text(piece) {
        if (cell === null || gathering === null) return
        const longer = (cell[gathering] ?? '') + piece
        if (longer.length > reading.limits.cellText) throw tooMuchText()
        cell[gathering] = longer
      },
      close(name) {
        gathering = null
        if (name === 'rPh') phonetic -= 1
        if (name !== 'c' || cell === null) return
        finish(cell)
        cell = null
      },
    },
    reading.budget,
  )
  return cells
}

function show(raw: RawCell, { strings, formats, from1904 }: SheetReading): Pick<SheetCell, 'text' | 'kind'> {
  // The result stored with a formula is whatever its program last wrote there, and is never taken.
  if (raw.formula !== null) return { kind: 'formula', text: `=${raw.formula}` }
  switch (raw.type) {
    case 's': {
      const text = strings[Number(raw.value)]
      if (text === undefined && raw.value !== '') {
        const message = 'This workbook refers to a text it does not hold. Save it again as .xlsx.'
        throw new Refusal('workbook-damaged', message)
      }
      return { kind: 'text', text: text ?? '' }
    }
    case 'str':
    case 'inlineStr':
      return { kind: 'text', text: decodeEscapes(raw.value) }
    case 'b':
      return { kind: 'boolean', text: raw.value === '' ? '' : raw.value === '1' ? 'TRUE' : 'FALSE' }
    case 'e':
      return { kind: 'error', text: raw.value }
    case 'd':
      return { kind: 'date', text: raw.value }
    default: {
      const format = formats[raw.style] ?? { kind: 'general' }
      return format.kind === 'date'
        ? { kind: 'date', text: showDate(raw.value, from1904) }
        : { kind: 'number', text: showNumber(raw.value, format) }
    }
  }
}

function draw(text: string, { left, limits }: SheetReading): void {
  left.cells -= 1
  left.text -= text.length
  if (left.cells < 0) {
    throw new Refusal(
      'workbook-too-many-cells',
      `This workbook has more than ${limits.cells} filled cells. Send only the sheet with the results.`,
    )
  }
  if (left.text < 0) throw tooMuchText()
}

type Far = { raw: RawCell; address: string; sheet: SheetEntry; reading: SheetReading }

function refuseFar({ raw, address, sheet, reading }: Far): void {
  const { rows, columns } = reading.limits
  if (raw.row <= rows && raw.column <= columns) return
  throw new Refusal(
    'workbook-cell-too-far',
    `Cell ${address} of the sheet “${sheet.name}” is filled, beyond row ${rows} or column ${columns}. Clear it and send the file again.`,
  )
}

function rowNumber(attribute: string): number {
  if (!/^[1-9]\d{0,6}$/.test(attribute)) throw strangeAddress(attribute)
  return Number(attribute)
}

function strangeAddress(address: string): Refusal {
  return new Refusal(
    'workbook-damaged',
    `This workbook has a row or cell “${shortenText(address, 20)}”, which cannot be. Save it again as .xlsx.`,
  )
}
