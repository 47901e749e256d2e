import { describe, expect, it } from 'vitest'
import type { ReturnLayout } from '@/lib/spreadsheet/layout'
import { matchReturn, type ReturnCheck } from '@/lib/spreadsheet/match-return'
import { readCsv } from '@/lib/spreadsheet/read-csv'
import { readWorkbook } from '@/lib/spreadsheet/read-workbook'
import type { DecimalMark } from '@/lib/domain/reported-value'
import { single, twoByTwo } from './layouts'
import { makeWorkbook, sheetXml } from './make-workbook'

type Table = (string | number | null)[][]

async function checkTable(
  table: Table,
  layout: ReturnLayout,
  decimalMark?: DecimalMark,
): Promise<ReturnCheck> {
  const workbook = await readWorkbook(makeWorkbook({ sheets: [{ name: 'Results', xml: sheetXml(table) }] }))
  return matchReturn({ workbook, layout, decimalMark })
}

function checkText(text: string, layout: ReturnLayout, decimalMark?: DecimalMark): ReturnCheck {
  return matchReturn({ workbook: readCsv(Buffer.from(text)), layout, decimalMark })
}

function valuesOf({ values }: ReturnCheck): Record<string, string> {
  return Object.fromEntries(values.map(({ key, text }) => [key, text]))
}

function faultsOf({ problems }: ReturnCheck): string[] {
  return problems.map(({ cell, code }) => `${cell ?? '-'} ${code}`)
}

const ashValues = { 'ash|rye|1': '1.10', 'ash|rye|2': '1.2', 'ash|oat|1': '<0.5', 'ash|oat|2': '2,0' }

describe('matchReturn takes', () => {
  it.each([
    ['the names as they are', 'Material;Replicate;Ash content (g/kg)'],
    ['names in another case, with other spaces', ' MATERIAL ;replicate;ash  Content [g/kg]'],
    ['the measurand without its unit', 'material;replicate;Ash content'],
    ['the unit after a comma', 'material;replicate;Ash content, g/kg'],
    ['the word value', 'material;replicate;Value'],
    ['the word result with the unit', 'material;replicate;Result (g/kg)'],
  ])('a table headed by %s', (_, header) => {
    const check = checkText(`${header}\nRye;1;1.10\nrye;2;1.2\nOat;1;<0.5\nOat;2;2,0\n`, single)
    expect(check).toMatchObject({ problems: [], questions: [], missing: [], notices: [] })
    expect(valuesOf(check)).toEqual(ashValues)
  })

  it('columns and rows in any order, below a letterhead', () => {
    const check = checkText(
      'Our letter;;\nof 3 March;;\n;;\nReplicate;Ash content (g/kg);Material\n2;2,0;Oat\n1;1.10;Rye\n1;<0.5;Oat\n2;1.2;Rye',
      single,
    )
    expect(check.problems).toEqual([])
    expect(valuesOf(check)).toEqual(ashValues)
  })

  it('a long table, one value a row', () => {
    const check = checkText(
      'Material;Day;Replicate;Measurand;Value;Unit\nWool felt;Day 1;2;Breaking force;31.0;N\nWool felt;1;2;strain at break;4.25;%\n',
      twoByTwo,
    )
    expect(check.problems).toEqual([])
    expect(valuesOf(check)).toEqual({ 'force|wool|1.2': '31.0', 'strain|wool|1.2': '4.25' })
    expect(check.missing).toHaveLength(14)
  })

  it('numbers of number cells with the digits they show', async () => {
    const check = await checkTable(
      [
        ['Material', 'Replicate', 'Value'],
        ['Rye', 1, 1.234],
      ],
      single,
      'comma',
    )
    expect(valuesOf(check)).toEqual({ 'ash|rye|1': '1.234' })
  })

  it('a table without columns for what there is only one of', () => {
    const layout = { ...single, materials: single.materials.slice(0, 1), levels: [...single.levels] }
    const check = checkText('Replicate,Value\n1,1.5\n2,1.6', {
      ...layout,
      levels: [{ name: 'Day', count: 1 }, ...single.levels],
    })
    expect(check.problems).toEqual([])
    expect(valuesOf(check)).toEqual({ 'ash|rye|1.1': '1.5', 'ash|rye|1.2': '1.6' })
  })

  it('results spread over several sheets', async () => {
    const header = ['Material', 'Replicate', 'Value']
    const workbook = await readWorkbook(
      makeWorkbook({
        sheets: [
          { name: 'Rye', xml: sheetXml([header, ['Rye', 1, '1']]) },
          { name: 'Notes', xml: sheetXml([['weather', 'fair']]) },
          { name: 'Oat', xml: sheetXml([header, ['Oat', 1, '2']]) },
        ],
      }),
    )
    const check = matchReturn({ workbook, layout: single })
    expect(check.values.map(({ sheet, cell }) => `${sheet}!${cell}`)).toEqual(['Rye!C2', 'Oat!C2'])
    expect(check.notices).toEqual([
      'The sheet “Notes” has no table of results that could be recognised and was not read.',
    ])
  })

  it('a table whose titles are repeated further down', () => {
    const check = checkText('Material,Replicate,Value\nRye,1,1\nMaterial,Replicate,Value\nOat,1,2\n', single)
    expect(check.problems).toEqual([])
    expect(check.values).toHaveLength(2)
  })
})

describe('matchReturn', () => {
  it('keeps what was typed, and gives a text that reads alike without a decimal mark', () => {
    const check = checkText(
      'Material;Replicate;Value\nRye;1; 1,234\nRye;2;1.234,5\nOat;1;2,50\n',
      single,
      'comma',
    )
    expect(check.values.map(({ typed, text }) => [typed, text])).toEqual([
      [' 1,234', '1.234'],
      ['1.234,5', '1.234,5'],
      ['2,50', '2,50'],
    ])
  })

  it('asks about a text with two readings, naming the cell and the place', () => {
    const check = checkText('Material;Replicate;Value\nRye;1;1,234\n', single)
    expect(check).toMatchObject({ values: [], problems: [] })
    expect(check.questions).toEqual([
      {
        key: 'ash|rye|1',
        sheet: 'File',
        cell: 'C2',
        column: 'Value',
        found: '1,234',
        readings: ['1.234', '1234'],
      },
    ])
    expect(check.missing).toEqual(['ash|rye|2', 'ash|oat|1', 'ash|oat|2'])
  })

  it('tells of columns it does not know', () => {
    const check = checkText('Material,Replicate,Value,Remark\nRye,1,1,wet\n', single)
    expect(check.notices).toEqual([
      'The column “Remark” (File!D1) is not part of this study and was not read.',
    ])
    expect(check.problems).toEqual([])
  })

  it('checks a column of units where each row has one value, and leaves it alone where it has several', () => {
    const one = checkText('Material,Replicate,Value,Unit\nRye,1,1,g/kg\nRye,2,1,mg/kg\n', single)
    expect(faultsOf(one)).toEqual(['D3 other-unit'])
    const several = checkText(
      'Material,Day,Replicate,Breaking force,Strain at break,Unit\nWool felt,1,1,31,4,N\n',
      twoByTwo,
    )
    expect(several.problems).toEqual([])
    expect(several.notices).toEqual([
      'The column “Unit” (File!F1) is not part of this study and was not read.',
    ])
  })

  it.each([
    ['no table at all', 'a,b\nc,d\n', ['- no-header']],
    ['an empty table', 'Material,Replicate,Value\n', ['- no-values']],
    ['a table with empty places only', 'Material,Replicate,Value\nRye,1,\n', ['- no-values']],
    ['no cell at all', '\n\n', ['- no-values']],
    ['a table without materials', 'Replicate,Value\n1,2\n', ['- missing-column']],
    ['a table without replicates', 'Material,Value\nRye,2\n', ['- missing-column']],
    ['a table without values', 'Material,Replicate\nRye,2\n', ['- missing-column']],
    [
      'a unit of another size in the title',
      'Material,Replicate,Ash content (mg/kg)\nRye,1,2\n',
      ['C1 other-unit'],
    ],
    [
      'a unit that differs by case only',
      'Material,Replicate,Ash content (G/KG)\nRye,1,2\n',
      ['C1 other-unit'],
    ],
    ['two columns of values', 'Material,Replicate,Value,Result\nRye,1,2,3\n', ['D1 duplicate-column']],
  ])('never takes %s for success', (_, text, faults) => {
    expect(faultsOf(checkText(text, single))).toEqual(faults)
  })

  it('takes nothing from a formula, an error or a date, and names the cell', async () => {
    const check = await checkTable(
      [
        ['Material', 'Replicate', 'Value'],
        ['Rye', 1, '<c><f>A1*2</f><v>99</v></c>'],
        ['Rye', 2, '<c t="e"><v>#REF!</v></c>'],
        ['Oat', 1, '<c t="d"><v>2027-01-02</v></c>'],
        ['Oat', 2, '<c t="b"><v>1</v></c>'],
      ],
      single,
    )
    expect(check.values).toEqual([])
    expect(faultsOf(check)).toEqual(['C2 formula', 'C3 error-cell', 'C4 date', 'C5 boolean'])
    expect(check.problems[0]).toEqual({
      sheet: 'Results',
      cell: 'C2',
      column: 'Value',
      code: 'formula',
      found: '=A1*2',
      wanted: 'a number in g/kg, without the unit',
      message:
        'Results!C2, Value: found “=A1*2”, wanted a number in g/kg, without the unit. Put the value in place of the formula.',
    })
  })

  it('tells a right unit that is only superfluous from one that is another', () => {
    const check = checkText('Material;Replicate;Value\nRye;1;2.5 g/kg\nRye;2;2.5 mg/kg\n', single)
    expect(faultsOf(check)).toEqual(['C2 unit', 'C3 other-unit'])
    expect(check.problems[1]?.message).toContain('“mg/kg” follows the number, and values are asked in g/kg')
  })
})

// Written by hand: a table of two measurands into which 25 faults were planted, each named here at its cell.
describe('matchReturn, on a table with 25 planted faults,', () => {
  const table: Table = [
    [
      'Material',
      'Day',
      'Replicate',
      'Breaking force (kN)',
      'Strain at break (%)',
      'Strain at break',
      'Operator',
    ],
    ['Linen, plain', 1, 1, '31.2 N', '4.25', null, 'a'],
    ['Linen', 1, 2, '31.4', '4.3O', null, 'b'],
    ['Linen, plain', 3, 1, 'n/a', '-', null, 'c'],
    ['Linen, plain', 2, 1.5, '31.0', '4.2', null, null],
    ['Linen, plain', 1, 1, '30.9', '4.1', null, null],
    [null, 2, 1, '31.1', '<c><f>E2</f><v>4.2</v></c>', null, null],
    ['Wool felt', null, 1, '<c t="e"><v>#N/A</v></c>', '4.0', null, null],
    ['Wool felt', 1, 0, '12;13', '\u2264 4', null, null],
    ['Wool felt', 1, 1, '1,23,4', '5.', null, null],
    ['Wool felt', 1, 2, '5 \u00b1 0.2', '<', null, null],
    ['Wool felt', 2, '<c><f>C11</f><v>1</v></c>', '0.0312 kN', '4.9', null, null],
    ['Wool felt', 'x', 2, '22.1', '<c t="d"><v>2027-05-04</v></c>', null, null],
    ['Wool felt', 2, 2, '22.4', '4,50', null, null],
  ]
  const planted = [
    'D1 other-unit',
    'F1 duplicate-column',
    'D2 unit',
    'A3 unknown-material',
    'E3 other-unit',
    'B4 group-out-of-range',
    'D4 word',
    'E4 dash',
    'C5 not-a-group-number',
    'A6 duplicate-row',
    'A7 empty-place',
    'E7 formula',
    'B8 empty-place',
    'D8 error-cell',
    'C9 group-out-of-range',
    'D9 several-values',
    'E9 comparison',
    'D10 grouping',
    'E10 unfinished',
    'D11 uncertainty',
    'E11 mark-without-number',
    'C12 formula',
    'D12 other-unit',
    'B13 not-a-group-number',
    'E13 date',
  ]

  it('reports exactly those 25, each at its cell, and takes the rest', async () => {
    const check = await checkTable(table, twoByTwo)
    expect(planted).toHaveLength(25)
    expect(faultsOf(check).sort()).toEqual([...planted].sort())
    expect(check.questions).toEqual([])
    expect(valuesOf(check)).toEqual({
      'strain|linen|1.1': '4.25',
      'force|wool|2.2': '22.4',
      'strain|wool|2.2': '4,50',
    })
  })

  it('names sheet, cell, column, what was found and what is wanted each time', async () => {
    const { problems } = await checkTable(table, twoByTwo)
    for (const problem of problems) {
      expect(problem.sheet).toBe('Results')
      expect(problem.column).not.toBeNull()
      expect(problem.wanted).not.toBe('')
      expect(problem.message).toContain(`Results!${problem.cell}, ${problem.column}: found `)
      expect(problem.message).toContain(`wanted ${problem.wanted}. `)
      expect(problem.message).toMatch(/\.$/)
    }
  })

  it('counts no place with a fault in it as one for which nothing came', async () => {
    const { missing } = await checkTable(table, twoByTwo)
    expect(missing).not.toContain('force|linen|1.1')
    expect(missing).toContain('force|linen|1.2')
  })
})
