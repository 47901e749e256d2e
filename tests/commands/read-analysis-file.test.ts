import { describe, expect, it } from 'vitest'
import { readAnalyseOptions } from '@/lib/commands/analyse-options'
import { readAnalysisFile } from '@/lib/commands/read-analysis-file'

function read(text: string, more: { nesting?: string[]; measurand?: string } = {}) {
  return readAnalysisFile(new TextEncoder().encode(text), {
    nesting: more.nesting ?? [],
    columns: new Map(),
    keepExcluded: false,
    measurand: more.measurand ?? null,
  })
}

describe('reading a file of results', () => {
  it('reads the minus sign of typeset text, in values, uncertainties and the order of runs alike', async () => {
    const { results, problems } = await read(
      'lab,value,order,uncertainty\nA,\u22121.20,\u22122,0.1\nB,\u22123e\u22122,\u22121,1e\u22121\n',
    )
    expect(problems).toEqual([])
    expect(results.map(({ text, order, uncertainty }) => [text, order, uncertainty])).toEqual([
      ['-1.20', -2, 0.1],
      ['-3e-2', -1, 0.1],
    ])
  })

  it('lets a number too large to be squared pass, for the analysis to say so', async () => {
    const { results, problems } = await read('lab,value\nA,1e300\nA,-1e300\n')
    expect(problems).toEqual([])
    expect(results.map(({ text }) => text)).toEqual(['1e300', '-1e300'])
  })

  it('still refuses an order or an uncertainty that no double holds', async () => {
    const { problems } = await read('lab,value,order,uncertainty\nA,1,1e400,1e400\n')
    expect(problems.map(({ column }) => column)).toEqual(['order', 'uncertainty'])
  })

  it('takes off the apostrophe that keeps a spreadsheet from seeing a formula in a name', async () => {
    const { results, problems } = await read(
      "lab,material,day,value\n'=A1,'+5 %,'-1,1.0\n'@x,'quoted',O'Hara,2.0\n'\\tA,plain,1,3.0\n".replace(
        '\\t',
        '\t',
      ),
      { nesting: ['day'] },
    )
    expect(problems).toEqual([])
    expect(results.map(({ laboratory, material, groups }) => [laboratory, material, ...groups])).toEqual([
      ['=A1', '+5 %', '-1'],
      ['@x', "'quoted'", "O'Hara"],
      ['\tA', 'plain', '1'],
    ])
  })
})

describe('reading one measurand of several', () => {
  const text = 'lab,measurand,value\nA,iron,1\nA,zinc,7\nB,iron,3\nB,lead,9\n'
  const named = (results: readonly { measurand: string | null; text: string }[]) =>
    results.map((one) => `${one.measurand} ${one.text}`)

  it('keeps the others beside it, and a fault in them is a fault of the file', async () => {
    const { results, otherMeasurands, problems } = await read(text, { measurand: 'iron' })
    expect(problems).toEqual([])
    expect(named(results)).toEqual(['iron 1', 'iron 3'])
    expect(named(otherMeasurands)).toEqual(['zinc 7', 'lead 9'])
    const faulty = await read(text.replace('zinc,7', 'zinc,x'), { measurand: 'iron' })
    expect(faulty.problems.map(({ row, found }) => [row, found])).toEqual([[3, '"x"']])
  })

  it('has none beside it where the file has one alone', async () => {
    const { results, otherMeasurands } = await read('lab,measurand,value\nA,iron,1\nB,iron,3\n')
    expect(named(results)).toEqual(['iron 1', 'iron 3'])
    expect(otherMeasurands).toEqual([])
  })
})

describe('the options of analyse', () => {
  it('know a scale without a true zero', () => {
    expect(readAnalyseOptions(['file.csv']).options?.settings.trueZero).toBe(true)
    expect(readAnalyseOptions(['file.csv', '--no-true-zero']).options?.settings.trueZero).toBe(false)
  })

  it('read a reference value with the minus sign of typeset text', () => {
    const { options } = readAnalyseOptions(['file.csv', '--reference', 'A=\u22121.5:1e\u22122'])
    expect(options?.settings.references).toEqual({ A: { value: '-1.5', uncertainty: 0.01 } })
  })
})
