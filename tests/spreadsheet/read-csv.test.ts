import { describe, expect, it } from 'vitest'
import { Refusal } from '@/lib/domain/errors'
import { readCsv } from '@/lib/spreadsheet/read-csv'

function cellsOf(text: string | Uint8Array): Record<string, string> {
  const { sheets } = readCsv(typeof text === 'string' ? Buffer.from(text) : text)
  return Object.fromEntries((sheets[0]?.cells ?? []).map((cell) => [cell.address, cell.text]))
}

function refusalOf(bytes: Uint8Array): string {
  try {
    readCsv(bytes)
  } catch (error) {
    if (error instanceof Refusal) return error.code
    throw error
  }
  throw new Error('the file was read')
}

describe('readCsv', () => {
  const expected = { A1: 'Material', B1: 'Value', A2: 'Linen, plain', B2: '1,50', A4: 'Wool', B4: '2' }

  it.each([
    ['semicolons', 'Material;Value\r\nLinen, plain;1,50\r\n\r\nWool;2\r\n'],
    ['tabs', 'Material\tValue\nLinen, plain\t1,50\n\nWool\t2'],
    ['commas and quotes', '"Material","Value"\n"Linen, plain","1,50"\n\nWool,2\n'],
    ['a mark at the beginning', '\ufeffMaterial;Value\nLinen, plain;1,50\n\nWool;2'],
  ])('reads a table parted by %s, empty lines counted', (_, text) => {
    expect(cellsOf(text)).toEqual(expected)
  })

  it('goes by the line that names the mark, and counts it', () => {
    expect(cellsOf('sep=,\na;b,c\n')).toEqual({ A2: 'a;b', B2: 'c' })
  })

  it('counts records, so that a line break within quotes moves no row', () => {
    expect(cellsOf('a,"b\nb"\nc,"say ""d"""')).toEqual({ A1: 'a', B1: 'b\nb', A2: 'c', B2: 'say "d"' })
  })

  it('keeps texts letter for letter', () => {
    expect(cellsOf('a, 1.10 ,=1+1,-5,\u00b5')).toEqual({
      A1: 'a',
      B1: ' 1.10 ',
      C1: '=1+1',
      D1: '-5',
      E1: '\u00b5',
    })
  })

  it('says that every cell is text', () => {
    expect(readCsv(Buffer.from('1')).sheets).toEqual([
      { name: 'File', cells: [{ address: 'A1', row: 1, column: 1, text: '1', kind: 'text' }] },
    ])
  })

  it.each<[string, string, () => Uint8Array]>([
    ['an empty file', 'file-empty', () => new Uint8Array()],
    ['a file beyond 5 MB', 'file-too-large', () => new Uint8Array(5_000_001)],
    ['UTF-16, little end first', 'csv-utf-16', () => Buffer.from('\ufeffa;b', 'utf16le')],
    ['UTF-16, big end first', 'csv-utf-16', () => Buffer.from('\ufeffa;b', 'utf16le').swap16()],
    ['UTF-16 without a mark', 'not-a-text-file', () => Buffer.from('a;b', 'utf16le')],
    ['a program', 'not-a-text-file', () => Buffer.from('MZ\0\0')],
    ['letters of another encoding', 'csv-not-utf-8', () => Buffer.from('Gr\u00f6\u00dfe;1', 'latin1')],
    ['quotes that do not close', 'csv-damaged', () => Buffer.from('a,"b\nc,d')],
    ['quotes in the middle', 'csv-damaged', () => Buffer.from('a,b"c"\n')],
    ['too many rows', 'csv-too-many-rows', () => Buffer.from('\n'.repeat(4_000_000))],
    ['too many columns', 'csv-too-many-columns', () => Buffer.from(','.repeat(900_000))],
    ['too many cells', 'csv-too-many-cells', () => Buffer.from(`${'1,'.repeat(900)}\n`.repeat(30))],
    ['a line without end', 'csv-text-too-long', () => Buffer.from('x'.repeat(4_000_000))],
    ['a value longer than a cell can hold', 'csv-text-too-long', () => Buffer.from('x'.repeat(40_000))],
  ])('refuses %s by name', (_, code, make) => {
    const bytes = make()
    const startedAt = performance.now()
    expect(refusalOf(bytes)).toBe(code)
    expect(performance.now() - startedAt).toBeLessThan(5_000)
  })
})
