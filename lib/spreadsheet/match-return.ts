import { readReportedValue, shortenText, type DecimalMark } from '@/lib/domain/reported-value'
import {
  guideSheetName,
  listPlaces,
  measurandTitle,
  placeKey,
  type Measurand,
  type ReturnLayout,
} from '@/lib/spreadsheet/layout'
import { findHeader, sameName, sameUnit, type Column, type Header } from '@/lib/spreadsheet/match-columns'
import { readRowPlace, type RowPlace } from '@/lib/spreadsheet/match-row'
import { describeProblem, refuseKind, type CellProblem } from '@/lib/spreadsheet/cell-problem'
import type { Sheet, SheetCell, Workbook } from '@/lib/spreadsheet/workbook'

export type ReturnCheck = {
  values: CheckedValue[]
  problems: CellProblem[]
  questions: CellQuestion[]
  /** Keys of the places for which the file holds nothing: no value, no question and no problem. */
  missing: string[]
  notices: string[]
}

export type CheckedValue = {
  key: string
  /** Reads to the same value with no decimal mark given, so that it may stand in the form as it is. */
  text: string
  /** What stood in the cell, letter for letter. */
  typed: string
  sheet: string
  cell: string
}

export type CellQuestion = {
  key: string
  sheet: string
  cell: string
  column: string
  found: string
  readings: [string, string]
}

type Matching = {
  layout: ReturnLayout
  decimalMark: DecimalMark | undefined
  check: ReturnCheck
  touched: Set<string>
}

/** Compares what a laboratory sent with what it was asked for, and reports everything at once. */
export function matchReturn({
  workbook,
  layout,
  decimalMark,
}: {
  workbook: Workbook
  layout: ReturnLayout
  decimalMark?: DecimalMark
}): ReturnCheck {
  const check: ReturnCheck = {
    values: [],
    problems: [],
    questions: [],
    missing: [],
    notices: [...workbook.notices],
  }
  const matching: Matching = { layout, decimalMark, check, touched: new Set() }
  const headers = chooseHeaders(workbook, matching)
  const rowsSeen = new Map<string, SheetCell>()
  for (const header of headers) matchSheet({ ...matching, header, rowsSeen })
  check.missing = listPlaces(layout)
    .map(placeKey)
    .filter((key) => !matching.touched.has(key))
  const isSilent = check.values.length + check.questions.length + check.problems.length === 0
  if (isSilent) check.problems.push(noValues(headers[0]?.sheet ?? workbook.sheets[0]))
  return check
}

/** Every sheet with a whole table is read; where none is whole, the one that comes nearest says what it lacks. */
function chooseHeaders(workbook: Workbook, { layout, check }: Matching): Header[] {
  const found = workbook.sheets.flatMap((sheet) => findHeader(sheet, layout) ?? [])
  const whole = found.filter((header) => header.missingPlaces.length === 0 && hasValueColumn(header))
  const nearest = [...found].sort((a, b) => b.columns.length - a.columns.length)[0]
  const chosen = whole.length > 0 ? whole : nearest === undefined ? [] : [nearest]
  for (const sheet of workbook.sheets) {
    const isRead = chosen.some((header) => header.sheet === sheet)
    if (isRead || sheet.cells.length === 0 || sheet.name === guideSheetName || chosen.length === 0) continue
    check.notices.push(
      `The sheet “${sheet.name}” has no table of results that could be recognised and was not read.`,
    )
  }
  if (chosen.length === 0 && workbook.sheets.some(({ cells }) => cells.length > 0)) {
    const titles = [
      'Material',
      ...layout.levels.map(({ name }) => name),
      ...layout.measurands.map(measurandTitle),
    ]
    check.problems.push(
      describeProblem({
        sheet: workbook.sheets.find(({ cells }) => cells.length > 0)?.name ?? '',
        cell: null,
        column: null,
        code: 'no-header',
        found: 'no row of column titles',
        wanted: `a row with the titles ${titles.join(', ')}`,
        advice: 'Use the workbook of this study, or give your own table these titles.',
      }),
    )
  }
  return chosen
}

function hasValueColumn({ columns }: Header): boolean {
  return columns.some(({ role }) => role.kind === 'measurand' || role.kind === 'value')
}

type SheetMatching = Matching & { header: Header; rowsSeen: Map<string, SheetCell> }

function matchSheet(matching: SheetMatching): void {
  const { header } = matching
  checkHeader(matching)
  if (header.missingPlaces.length > 0) return
  const rows = new Map<number, Map<number, SheetCell>>()
  for (const cell of header.sheet.cells) {
    if (cell.row <= header.row || cell.text.trim() === '') continue
    const row = rows.get(cell.row) ?? new Map<number, SheetCell>()
    rows.set(cell.row, row.set(cell.column, cell))
  }
  for (const [, cells] of [...rows].sort(([a], [b]) => a - b)) {
    const isHeaderAgain = header.columns.every(
      ({ column, title }) => cells.get(column)?.text.trim() === title,
    )
    if (!isHeaderAgain) matchRow({ ...matching, cells })
  }
}

function checkHeader({ header, check }: SheetMatching): void {
  const { sheet, columns, unknown, repeated } = header
  for (const title of [...header.missingPlaces, ...header.missingValues]) {
    const words = { found: 'no such column', wanted: `a column “${title}”` }
    const advice = `Add it to row ${header.row}, where the titles are.`
    check.problems.push(
      describeProblem({
        sheet: sheet.name,
        cell: null,
        column: title,
        code: 'missing-column',
        ...words,
        advice,
      }),
    )
  }
  for (const { title, address } of repeated) {
    const words = { found: title, wanted: 'each column once' }
    const advice = 'Keep the column that counts and delete the other.'
    check.problems.push(
      describeProblem({
        sheet: sheet.name,
        cell: address,
        column: title,
        code: 'duplicate-column',
        ...words,
        advice,
      }),
    )
  }
  for (const { title, address, role, otherUnit } of columns) {
    if (otherUnit === undefined) continue
    const asked = role.kind === 'measurand' ? measurandTitle(role.measurand) : 'the unit that is asked for'
    const words = { found: title, wanted: `“${asked}”` }
    const advice = `If the values are in ${otherUnit}, convert them; then correct the title.`
    check.problems.push(
      describeProblem({
        sheet: sheet.name,
        cell: address,
        column: title,
        code: 'other-unit',
        ...words,
        advice,
      }),
    )
  }
  for (const cell of unknown) {
    check.notices.push(
      `The column “${shortenText(cell.text.trim(), 40)}” (${sheet.name}!${cell.address}) is not part of this study and was not read.`,
    )
  }
}

type RowMatching = SheetMatching & { cells: Map<number, SheetCell> }

function matchRow(matching: RowMatching): void {
  const { header, layout, check, cells } = matching
  const filled = header.columns.flatMap((column) => {
    const cell = cells.get(column.column)
    const isValue = column.role.kind === 'measurand' || column.role.kind === 'value'
    return isValue && cell !== undefined ? [{ column, cell }] : []
  })
  if (filled.length === 0) return
  const place = readRowPlace({ header, layout, cells })
  check.problems.push(...place.problems)
  const isRepeated = refuseRepeatedRow(matching, place)
  for (const { column, cell } of filled) {
    const measurand = column.role.kind === 'measurand' ? column.role.measurand : place.measurand
    checkUnitCell({ ...matching, measurand })
    matchValue({ ...matching, column, cell, measurand, place: isRepeated ? undefined : place.row })
  }
}

/** One problem for the row, at the cell that names it; its values are looked at, but not taken. */
function refuseRepeatedRow({ header, check, rowsSeen, cells }: RowMatching, place: RowPlace): boolean {
  if (place.row === undefined) return false
  const isLong = header.columns.some(({ role }) => role.kind === 'value')
  if (isLong && place.measurand === undefined) return false
  const key = placeKey({ ...place.row, measurandId: isLong ? (place.measurand?.id ?? '') : 'row' })
  const here = place.cell ?? [...cells.values()][0]
  const before = rowsSeen.get(key)
  if (here === undefined) return false
  if (before === undefined) {
    rowsSeen.set(key, here)
    return false
  }
  check.problems.push(
    describeProblem({
      sheet: header.sheet.name,
      cell: here.address,
      column: header.columns.find(({ column }) => column === here.column)?.title ?? null,
      code: 'duplicate-row',
      found: place.words,
      wanted: 'each test result once',
      advice: `Row ${before.row} already gives it. Correct one of the two rows or delete it.`,
    }),
  )
  return true
}

function checkUnitCell({
  header,
  check,
  cells,
  measurand,
}: RowMatching & { measurand: Measurand | undefined }): void {
  const column = header.columns.find(({ role }) => role.kind === 'unit')
  const cell = column === undefined ? undefined : cells.get(column.column)
  if (column === undefined || cell === undefined || measurand === undefined) return
  if (sameUnit(cell.text, measurand.unit)) return
  check.problems.push(
    describeProblem({
      sheet: header.sheet.name,
      cell: cell.address,
      column: column.title,
      code: 'other-unit',
      found: cell.text,
      wanted: measurand.unit === '' ? 'no unit' : measurand.unit,
      advice: 'Convert the value; then correct the unit.',
    }),
  )
}

type ValueMatching = SheetMatching & {
  column: Column
  cell: SheetCell
  measurand: Measurand | undefined
  place: RowPlace['row']
}

function matchValue({
  header,
  check,
  touched,
  decimalMark,
  column,
  cell,
  measurand,
  place,
}: ValueMatching): void {
  const key = place && measurand ? placeKey({ ...place, measurandId: measurand.id }) : undefined
  if (key !== undefined) touched.add(key)
  const sheet = header.sheet.name
  const unit = measurand?.unit ?? ''
  const at = { sheet, cell: cell.address, column: column.title }
  const wanted = unit === '' ? 'a number' : `a number in ${unit}, without the unit`
  const wrongKind = refuseKind(cell)
  if (wrongKind !== undefined) {
    check.problems.push(describeProblem({ ...at, ...wrongKind, found: cell.text, wanted }))
    return
  }
  // A number cell was written out here, with a point, whatever mark the laboratory uses for its texts.
  const value = readReportedValue(cell.text, { decimalMark: cell.kind === 'number' ? 'point' : decimalMark })
  if (value.kind === 'fault') {
    const isOther = value.unit !== undefined && !sameUnit(value.unit, unit) && !sameName(value.unit, unit)
    const code = value.code === 'unit' && isOther ? 'other-unit' : value.code
    const advice = code === 'other-unit' ? convertAdvice(value.unit ?? '', unit) : value.message
    check.problems.push(describeProblem({ ...at, code, found: cell.text, wanted, advice }))
  } else if (value.kind === 'ambiguous') {
    if (key === undefined) return
    check.questions.push({ key, ...at, found: cell.text, readings: [...value.readings] })
  } else if (value.kind !== 'missing' && key !== undefined) {
    const canonical = value.kind === 'censored' ? value.mark + value.decimal : value.decimal
    const again = readReportedValue(cell.text)
    const isSame = JSON.stringify(again) === JSON.stringify(value)
    const text = isSame ? cell.text.trim() : canonical
    check.values.push({ key, text, typed: cell.text, sheet, cell: cell.address })
  }
}

function convertAdvice(found: string, asked: string): string {
  const how = asked === '' ? 'without a unit' : `in ${asked}`
  return `“${found}” follows the number, and values are asked ${how}: convert it if needed and write the number alone.`
}

function noValues(sheet: Sheet | undefined): CellProblem {
  return describeProblem({
    sheet: sheet?.name ?? '',
    cell: null,
    column: null,
    code: 'no-values',
    found: 'no value at all',
    wanted: 'at least one value',
    advice: 'Fill in the results, save the file and send it again.',
  })
}
