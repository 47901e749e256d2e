import { Refusal } from '@/lib/domain/errors'
import { readCsv } from '@/lib/spreadsheet/read-csv'
import { readWorkbook } from '@/lib/spreadsheet/read-workbook'
import type { Workbook } from '@/lib/spreadsheet/workbook'

/** Reads a workbook or a text table, going by the content and asking the name only where that is not enough. */
export async function readUpload({
  bytes,
  fileName,
}: {
  bytes: Uint8Array
  fileName: string
}): Promise<Workbook> {
  const extension = /\.([a-z0-9]{1,8})$/i.exec(fileName.slice(-12))?.[1]?.toLowerCase() ?? ''
  if (extension === 'xlsm' || extension === 'xltm') {
    throw new Refusal(
      'workbook-macros',
      'A workbook with macros (.xlsm) is not taken. Save it as .xlsx and send that.',
    )
  }
  const isPacked = bytes[0] === 0x50 && bytes[1] === 0x4b
  const isOldContainer = bytes[0] === 0xd0 && bytes[1] === 0xcf
  if (isPacked || isOldContainer || extension === 'xlsx') return readWorkbook(bytes)
  if (extension === 'csv' || extension === 'tsv' || extension === 'txt') return readCsv(bytes)
  throw new Refusal(
    'file-type',
    'Only .xlsx workbooks and .csv files can be read. Save the results as one of these.',
  )
}
