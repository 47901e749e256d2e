import { openPackage, type Package } from '@/lib/spreadsheet/open-package'
import { readSheet } from '@/lib/spreadsheet/read-sheet'
import {
  readCellFormats,
  readOutline,
  readSharedStrings,
  type Reading,
} from '@/lib/spreadsheet/read-workbook-parts'
import { workbookLimits, type Sheet, type Workbook, type WorkbookLimits } from '@/lib/spreadsheet/workbook'

/** Reads an .xlsx file within its limits; throws a `Refusal` that names what is wrong with the file. */
export async function readWorkbook(
  bytes: Uint8Array,
  limits: Partial<WorkbookLimits> = {},
): Promise<Workbook> {
  const within = { ...workbookLimits, ...limits }
  const parts = await openPackage(bytes, within)
  const reading: Reading = { parts, limits: within, budget: { elements: within.elements, run: within.run } }
  const { sheets: entries, from1904, stylesPart, stringsPart } = await readOutline(reading)
  const strings = await readSharedStrings(reading, stringsPart)
  const formats = await readCellFormats(reading, stylesPart)
  const left = { cells: within.cells, text: within.text }
  const notices = noticeOutsideData(parts)
  const sheets: Sheet[] = []
  for (const entry of entries) {
    if (entry.isHidden) {
      notices.push(`The sheet “${entry.name}” is hidden and was not read.`)
      continue
    }
    const cells = await readSheet({ ...reading, strings, formats, from1904, left }, entry)
    sheets.push({ name: entry.name, cells })
  }
  return { sheets, notices }
}

function noticeOutsideData({ names }: Package): string[] {
  const has = (start: string) => [...names].some((name) => name.startsWith(start))
  const notices: string[] = []
  if (has('xl/externallinks/'))
    notices.push('This workbook links to other files. The links were not followed.')
  if (has('xl/connections.xml') || has('xl/querytables/')) {
    notices.push('This workbook has data connections. They were not followed.')
  }
  return notices
}
