import { describe, expect, it } from 'vitest'
import { cellTable, summariseCells, type CellSummary } from '@/lib/statistics/cells'
import { cochran, cochranCritical, generalisedCochran } from '@/lib/statistics/cochran'
import { grubbsPair, grubbsPairCritical } from '@/lib/statistics/grubbs-pair'
import { grubbsSingle, grubbsSingleCritical } from '@/lib/statistics/grubbs-single'
import {
  mandelH,
  mandelHCritical,
  mandelHPValue,
  mandelK,
  mandelKCritical,
  mandelKPValue,
} from '@/lib/statistics/mandel'
import { NotComputable } from '@/lib/statistics/not-computable'
import {
  betweenLaboratories,
  generalMeans,
  laboratoryFTest,
  oneWayPrecision,
  relativeSdPercent,
  repeatability,
  reproducibility,
} from '@/lib/statistics/one-way-precision'
import { cellsOf } from './reference/read-reference'

function material(...cells: string[][]): { cells: CellSummary[]; restore: (deviation: number) => number } {
  const rows = cells.flatMap((results, index) => results.map((value) => ({ lab: `L${index + 1}`, value })))
  const { centred, cells: made } = cellsOf(rows)
  return { cells: summariseCells(cellTable(made)), restore: centred.restore }
}

function reason(get: () => unknown): string {
  try {
    get()
  } catch (error) {
    if (error instanceof NotComputable) return error.reason
    throw error
  }
  return 'computed'
}

describe('no results at all', () => {
  it('has nothing, each time with a reason', () => {
    expect(reason(() => generalMeans([]))).toBe('no-results')
    expect(reason(() => repeatability([]))).toBe('no-replicates')
    expect(reason(() => mandelH([]))).toBe('too-few-laboratories')
    expect(reason(() => cochran([]))).toBe('too-few-replicated-cells')
    expect(summariseCells(cellTable([{ laboratory: 'L1', deviations: [] }]))).toEqual([])
  })
})

describe('one laboratory', () => {
  const { cells, restore } = material(['5.1', '5.3'])

  it('has a mean and a repeatability and nothing that compares laboratories', () => {
    expect(restore(generalMeans(cells).weighted)).toBe(5.2)
    // Two results 0.2 apart: s = 0.2/√2.
    expect(repeatability(cells).sd).toBeCloseTo(0.2 / Math.SQRT2, 15)
    expect(reason(() => mandelH(cells))).toBe('too-few-laboratories')
    for (const get of [betweenLaboratories, reproducibility, laboratoryFTest, oneWayPrecision]) {
      expect(reason(() => get(cells))).toBe('too-few-laboratories')
    }
    expect(reason(() => cochran(cells))).toBe('too-few-replicated-cells')
    expect(reason(() => grubbsSingle(cells, 'high'))).toBe('too-few-laboratories')
  })

  it('has k = 1 by definition, which cannot be judged', () => {
    const { k, pooledDf } = mandelK(cells)
    expect([...k]).toEqual([1])
    expect(reason(() => mandelKCritical({ df: 1, pooledDf, alpha: 0.01 }))).toBe('too-few-replicated-cells')
    expect(reason(() => mandelKPValue({ k: 1, df: 1, pooledDf }))).toBe('too-few-replicated-cells')
  })
})

describe('two laboratories', () => {
  const { cells } = material(['1', '2'], ['3', '5'])

  it('have an h of ±1/√2 that cannot be judged, and no Grubbs test', () => {
    expect([...mandelH(cells)]).toEqual([-Math.SQRT1_2, Math.SQRT1_2].map((h) => expect.closeTo(h, 15)))
    expect(reason(() => mandelHCritical(2, 0.01))).toBe('too-few-laboratories')
    expect(reason(() => mandelHPValue(0.7, 2))).toBe('too-few-laboratories')
    expect(reason(() => grubbsSingle(cells, 'low'))).toBe('too-few-laboratories')
    expect(reason(() => grubbsSingleCritical(2, 0.01))).toBe('too-few-laboratories')
  })

  it('have both of Cochran’s statistics', () => {
    // Variances 0.5 and 2: C = 0.8.
    expect(cochran(cells).statistic).toBeCloseTo(0.8, 14)
    expect(generalisedCochran(cells).statistic).toBeCloseTo(0.8, 14)
  })
})

describe('three laboratories', () => {
  const { cells } = material(['1'], ['2'], ['4'])

  it('have a single Grubbs test and none for pairs', () => {
    expect(grubbsSingle(cells, 'high').laboratory).toBe('L3')
    expect(reason(() => grubbsPair(cells, 'high'))).toBe('too-few-laboratories')
    expect(reason(() => grubbsPairCritical(3, 0.01))).toBe('too-few-laboratories')
  })
})

describe('one result a laboratory', () => {
  const { cells } = material(['1'], ['2'], ['4'], ['5'])

  it('has a reproducibility that says it rests on single results', () => {
    // Variance of 1, 2, 4, 5 is 10/3.
    const { basis, variance, sd } = reproducibility(cells)
    expect(basis).toBe('single results')
    expect(variance).toBeCloseTo(10 / 3, 14)
    expect(sd).toBeCloseTo(Math.sqrt(10 / 3), 14)
    expect(reason(() => repeatability(cells))).toBe('no-replicates')
    expect(reason(() => betweenLaboratories(cells))).toBe('no-replicates')
    expect(reason(() => mandelK(cells))).toBe('no-replicates')
  })

  it('is taken with replicated cells for the means and gives no k of its own', () => {
    const { cells: mixed } = material(['1'], ['2', '3'], ['4', '8'])
    expect(mandelH(mixed)).toHaveLength(3)
    expect(mandelK(mixed).cells.map(({ laboratory }) => laboratory)).toEqual(['L2', 'L3'])
    expect(reproducibility(mixed).basis).toBe('components')
    expect(cochran(mixed).cells).toBe(2)
  })
})

describe('results all equal', () => {
  const { cells, restore } = material(['0.3', '0.3'], ['0.3', '0.3', '0.30'], ['0.3', '0.3'], ['0.3', '0.3'])

  it('have precision figures of exactly 0, and nothing to compare with', () => {
    expect(restore(generalMeans(cells).weighted)).toBe(0.3)
    expect(repeatability(cells).sd).toBe(0)
    expect(betweenLaboratories(cells).rawVariance).toBe(0)
    expect(reproducibility(cells).sd).toBe(0)
    expect(reason(() => mandelH(cells))).toBe('equal-means')
    expect(reason(() => mandelK(cells))).toBe('no-scatter')
    expect(reason(() => cochran(cells))).toBe('no-scatter')
    expect(reason(() => generalisedCochran(cells))).toBe('no-scatter')
    expect(reason(() => laboratoryFTest(cells))).toBe('no-scatter')
    expect(reason(() => grubbsSingle(cells, 'high'))).toBe('equal-means')
    expect(reason(() => grubbsPair(cells, 'low'))).toBe('equal-means')
  })
})

describe('means that are equal though their results are not', () => {
  it('are found equal despite the rounding of their computation', () => {
    const { cells } = material(
      ['0.1', '0.2', '0.6'],
      ['0.2', '0.3', '0.4'],
      ['0.3', '0.3', '0.3', '0.3'],
      ['0.7', '-0.1'],
    )
    expect(reason(() => mandelH(cells))).toBe('equal-means')
    expect(betweenLaboratories(cells).sd).toBe(0)
    expect(betweenLaboratories(cells).rawVariance).toBeLessThan(0)
  })
})

describe('one laboratory apart from others that agree exactly', () => {
  const { cells } = material(['2', '2'], ['2', '2'], ['2', '2'], ['3', '3.2'])

  it('has its statistics at their bounds and p-values of 0, not of nothing', () => {
    const h = mandelH(cells).at(-1)!
    expect(h).toBeCloseTo(3 / 2, 14) // (p - 1)/√p at p = 4
    expect(mandelHPValue(h, 4)).toBe(0)
    const { k: all, pooledDf } = mandelK(cells)
    const k = all.at(-1)!
    expect(k).toBeCloseTo(2, 14) // √(ν/ν_i) = √(4/1)
    expect(mandelKPValue({ k, df: 1, pooledDf })).toBe(0)
    expect([cochran(cells).statistic, cochran(cells).pValue]).toEqual([1, 0])
    expect([generalisedCochran(cells).statistic, generalisedCochran(cells).pValue]).toEqual([1, 0])
    expect(grubbsSingle(cells, 'high').pValue).toBe(0)
    expect([grubbsPair(cells, 'high').statistic, grubbsPair(cells, 'high').pValue]).toEqual([0, 0])
  })
})

describe('ties', () => {
  it('name the first laboratory of several, whatever rounding does at their levels', () => {
    const { cells } = material(['0.1', '0.2'], ['1000.1', '1000.2'], ['7.3', '7.4'], ['1000.15', '1000.15'])
    expect(cochran(cells).laboratory).toBe('L1')
    expect(generalisedCochran(cells).laboratory).toBe('L1')
    expect(grubbsSingle(cells, 'high').laboratory).toBe('L2')
    expect(grubbsPair(cells, 'high').laboratories).toEqual(['L4', 'L2'])
  })

  it('among cell sizes take the smallest for Cochran', () => {
    const { cells } = material(['1', '2'], ['1', '3'], ['1', '2', '3'], ['1', '2', '4'])
    expect(cochran(cells)).toMatchObject({ df: 1, isBalanced: false })
  })
})

describe.each([
  ['1e-300', 1e-300],
  ['1e300', 1e300],
])('results of the size of %s', (unit, size) => {
  const times = (factor: number) => `${factor}${unit.slice(1)}`
  const { cells, restore } = material(
    [times(1), times(2)],
    [times(2), times(4)],
    [times(3), times(3)],
    [times(7), times(8)],
  )
  const plain = material(['1', '2'], ['2', '4'], ['3', '3'], ['7', '8']).cells

  it('have means and pure numbers like any others', () => {
    expect(restore(generalMeans(cells).weighted) / size).toBeCloseTo(3.75, 14)
    const pure = (of: CellSummary[]) => [
      ...mandelH(of),
      ...mandelK(of).k,
      cochran(of).statistic,
      generalisedCochran(of).pValue,
      grubbsSingle(of, 'high').pValue,
      grubbsPair(of, 'low').statistic,
    ]
    pure(plain).forEach((figure, index) => expect(pure(cells)[index]).toBeCloseTo(figure, 13))
  })

  it('are refused where a variance is asked that no double holds', () => {
    expect(reason(() => repeatability(cells))).toBe('out-of-range')
    expect(reason(() => betweenLaboratories(cells))).toBe('out-of-range')
    expect(reason(() => reproducibility(cells))).toBe('out-of-range')
  })
})

describe('very large and very small results together', () => {
  it('give finite figures', () => {
    const { cells } = material(['1e140', '2e140'], ['1e-300', '0'], ['-1e140', '3'])
    expect(Number.isFinite(repeatability(cells).variance)).toBe(true)
    expect(Number.isFinite(reproducibility(cells).sd)).toBe(true)
    for (const h of mandelH(cells)) expect(Number.isFinite(h)).toBe(true)
  })
})

describe('a relative standard deviation', () => {
  it('needs a mean above 0', () => {
    expect(relativeSdPercent(0.5, 20)).toBe(2.5)
    expect(reason(() => relativeSdPercent(0.5, 0))).toBe('no-positive-mean')
    expect(reason(() => relativeSdPercent(0.5, -3))).toBe('no-positive-mean')
    expect(reason(() => relativeSdPercent(1e300, 1e-300))).toBe('out-of-range')
  })
})

describe('a caller’s mistake', () => {
  it('is a RangeError and no statement about the data', () => {
    expect(() => summariseCells(cellTable([{ laboratory: 'L1', deviations: [1, NaN] }]))).toThrow(RangeError)
    expect(() => mandelHCritical(8, 0)).toThrow(RangeError)
    expect(() => cochranCritical({ cells: 8, df: 2, alpha: 9 })).toThrow(RangeError)
  })
})

describe('many laboratories', () => {
  it('are refused a pair test beyond 1000, and get one in time below', () => {
    const many = (count: number) => Array.from({ length: count }, (_, index) => [String(index * index), '0'])
    expect(grubbsPair(material(...many(300)).cells, 'high').pValue).toBeGreaterThan(0)
    expect(reason(() => grubbsPair(material(...many(1001)).cells, 'high'))).toBe('too-many-laboratories')
    expect(reason(() => grubbsPairCritical(1001, 0.01))).toBe('too-many-laboratories')
  })
})
