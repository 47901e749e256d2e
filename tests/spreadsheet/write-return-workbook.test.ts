import ExcelJS from 'exceljs'
import fc from 'fast-check'
import { afterEach, describe, expect, it, vi } from 'vitest'
import { readReportedValue } from '@/lib/domain/reported-value'
import { listPlaces, placeKey, type ReturnLayout } from '@/lib/spreadsheet/layout'
import { matchReturn, type ReturnCheck } from '@/lib/spreadsheet/match-return'
import { readWorkbook } from '@/lib/spreadsheet/read-workbook'
import { writeReturnWorkbook } from '@/lib/spreadsheet/write-return-workbook'
import { single, twoByTwo } from './layouts'

const deadlineText = '14 Mar 2027, 17:00 in Lisbon'
const keys = listPlaces(twoByTwo).map(placeKey)
const texts = [
  '1.10',
  '1,5',
  '<0.5',
  '> 99',
  '-0.00',
  '1e3',
  '25.000',
  '7',
  '1 234.5',
  '0.1',
  '.5',
  '3',
  '4',
  '5',
  '6',
  '8',
]
const filled = new Map(keys.map((key, index) => [key, texts[index] ?? '']))

async function checkOf(bytes: Uint8Array, layout: ReturnLayout): Promise<ReturnCheck> {
  return matchReturn({ workbook: await readWorkbook(bytes), layout })
}

/** Our own file, so the library may open it: what a person's program would see of it. */
async function openAsProgram(bytes: Uint8Array): Promise<ExcelJS.Workbook> {
  const workbook = new ExcelJS.Workbook()
  await workbook.xlsx.load(Buffer.from(bytes) as unknown as ExcelJS.Buffer)
  return workbook
}

afterEach(() => {
  vi.useRealTimers()
})

describe('writeReturnWorkbook', () => {
  it('gives the same bytes for the same layout, whatever the day', async () => {
    vi.useFakeTimers({ toFake: ['Date'], now: new Date('2026-12-01T09:00:00Z') })
    const first = await writeReturnWorkbook({ layout: twoByTwo, values: filled, deadlineText })
    vi.setSystemTime(new Date('2027-07-14T21:13:27Z'))
    const second = await writeReturnWorkbook({ layout: twoByTwo, values: filled, deadlineText })
    expect(Buffer.compare(first, second)).toBe(0)
  })

  it('states no maker, no program of another house and no time', async () => {
    const bytes = await writeReturnWorkbook({ layout: twoByTwo, deadlineText })
    const workbook = await openAsProgram(bytes)
    expect([workbook.creator, workbook.lastModifiedBy]).toEqual(['Evenlot', 'Evenlot'])
    expect(workbook.created).toEqual(new Date('2000-01-01T00:00:00Z'))
    expect(workbook.modified).toEqual(new Date('2000-01-01T00:00:00Z'))
    expect(workbook.company ?? '').toBe('')
    // Each local header and directory entry carries 1 January 1980, 00:00.
    const packed = Buffer.from(bytes)
    for (let at = packed.indexOf('PK\x03\x04'); at >= 0; at = packed.indexOf('PK\x03\x04', at + 4)) {
      expect(packed.readUInt32LE(at + 10)).toBe(0x0021_0000)
    }
  })

  it('opens only the cells of values, keeps what is typed in them, and holds the header in sight', async () => {
    const workbook = await openAsProgram(
      await writeReturnWorkbook({ layout: twoByTwo, values: filled, deadlineText }),
    )
    const sheet = workbook.getWorksheet('Results')!
    const open: string[] = []
    sheet.eachRow({ includeEmpty: true }, (row) =>
      row.eachCell({ includeEmpty: true }, (cell) => {
        if (cell.protection?.locked === false) open.push(cell.address)
      }),
    )
    expect(open).toHaveLength(16)
    expect(open[0]).toBe('D6')
    expect(open.at(-1)).toBe('E13')
    expect(sheet.getCell('D6').numFmt).toBe('@')
    expect(sheet.views[0]).toMatchObject({ state: 'frozen', xSplit: 3, ySplit: 5 })
    expect((sheet as unknown as { sheetProtection: { sheet: boolean } }).sheetProtection.sheet).toBe(true)
    expect((sheet.getRow(5).values as string[]).slice(1)).toEqual([
      'Material',
      'Day',
      'Replicate',
      'Breaking force (N)',
      'Strain at break (%)',
    ])
  })

  it('names the study and the deadline, and explains itself on a second sheet', async () => {
    const { sheets } = await readWorkbook(await writeReturnWorkbook({ layout: twoByTwo, deadlineText }))
    expect(sheets.map(({ name }) => name)).toEqual(['Results', 'How to fill in'])
    expect(sheets[0]?.cells.slice(0, 2).map(({ text }) => text)).toEqual([
      'Tear 27: results',
      'Deadline: 14 Mar 2027, 17:00 in Lisbon',
    ])
    expect(sheets[1]?.cells.map(({ text }) => text)).toContain('    Breaking force: N')
  })

  it('lets text that begins like a formula leave as text', async () => {
    const risky = ['=1+1', '+1', '-1', '@SUM(A1)', '\t=1', '\r=1', '=cmd|x!A1', 'a_x0041_']
    const layout: ReturnLayout = {
      ...single,
      studyShortName: '=HYPERLINK("http://host.example")',
      materials: risky.map((name, index) => ({ id: `m${index}`, name })),
    }
    const values = new Map(risky.map((text, index) => [`ash|m${index}|1`, text]))
    const { sheets } = await readWorkbook(
      await writeReturnWorkbook({ layout, values, deadlineText: '=NOW()' }),
    )
    const cells = sheets[0]?.cells ?? []
    expect(cells.filter(({ kind }) => kind === 'formula')).toEqual([])
    expect(cells.find(({ address }) => address === 'A1')?.text).toBe(
      '=HYPERLINK("http://host.example"): results',
    )
    expect(cells.filter(({ column, row }) => column === 3 && row > 5).map(({ text }) => text)).toEqual(risky)
  })
})

describe('a workbook written and read again', () => {
  it('gives back every value as it was reported', async () => {
    const check = await checkOf(
      await writeReturnWorkbook({ layout: twoByTwo, values: filled, deadlineText }),
      twoByTwo,
    )
    expect(check).toMatchObject({ problems: [], questions: [], missing: [], notices: [] })
    expect(new Map(check.values.map(({ key, text }) => [key, text]))).toEqual(filled)
  })

  it('changes nothing when it is imported and exported again', async () => {
    const first = await writeReturnWorkbook({ layout: twoByTwo, values: filled, deadlineText })
    const { values } = await checkOf(first, twoByTwo)
    const again = new Map(values.map(({ key, text }) => [key, text]))
    const second = await writeReturnWorkbook({ layout: twoByTwo, values: again, deadlineText })
    expect(Buffer.compare(first, second)).toBe(0)
  })

  it('gives what a person has filled in, numbers and texts alike', async () => {
    const workbook = await openAsProgram(await writeReturnWorkbook({ layout: single, deadlineText }))
    const sheet = workbook.getWorksheet('Results')!
    sheet.getCell('C6').value = '1.10'
    sheet.getCell('C7').value = 1.2
    sheet.getCell('C7').numFmt = '0.000'
    sheet.getCell('C8').value = '<0,5'
    const check = await checkOf(new Uint8Array(await workbook.xlsx.writeBuffer()), single)
    expect(check).toMatchObject({ problems: [], questions: [], missing: ['ash|oat|2'] })
    expect(check.values.map(({ key, text, cell }) => [key, text, cell])).toEqual([
      ['ash|rye|1', '1.10', 'C6'],
      ['ash|rye|2', '1.200', 'C7'],
      ['ash|oat|1', '<0,5', 'C8'],
    ])
  })

  it('is never a success while it is empty', async () => {
    const check = await checkOf(await writeReturnWorkbook({ layout: twoByTwo, deadlineText }), twoByTwo)
    expect(check.problems.map(({ code }) => code)).toEqual(['no-values'])
    expect(check.missing).toEqual(keys)
  })

  it('gives any text the meaning that the form gives it', async () => {
    const piece = fc.constantFrom(
      '0',
      '1',
      '12',
      '123',
      '1234',
      '.',
      ',',
      ' ',
      "'",
      '-',
      '<',
      '>',
      'e',
      '5',
      'N',
      '\u2212',
      '\u00a0',
    )
    const text = fc.array(piece, { minLength: 1, maxLength: 7 }).map((pieces) => pieces.join(''))
    await fc.assert(
      fc.asyncProperty(fc.array(text, { minLength: 16, maxLength: 16 }), async (given) => {
        const values = new Map(keys.map((key, index) => [key, given[index] ?? '']))
        const check = await checkOf(
          await writeReturnWorkbook({ layout: twoByTwo, values, deadlineText }),
          twoByTwo,
        )
        const taken = new Map(check.values.map((value) => [value.key, readReportedValue(value.text)]))
        const asked = new Map(check.questions.map((question) => [question.key, question.readings]))
        for (const [key, typed] of values) {
          const inForm = readReportedValue(typed)
          const isValue = inForm.kind === 'number' || inForm.kind === 'censored'
          expect(taken.get(key)).toEqual(isValue ? inForm : undefined)
          expect(asked.get(key)).toEqual(inForm.kind === 'ambiguous' ? inForm.readings : undefined)
          expect(check.missing.includes(key)).toBe(typed.trim() === '')
        }
      }),
      { seed: 27, numRuns: 60 },
    )
  })
})
