import ExcelJS from 'exceljs'
import {
  guideSheetName,
  listRows,
  measurandTitle,
  placeKey,
  resultsSheetName,
  type ReturnLayout,
} from '@/lib/spreadsheet/layout'
import { packWorkbook } from '@/lib/spreadsheet/pack-workbook'

/** Title, deadline, hint and an empty row stand above it. */
const headerRow = 5

/** Text format: a program then keeps 1.10 as it was typed, and never takes a text for a formula. */
const asTyped = '@'

/**
 * The workbook a laboratory fills in, with the values it has already reported where there are any. It holds
 * no name and no code of a laboratory, and the same input gives the same bytes.
 */
export async function writeReturnWorkbook({
  layout,
  values = new Map(),
  deadlineText,
}: {
  layout: ReturnLayout
  /** Reported texts by the key of their place. */
  values?: ReadonlyMap<string, string>
  deadlineText: string
}): Promise<Uint8Array> {
  const workbook = new ExcelJS.Workbook()
  await fillResults({ workbook, layout, values, deadlineText })
  fillGuide(workbook, layout)
  return packWorkbook(workbook)
}

type Filling = {
  workbook: ExcelJS.Workbook
  layout: ReturnLayout
  values: ReadonlyMap<string, string>
  deadlineText: string
}

async function fillResults({ workbook, layout, values, deadlineText }: Filling): Promise<void> {
  const places = 1 + layout.levels.length
  const sheet = workbook.addWorksheet(resultsSheetName, {
    views: [{ state: 'frozen', xSplit: places, ySplit: headerRow }],
  })
  writeText(sheet.getCell(1, 1), `${layout.studyShortName}: results`).font = { bold: true, size: 14 }
  writeText(sheet.getCell(2, 1), `Deadline: ${deadlineText}`)
  writeText(sheet.getCell(3, 1), `Fill in the open cells only. The sheet “${guideSheetName}” says more.`)

  const titles = [
    'Material',
    ...layout.levels.map(({ name }) => name),
    ...layout.measurands.map(measurandTitle),
  ]
  titles.forEach((title, index) => {
    const cell = writeText(sheet.getCell(headerRow, index + 1), title)
    cell.font = { bold: true }
    cell.alignment = { wrapText: true, vertical: 'bottom' }
    cell.border = { bottom: { style: 'medium' } }
  })

  const nameOf = new Map(layout.materials.map(({ id, name }) => [id, name]))
  listRows(layout).forEach(({ materialId, groups }, index) => {
    const row = headerRow + 1 + index
    writeText(sheet.getCell(row, 1), nameOf.get(materialId) ?? '')
    groups.forEach((group, level) => {
      sheet.getCell(row, 2 + level).value = group
    })
    layout.measurands.forEach(({ id }, measurand) => {
      const cell = sheet.getCell(row, places + 1 + measurand)
      const value = values.get(placeKey({ measurandId: id, materialId, groups }))
      writeText(cell, value === undefined || value === '' ? null : value)
      cell.alignment = { horizontal: 'right' }
      cell.protection = { locked: false }
      cell.border = { bottom: { style: 'hair' }, right: { style: 'hair' } }
    })
  })
  titles.forEach((title, index) => {
    const longest = index === 0 ? Math.max(...layout.materials.map(({ name }) => name.length)) : 0
    sheet.getColumn(index + 1).width = Math.min(40, Math.max(12, title.length + 2, longest + 2))
  })
  // Without a password: it guides the hand and guards nothing, which the reading of the file does.
  await sheet.protect('', { selectLockedCells: true, selectUnlockedCells: true, formatColumns: true })
}

function fillGuide(workbook: ExcelJS.Workbook, layout: ReturnLayout): void {
  const sheet = workbook.addWorksheet(guideSheetName)
  sheet.getColumn(1).width = 90
  guideLines(layout).forEach((line, index) => {
    const cell = writeText(sheet.getCell(index + 1, 1), line)
    cell.alignment = { wrapText: true, vertical: 'top' }
    if (index === 0) cell.font = { bold: true, size: 14 }
  })
}

function guideLines(layout: ReturnLayout): string[] {
  return [
    guideSheetName,
    `The sheet “${resultsSheetName}” has one row for each test result to report. Write into its open cells and change nothing else.`,
    'Report every value with the digits your laboratory would give: 1.10 and 1.1 are not the same.',
    'Write a decimal point or a decimal comma. Leave out thousands marks: 1,234 could mean two things, and you would be asked.',
    'Leave out the unit. It is set for each column:',
    ...layout.measurands.map(({ name, unit }) => `    ${name}: ${unit === '' ? 'without a unit' : unit}`),
    'Below or above what your method can measure, write < or > before the number, as in <0.5.',
    'Leave a cell empty where there is no result. Do not write a dash, a zero or a remark.',
    'Write values, not formulas. A formula is refused, because a file keeps its result only in passing.',
    'Then save the file as .xlsx and send it on the page of the study. You see what was read before anything is submitted.',
  ]
}

function writeText(cell: ExcelJS.Cell, text: string | null): ExcelJS.Cell {
  cell.value = text === null ? null : escapeForXml(text)
  cell.numFmt = asTyped
  return cell
}

/** XML turns a carriage return into a line feed, so these files spell it out, and the spelling itself too. */
function escapeForXml(text: string): string {
  return text.replace(/_x(?=[0-9A-Fa-f]{4}_)/g, '_x005F_x').replaceAll('\r', '_x000D_')
}
