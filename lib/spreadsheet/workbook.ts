/*
 * A workbook as the rest of the product sees it: sheets of non-empty cells, each with its address and the
 * text a person would have seen. Nothing of the file format is left in it.
 */

export type Workbook = {
  sheets: Sheet[]
  /** Things in the file that were left alone, in words for the person who sent it. */
  notices: string[]
}

export type Sheet = { name: string; cells: SheetCell[] }

export type SheetCell = {
  /** As a spreadsheet program names it: `D17`. */
  address: string
  /** Both count from 1. */
  row: number
  column: number
  text: string
  kind: 'text' | 'number' | 'boolean' | 'date' | 'error' | 'formula'
}

export type WorkbookLimits = {
  packedBytes: number
  /** All parts that are read, counted as they come out of the packing, whatever the file claims. */
  unpackedBytes: number
  /** Unpacked to packed size of one part; asked only beyond `ratioFloorBytes`, as small parts pack well. */
  ratio: number
  ratioFloorBytes: number
  entries: number
  sheets: number
  /** Non-empty cells of the whole workbook. */
  cells: number
  /** The furthest row and column in which something may stand. */
  rows: number
  columns: number
  /** XML elements, so that a million empty rows stop as early as a million full ones. */
  elements: number
  /** Characters in one cell, and in all cells together. */
  cellText: number
  text: number
  /** Characters between two tags of the XML, before the parser has a whole text to show. */
  run: number
}

/** Far above any real return, far below what would trouble the machine. */
export const workbookLimits: WorkbookLimits = {
  packedBytes: 5_000_000,
  unpackedBytes: 50_000_000,
  ratio: 100,
  ratioFloorBytes: 1_000_000,
  entries: 200,
  sheets: 20,
  cells: 20_000,
  rows: 20_000,
  columns: 1_000,
  elements: 1_000_000,
  cellText: 32_767,
  text: 5_000_000,
  run: 1_000_000,
}

export function cellAddress({ row, column }: { row: number; column: number }): string {
  return `${columnLetters(column)}${row}`
}

function columnLetters(column: number): string {
  let letters = ''
  for (let rest = column; rest > 0; rest = Math.floor((rest - 1) / 26)) {
    letters = String.fromCharCode(65 + ((rest - 1) % 26)) + letters
  }
  return letters
}

/** Undefined where the text is no address a spreadsheet could hold. */
export function parseCellAddress(address: string): { row: number; column: number } | undefined {
  const found = /^\$?([A-Za-z]{1,3})\$?([1-9]\d{0,6})$/.exec(address)
  if (found === null) return undefined
  const [, letters = '', digits = ''] = found
  let column = 0
  for (const letter of letters.toUpperCase()) column = column * 26 + letter.charCodeAt(0) - 64
  const row = Number(digits)
  return column <= 16_384 && row <= 1_048_576 ? { row, column } : undefined
}
