import { describe, expect, it } from 'vitest'
import type { AnalysisSettings, MaterialAnalysis } from '@/lib/statistics'
import { analyseRows, type TestRow } from './analyse-rows'
import { readRows } from './reference/read-reference'

// Faults planted in laboratory L03 of the glucose study, which without them is never flagged.
const glucose: TestRow[] = readRows('e691_glucose').map(({ lab, material, value }) => ({
  laboratory: lab,
  material,
  text: value,
}))

type Change = (row: TestRow) => number | null

function planted(change: Change, decimals = 2): TestRow[] {
  return glucose.map((row) => {
    const value = row.laboratory === 'L03' ? change(row) : null
    return value === null ? row : { ...row, text: value.toFixed(decimals) }
  })
}

function material(
  rows: readonly TestRow[],
  name: string,
  settings: Partial<AnalysisSettings> = {},
): MaterialAnalysis {
  return analyseRows(rows, { settings }).materials.find((one) => one.material === name)!
}

const units = [
  { name: 'mmol/l', factor: 18.016 },
  { name: 'g/l', factor: 100 },
]
const swapped = (one: string, other: string): TestRow[] =>
  glucose.map((row) =>
    row.laboratory !== 'L03'
      ? row
      : { ...row, material: row.material === one ? other : row.material === other ? one : row.material! },
  )

describe('explanations of a flagged cell', () => {
  it.each([
    [
      'a decimal point',
      planted((row) => (row.material === 'C' ? Number(row.text) * 10 : null)),
      'C',
      'factor',
      '0.1',
    ],
    [
      'another unit in one cell',
      planted((row) => (row.material === 'C' ? Number(row.text) / 18.016 : null), 3),
      'C',
      'unit',
      'mmol/l',
    ],
    [
      'another unit throughout',
      planted((row) => Number(row.text) / 18.016, 3),
      'A',
      'unitAllMaterials',
      'mmol/l',
    ],
    ['two materials exchanged', swapped('C', 'D'), 'C', 'exchange', 'C ↔ D'],
    ['two distant materials exchanged', swapped('A', 'E'), 'A', 'exchange', 'A ↔ E'],
    ['a constant amount', planted((row) => Number(row.text) + 8), 'A', 'offset', '7.81'],
    ['a constant factor', planted((row) => Number(row.text) * 1.06), 'B', 'proportion', '1.05'],
  ] as const)('puts %s first', (_, rows, name, kind, detail) => {
    const [first] = material(rows, name, { units }).proposals!
    expect(first).toMatchObject({ laboratory: 'L03', kind, detail })
    // The range in which planted faults scored when the method was laid down.
    expect(first!.score).toBeGreaterThan(6.7)
    expect(first!.score).toBeLessThan(44)
    expect(Math.abs(first!.after.h!)).toBeLessThan(2)
  })

  it('pays log₁₀ 6 for a power of ten and earns the surprise it takes away', () => {
    const rows = planted((row) => (row.material === 'C' ? Number(row.text) * 10 : null))
    const [first] = material(rows, 'C').proposals!
    expect(first!.price).toBeCloseTo(Math.log10(6), 12)
    expect(first!.score).toBeCloseTo(first!.before.surprise! - first!.after.surprise! - Math.log10(6), 12)
    expect(first!.cells).toEqual(['C'])
  })

  it('finds the one result that lies apart, and the one whose digits changed places', () => {
    let isFirst = true
    const apart = planted((row) => {
      if (row.material !== 'C' || !isFirst) return null
      isFirst = false
      return Number(row.text) + 35
    })
    expect(material(apart, 'C').proposals![0]).toMatchObject({
      laboratory: 'L03',
      kind: 'oneApart',
      cells: ['C'],
    })

    const cells = ['52.1 52.3', '52.0 52.2', '52.4 52.3', '52.2 52.1', '52.3 25.2', '52.1 52.0']
    const rows = cells.flatMap((texts, index) =>
      texts.split(' ').map((text) => ({ laboratory: `L${index}`, text })),
    )
    const [first] = analyseRows(rows).materials[0]!.proposals!
    expect(first).toMatchObject({ laboratory: 'L4', kind: 'digits', detail: '25.2 → 52.2' })
  })

  it('has nothing to say of a laboratory that is truly apart', () => {
    const rows = planted((row) => (row.material === 'C' ? Number(row.text) + 20 : null))
    const one = material(rows, 'C')
    expect(Math.abs(one.cells[2]!.h!)).toBeGreaterThan(one.critical.h['0.005']!)
    expect(one.proposals).toEqual([])
  })

  it('is silent with fewer than four laboratories, and says why', () => {
    const rows = glucose.filter(({ laboratory }) => laboratory <= 'L03')
    const one = material(rows, 'A')
    expect(one.proposals).toBeNull()
    expect(one.reasons!['proposals']).toBe('4 laboratories are needed.')
  })
})

describe('what is noticed beside', () => {
  it('is results that agree in every digit, with the chance of it', () => {
    const one = material(
      planted((row) => (row.material === 'C' ? 133.33 : null)),
      'C',
    )
    const [first] = one.noticed!
    expect(first).toMatchObject({ laboratory: 'L03', kind: 'identical' })
    // (d/(s_r√(2π)))² / √3 × 40 cells, s_r pooled over the other laboratories.
    const others = one.cells.filter(({ laboratory }) => laboratory !== 'L03')
    const variance = others.reduce((sum, { sd }) => sum + sd! ** 2, 0) / others.length
    const chance = ((0.01 / Math.sqrt(variance * 2 * Math.PI)) ** 2 / Math.sqrt(3)) * 40
    expect(first!.probability).toBeCloseTo(chance, 12)
  })

  it('is a coarser step than asked, where it is coarse beside the scatter', () => {
    const rows = planted((row) => Math.round(Number(row.text)), 0)
    const { noticed } = material(rows, 'A', { decimals: { A: 2 } })
    expect(noticed).toHaveLength(1)
    expect(noticed![0]).toMatchObject({ laboratory: 'L03', kind: 'coarse', step: 1 })
    const steps = material(glucose, 'A', { decimals: { A: 2 } }).noticed
    expect(steps).toEqual([])
  })

  it('is a trend in the order of the runs, over all materials', () => {
    let run = 0
    const rows = glucose.map((row) => {
      if (row.laboratory !== 'L03') return row
      run += 1
      return { ...row, order: run, text: (Number(row.text) + 3 * ((run - 1) % 3)).toFixed(2) }
    })
    expect(material(rows, 'A').noticed).toEqual([
      expect.objectContaining({
        laboratory: 'L03',
        kind: 'trend',
        probability: expect.any(Number) as number,
      }),
    ])
  })
})
