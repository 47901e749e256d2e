import { measurandTitle, type Measurand, type ReturnLayout } from '@/lib/spreadsheet/layout'
import type { Sheet, SheetCell } from '@/lib/spreadsheet/workbook'

/** What a column of a laboratory's table is for. */
export type ColumnRole =
  | { kind: 'material' }
  | { kind: 'level'; level: number }
  | { kind: 'measurand'; measurand: Measurand }
  /** In a long table, one column names the measurand and another holds the value. */
  | { kind: 'measurand-name' }
  | { kind: 'value' }
  | { kind: 'unit' }

export type Column = {
  column: number
  title: string
  address: string
  role: ColumnRole
  /** The unit its title names, where that is not the unit that is asked for. */
  otherUnit?: string
}

export type Header = {
  sheet: Sheet
  row: number
  columns: Column[]
  /** Cells of the header row that stand for nothing in the layout. */
  unknown: SheetCell[]
  /** A second column for what an earlier one is already for. */
  repeated: Column[]
  /** Titles of columns without which rows cannot be read. */
  missingPlaces: string[]
  missingValues: string[]
}

/** A table may begin below a letterhead, but not far below. */
const lastHeaderRow = 60

/** The row of a sheet whose titles fit the layout best; undefined where fewer than two do. */
export function findHeader(sheet: Sheet, layout: ReturnLayout): Header | undefined {
  const rows = new Map<number, SheetCell[]>()
  for (const cell of sheet.cells) {
    if (cell.row > lastHeaderRow) continue
    const row = rows.get(cell.row)
    if (row === undefined) rows.set(cell.row, [cell])
    else row.push(cell)
  }
  let best: Header | undefined
  for (const [row, cells] of [...rows].sort(([a], [b]) => a - b)) {
    const header = readHeader({ sheet, row, cells, layout })
    if (header.columns.length >= 2 && header.columns.length > (best?.columns.length ?? 0)) best = header
  }
  return best
}

export function compact(text: string): string {
  return text.normalize('NFKC').replace(/\s+/g, '')
}

/** Names are the same whatever their case and spaces. */
export function sameName(one: string, other: string): boolean {
  return compact(one).toLowerCase() === compact(other).toLowerCase()
}

/** Units keep their case: mPa is not MPa. */
export function sameUnit(one: string, other: string): boolean {
  return compact(one) === compact(other)
}

type HeaderRow = { sheet: Sheet; row: number; cells: SheetCell[]; layout: ReturnLayout }

function readHeader({ sheet, row, cells, layout }: HeaderRow): Header {
  const header: Header = {
    sheet,
    row,
    columns: [],
    unknown: [],
    repeated: [],
    missingPlaces: [],
    missingValues: [],
  }
  const found: Column[] = []
  for (const cell of cells) {
    const recognised = recognise(cell.text, layout)
    if (recognised === undefined) header.unknown.push(cell)
    else found.push({ column: cell.column, title: cell.text.trim(), address: cell.address, ...recognised })
  }
  const ownColumns = found.filter(({ role }) => role.kind === 'measurand').length
  const only = layout.measurands.length === 1 ? layout.measurands[0] : undefined
  for (const column of found) {
    // “Value” is the column of the only measurand, unless that has one under its own name; and a column of
    // units says nothing where a row holds values of several measurands.
    const isValueBeside = column.role.kind === 'value' && ownColumns > 0
    if (isValueBeside || (column.role.kind === 'unit' && ownColumns > 1)) {
      const cell = cells.find(({ address }) => address === column.address)
      if (cell !== undefined) header.unknown.push(cell)
      continue
    }
    if (column.role.kind === 'value' && only !== undefined)
      column.role = { kind: 'measurand', measurand: only }
    const taken = header.columns.some(({ role }) => roleKey(role) === roleKey(column.role))
    ;(taken ? header.repeated : header.columns).push(column)
  }
  return { ...header, ...listMissing(header.columns, layout) }
}

function listMissing(
  columns: Column[],
  layout: ReturnLayout,
): { missingPlaces: string[]; missingValues: string[] } {
  const has = (role: ColumnRole) => columns.some((column) => roleKey(column.role) === roleKey(role))
  const missingPlaces: string[] = []
  if (layout.materials.length > 1 && !has({ kind: 'material' })) missingPlaces.push('Material')
  layout.levels.forEach(({ name, count }, level) => {
    if (count > 1 && !has({ kind: 'level', level })) missingPlaces.push(name)
  })
  const isLong = has({ kind: 'value' })
  const isWide = columns.some(({ role }) => role.kind === 'measurand')
  if (isLong && !has({ kind: 'measurand-name' })) missingPlaces.push('Measurand')
  if (isLong) return { missingPlaces, missingValues: [] }
  if (!isWide && has({ kind: 'measurand-name' })) return { missingPlaces, missingValues: ['Value'] }
  const absent = layout.measurands.filter((measurand) => !has({ kind: 'measurand', measurand }))
  return { missingPlaces, missingValues: absent.map(measurandTitle) }
}

function roleKey(role: ColumnRole): string {
  if (role.kind === 'level') return `level ${role.level}`
  return role.kind === 'measurand' ? `measurand ${role.measurand.id}` : role.kind
}

function recognise(title: string, layout: ReturnLayout): Pick<Column, 'role' | 'otherUnit'> | undefined {
  if (compact(title) === '' || title.length > 200) return undefined
  if (sameName(title, 'Material')) return { role: { kind: 'material' } }
  const level = layout.levels.findIndex(({ name }) => sameName(title, name))
  if (level >= 0) return { role: { kind: 'level', level } }
  for (const measurand of layout.measurands) {
    const unit = unitAfter(title, measurand.name)
    if (unit !== undefined) return { role: { kind: 'measurand', measurand }, ...compareUnit(unit, measurand) }
  }
  if (sameName(title, 'Measurand')) return { role: { kind: 'measurand-name' } }
  if (sameName(title, 'Unit')) return { role: { kind: 'unit' } }
  for (const name of ['Value', 'Result', 'Test result']) {
    const unit = unitAfter(title, name)
    const only = layout.measurands.length === 1 ? layout.measurands[0] : undefined
    if (unit === '') return { role: { kind: 'value' } }
    if (unit !== undefined && only !== undefined)
      return { role: { kind: 'value' }, ...compareUnit(unit, only) }
  }
  return undefined
}

/** '' where the title is the name alone, the unit where one follows it, undefined where it is another title. */
function unitAfter(title: string, name: string): string | undefined {
  const whole = compact(title)
  const start = compact(name)
  if (whole.slice(0, start.length).toLowerCase() !== start.toLowerCase()) return undefined
  const rest = whole.slice(start.length)
  if (rest === '') return ''
  const found =
    /^\(([^()]*(?:\([^()]*\))?[^()]*)\)$/.exec(rest) ??
    /^\[([^[\]]*)\]$/.exec(rest) ??
    /^[,/:](.+)$/.exec(rest)
  return found?.[1]
}

function compareUnit(unit: string, measurand: Measurand): { otherUnit?: string } {
  return unit === '' || sameUnit(unit, measurand.unit) ? {} : { otherUnit: unit }
}
