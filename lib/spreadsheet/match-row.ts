import { describeProblem, refuseKind, type CellProblem } from '@/lib/spreadsheet/cell-problem'
import type { LayoutRow, Measurand, ReturnLayout } from '@/lib/spreadsheet/layout'
import { compact, sameName, type Column, type ColumnRole, type Header } from '@/lib/spreadsheet/match-columns'
import type { SheetCell } from '@/lib/spreadsheet/workbook'

export type RowPlace = {
  /** Undefined where the cells do not say which row of the layout is meant. */
  row: LayoutRow | undefined
  /** In a long table, the measurand the row names. */
  measurand: Measurand | undefined
  /** The cell that names the row best. */
  cell: SheetCell | undefined
  /** The place as a person would say it. */
  words: string
  problems: CellProblem[]
}

type RowReading = { header: Header; layout: ReturnLayout; cells: ReadonlyMap<number, SheetCell> }

/** Reads which test result a row is about, with every fault on the way. */
export function readRowPlace(reading: RowReading): RowPlace {
  const problems: CellProblem[] = []
  const material = readMaterial(reading, problems)
  const groups = reading.layout.levels.map((_, level) => readGroup(reading, level, problems))
  const measurand = readMeasurand(reading, problems)
  const isWhole = material !== undefined && groups.every((group) => group !== undefined)
  const levelWords = reading.layout.levels.map(({ name }, level) => `${name} ${groups[level] ?? '?'}`)
  const placeColumns = reading.header.columns.filter(
    ({ role }) => role.kind === 'material' || role.kind === 'level',
  )
  return {
    row: isWhole ? { materialId: material.id, groups: groups as number[] } : undefined,
    measurand,
    cell: placeColumns.flatMap(({ column }) => reading.cells.get(column) ?? [])[0],
    words: [material?.name ?? '?', ...levelWords, ...(measurand === undefined ? [] : [measurand.name])].join(
      ', ',
    ),
    problems,
  }
}

type Material = ReturnLayout['materials'][number]

function readMaterial(reading: RowReading, problems: CellProblem[]): Material | undefined {
  const { materials } = reading.layout
  const column = findColumn(reading, { kind: 'material' })
  if (column === undefined) return materials.length === 1 ? materials[0] : undefined
  const wanted = `one of ${listNames(materials)}`
  const cell = readPlaceCell({ reading, column, wanted, problems })
  if (cell === undefined) return undefined
  const found = materials.find(({ name }) => sameName(name, cell.text))
  if (found === undefined) {
    const advice = 'Write the name of the material as it stands in the study.'
    problems.push(
      describeProblem({
        ...at(reading, column, cell),
        code: 'unknown-material',
        found: cell.text,
        wanted,
        advice,
      }),
    )
  }
  return found
}

function readGroup(reading: RowReading, level: number, problems: CellProblem[]): number | undefined {
  const { name, count } = reading.layout.levels[level] ?? { name: '', count: 0 }
  const column = findColumn(reading, { kind: 'level', level })
  if (column === undefined) return count === 1 ? 1 : undefined
  const wanted = count === 1 ? 'the number 1' : `a whole number from 1 to ${count}`
  const cell = readPlaceCell({ reading, column, wanted, problems })
  if (cell === undefined) return undefined
  const group = groupNumber(cell.text, name)
  if (group !== undefined && group >= 1 && group <= count) return group
  const code = group === undefined ? 'not-a-group-number' : 'group-out-of-range'
  const advice = `The study counts the level “${name}” from 1 to ${count}.`
  problems.push(describeProblem({ ...at(reading, column, cell), code, found: cell.text, wanted, advice }))
  return undefined
}

function readMeasurand(reading: RowReading, problems: CellProblem[]): Measurand | undefined {
  const { measurands } = reading.layout
  const column = findColumn(reading, { kind: 'measurand-name' })
  if (column === undefined) return measurands.length === 1 ? measurands[0] : undefined
  const wanted = `one of ${listNames(measurands)}`
  const cell = readPlaceCell({ reading, column, wanted, problems })
  if (cell === undefined) return undefined
  const found = measurands.find(({ name }) => sameName(name, cell.text))
  if (found === undefined) {
    const advice = 'Write the name of the measurand as it stands in the study.'
    problems.push(
      describeProblem({
        ...at(reading, column, cell),
        code: 'unknown-measurand',
        found: cell.text,
        wanted,
        advice,
      }),
    )
  }
  return found
}

type PlaceCell = { reading: RowReading; column: Column; wanted: string; problems: CellProblem[] }

function readPlaceCell({ reading, column, wanted, problems }: PlaceCell): SheetCell | undefined {
  const cell = reading.cells.get(column.column)
  if (cell === undefined) {
    const anyCell = [...reading.cells.values()][0]
    const address = column.address.replace(/\d+$/, String(anyCell?.row ?? ''))
    const where = { sheet: reading.header.sheet.name, cell: address, column: column.title }
    const advice = 'Fill it in; an empty cell does not take over what stands above it.'
    problems.push(describeProblem({ ...where, code: 'empty-place', found: '', wanted, advice }))
    return undefined
  }
  const wrongKind = refuseKind(cell)
  if (wrongKind === undefined) return cell
  problems.push(describeProblem({ ...at(reading, column, cell), ...wrongKind, found: cell.text, wanted }))
  return undefined
}

/** `2`, `2.0` of a number cell, or the name of the level before it: `Day 2`. */
function groupNumber(text: string, name: string): number | undefined {
  const plain = compact(text).toLowerCase()
  const title = compact(name).toLowerCase()
  const digits = plain.startsWith(title) ? plain.slice(title.length) : plain
  return /^\d{1,6}(?:\.0{1,6})?$/.test(digits) ? Number(digits) : undefined
}

function findColumn({ header }: RowReading, role: ColumnRole): Column | undefined {
  return header.columns.find(
    (column) =>
      column.role.kind === role.kind &&
      (role.kind !== 'level' || (column.role.kind === 'level' && column.role.level === role.level)),
  )
}

function at({ header }: RowReading, column: Column, cell: SheetCell) {
  return { sheet: header.sheet.name, cell: cell.address, column: column.title }
}

function listNames(named: readonly { name: string }[]): string {
  const names = named.slice(0, 8).map(({ name }) => `“${name}”`)
  return names.join(', ') + (named.length > 8 ? ` and ${named.length - 8} more` : '')
}
