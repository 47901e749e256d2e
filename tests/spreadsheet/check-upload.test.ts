import { monitorEventLoopDelay } from 'node:perf_hooks'
import { describe, expect, it } from 'vitest'
import { checkUpload } from '@/lib/spreadsheet/check-upload'
import { writeReturnWorkbook } from '@/lib/spreadsheet/write-return-workbook'
import { single } from './layouts'
import { makeWorkbook, sheetXml } from './make-workbook'

const ash = Buffer.from('Material;Replicate;Value\nRye;1;1,50\nOat;2;0,7\n')

async function codeOf(bytes: Uint8Array, fileName: string): Promise<string> {
  const answer = await checkUpload({ bytes, fileName, layout: single })
  return answer.outcome === 'refused' ? answer.code : 'checked'
}

describe('checkUpload', () => {
  it('checks a workbook of the study', async () => {
    const values = new Map([['ash|rye|1', '1.10']])
    const bytes = await writeReturnWorkbook({ layout: single, values, deadlineText: '14 Mar 2027' })
    expect(await checkUpload({ bytes, fileName: 'ash.xlsx', layout: single })).toEqual({
      outcome: 'checked',
      check: {
        values: [{ key: 'ash|rye|1', text: '1.10', typed: '1.10', sheet: 'Results', cell: 'C6' }],
        problems: [],
        questions: [],
        missing: ['ash|rye|2', 'ash|oat|1', 'ash|oat|2'],
        notices: [],
      },
    })
  })

  it('checks a text table, with the decimal mark the laboratory named', async () => {
    const bytes = Buffer.from('Material;Replicate;Value\nRye;1;1,234\n')
    const answer = await checkUpload({ bytes, fileName: 'ash.CSV', layout: single, decimalMark: 'comma' })
    expect(answer).toMatchObject({
      outcome: 'checked',
      check: { values: [{ text: '1.234', typed: '1,234' }] },
    })
  })

  it.each<[string, string, string, () => Uint8Array]>([
    ['an empty file', 'a.xlsx', 'file-empty', () => new Uint8Array()],
    ['a file beyond 5 MB', 'a.xlsx', 'file-too-large', () => new Uint8Array(5_000_001)],
    ['a picture', 'a.png', 'file-type', () => Buffer.from('\x89PNG')],
    ['a file without an ending', 'results', 'file-type', () => Buffer.from('1;2')],
    ['a program called a workbook', 'a.xlsx', 'not-a-workbook', () => Buffer.from('MZ\x90\0')],
    ['a page called a workbook', 'a.xlsx', 'not-a-workbook', () => Buffer.from('<html>')],
    ['a program called a text table', 'a.csv', 'not-a-text-file', () => Buffer.from('MZ\x90\0')],
    ['a workbook that may carry macros', 'a.xlsm', 'workbook-macros', () => makeWorkbook()],
    ['an old workbook', 'a.xls', 'workbook-old-format', () => Buffer.from('d0cf11e0a1b11ae1', 'hex')],
  ])('refuses %s (%s)', async (_, fileName, code, make) => {
    expect(await codeOf(make(), fileName)).toBe(code)
  })

  it('goes by the content where the name says another thing', async () => {
    const bytes = makeWorkbook({
      sheets: [
        {
          name: 'Results',
          xml: sheetXml([
            ['Material', 'Value'],
            ['Rye', '1'],
          ]),
        },
      ],
    })
    expect(await codeOf(bytes, '../../etc/a.csv')).toBe('checked')
  })

  it('refuses a bomb while this process stays responsive', async () => {
    const xml = `<?xml version="1.0"?><worksheet>${' '.repeat(100 * 1024 * 1024)}</worksheet>`
    const bytes = makeWorkbook({ sheets: [{ name: 'Results', xml }] })
    const delay = monitorEventLoopDelay({ resolution: 5 })
    delay.enable()
    expect(await codeOf(bytes, 'a.xlsx')).toBe('workbook-text-too-long')
    delay.disable()
    // Nothing is read here; the allowance is for a machine that is busy with other work.
    expect(delay.max / 1e6).toBeLessThan(500)
  })

  it('says too complex when the reader takes longer than it may', async () => {
    const answer = await checkUpload({ bytes: ash, fileName: 'a.csv', layout: single }, { readingMs: 0 })
    expect(answer).toMatchObject({ outcome: 'refused', code: 'upload-too-complex' })
  })

  it('says too complex when the reader runs out of memory, and goes on', async () => {
    const endless = { ...single, levels: [{ name: 'Replicate', count: 9_000_000 }] }
    const answer = await checkUpload({ bytes: ash, fileName: 'a.csv', layout: endless }, { memoryMiB: 100 })
    expect(answer).toMatchObject({ outcome: 'refused', code: 'upload-too-complex' })
    expect(await codeOf(ash, 'a.csv')).toBe('checked')
  })

  it('says the reader is not there when it cannot start', async () => {
    const answer = await checkUpload({ bytes: ash, fileName: 'a.csv', layout: single }, { startingMs: 0 })
    expect(answer).toMatchObject({ outcome: 'refused', code: 'upload-reader-unavailable' })
  })

  it('answers every one of many files at once, and turns away those beyond its queue', async () => {
    const uploads = Array.from({ length: 45 }, () =>
      checkUpload({ bytes: ash, fileName: 'a.csv', layout: single }, { startingMs: 0 }),
    )
    const answers = await Promise.all(uploads)
    const codes = answers.map((answer) => (answer.outcome === 'refused' ? answer.code : 'checked'))
    expect(codes.filter((code) => code === 'upload-busy')).toHaveLength(3)
    expect(codes.filter((code) => code === 'upload-reader-unavailable')).toHaveLength(42)
    expect(await codeOf(ash, 'a.csv')).toBe('checked')
  })
})
