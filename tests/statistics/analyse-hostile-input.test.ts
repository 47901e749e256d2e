import { describe, expect, it } from 'vitest'
import { trendPValue } from '@/lib/statistics/noticed'
import { averageRange } from '@/lib/statistics/equality'
import { analyseRows, rowsOf, type TestRow } from './analyse-rows'

/** Deterministic results of `count` rows, two a laboratory, that differ in the last digit. */
function pairs(count: number, more: Partial<TestRow> = {}): TestRow[] {
  return Array.from({ length: count }, (_, index) => ({
    laboratory: `L${index >> 1}`,
    text: `1.${(index * 7) % 10}`,
    ...more,
  }))
}

describe('names that every object has already', () => {
  it.each(['constructor', 'toString', '__proto__'])(
    'are names of materials like any other: %s',
    (material) => {
      const settings = { references: {}, sigmas: {}, decimals: {} }
      const [named] = analyseRows(pairs(8, { material }), { settings }).materials
      const [plain] = analyseRows(pairs(8), { settings }).materials
      expect({ ...named, material: 'M' }).toEqual(plain)
    },
  )

  it.each(['constructor', '__proto__'])('are names of inner levels like any other: %s', (level) => {
    const rows = Array.from({ length: 24 }, (_, index) => ({
      laboratory: `L${Math.floor(index / 8)}`,
      groups: [String(Math.floor(index / 4) % 2), String(Math.floor(index / 2) % 2)],
      text: `1.${(index * index * 7) % 10}`,
    }))
    const [named] = analyseRows(rows, { nesting: [level, 'day'] }).materials
    const [plain] = analyseRows(rows, { nesting: ['operator', 'day'] }).materials
    expect(JSON.stringify(named).replaceAll(level, 'operator')).toBe(JSON.stringify(plain))
  })
})

describe('results below every double', () => {
  it('are given up as too small, and not called equal', () => {
    const one = analyseRows(rowsOf({ A: '1e-400 2e-400', B: '3e-400 5e-400', C: '2e-400 7e-400' }))
      .materials[0]!
    expect(one.repeatability.reasons!['sd']).toContain('too large or too small')
    expect(one.robust.qHampel.reasons!['sd']).toContain('too large or too small')
  })

  it('do not hinder the others when one of them stands among ordinary ones', () => {
    const rows = rowsOf({ A: '1.1 1.4', B: '1e-2000 1.2', C: '1.8 1.3', D: '1.0 1.9' })
    const zero = rowsOf({ A: '1.1 1.4', B: '0 1.2', C: '1.8 1.3', D: '1.0 1.9' })
    const [one, other] = [rows, zero].map((given) => analyseRows(given).materials[0]!)
    expect(one!.reproducibility.sd).toBe(other!.reproducibility.sd)
    expect(one!.robust.qHampel.sd).toBeNull()
    expect(one!.robust.qHampel.reasons!['sd']).toContain('too many places')
    expect(one!.robust.qMethod.reproducibility.reasons!['sd']).toContain('too many places')
  })
})

describe('results above every double', () => {
  it('have no place in a two-sample plot, which says so', () => {
    const rows = [
      ...rowsOf({ A: '1e400 1e400', B: '1e400 1e400' }, 'M'),
      ...rowsOf({ A: '1.1 1.4', B: '1.2 1.3' }, 'N'),
    ]
    const [plot] = analyseRows(rows).youden!
    expect(plot!.median).toEqual([null, 1.25])
    expect(plot!.reasons!['median']).toContain('too large')
    expect(plot!.points[0]!.x).toBeNull()
  })
})

describe('a two-sample plot of too few laboratories', () => {
  it('gives a reason for every pair of figures it does not have', () => {
    const rows = [...rowsOf({ A: '1 2' }, 'M'), ...rowsOf({ A: '3 4' }, 'N')]
    const [plot] = analyseRows(rows).youden!
    expect(plot!.mean).toEqual([null, null])
    for (const key of ['mean', 'sd', 'semiAxes']) expect(Object.keys(plot!.reasons!)).toContain(key)
    expect(plot!.reasons).not.toHaveProperty('median')
  })
})

describe('scores', () => {
  it('lose no digit when all results have a million million in common', () => {
    const rows = rowsOf({ A: '0.11 0.14', B: '0.12 0.17', C: '0.18 0.13', D: '0.10 0.19', E: '0.31 0.27' })
    const moved = rows.map((row) => ({ ...row, text: `1000000000000${row.text.slice(1)}` }))
    for (const reference of [undefined, '.15']) {
      const [before, after] = ['0', '1000000000000'].map((whole, index) =>
        analyseRows(index === 0 ? rows : moved, {
          settings:
            reference === undefined
              ? {}
              : { references: { M: { value: `${whole}${reference}`, uncertainty: 0.01 } } },
        }),
      )
      before!.materials[0]!.cells.forEach(({ scores }, index) => {
        const other = after!.materials[0]!.cells[index]!.scores
        expect(Math.abs(other.z! - scores.z!)).toBeLessThan(1e-12)
        expect(Math.abs(other.zPrime! - scores.zPrime!)).toBeLessThan(1e-12)
      })
    }
  })
})

describe('hundreds of thousands of results', () => {
  const many = 200_000

  it('may stand in one cell, each with its own uncertainty', () => {
    const rows = pairs(many, { uncertainty: 0.1 }).map((row, index) => ({
      ...row,
      laboratory: `L${Math.floor(index / (many - 4))}`,
    }))
    const [one] = analyseRows(rows, {
      settings: { references: { M: { value: '1', uncertainty: 0.1 } } },
    }).materials
    expect(one!.results).toBe(many)
    // Equal standard uncertainties are joined to themselves: ζ = z σ/√(0.1² + 0.1²).
    expect(one!.cells[0]!.scores.zeta).toBeCloseTo(one!.cells[0]!.bias! / Math.hypot(0.1, 0.1), 12)
  })

  it('may stand in one group of an inner level', () => {
    const rows = pairs(many).map((row, index) => ({
      ...row,
      laboratory: `L${Math.floor(index / (many - 4))}`,
      groups: [index % 50_000 === 0 ? '2' : '1'],
    }))
    expect(analyseRows(rows, { nesting: ['day'] }).materials[0]!.results).toBe(many)
  })

  it('may be the averages of as many laboratories', () => {
    const averages = Array.from({ length: many }, (_, index) => index % 7)
    expect(averageRange(averages, { df: many, scale: 2, n: 2 }).range).toBe(3)
  })
})

describe('a denominator of hardly any degrees of freedom', () => {
  it('leaves the half-width of the reference curve without a figure, and the rest as it is', () => {
    // The mean squares of day and residual nearly cancel in the denominator for the laboratories.
    const rows = ['A 1 5 4 1', 'A 2 2 7', 'A 3 6', 'B 1 5', 'B 2 5', 'C 1 0 3 6'].flatMap((line) => {
      const [laboratory, day, ...texts] = line.split(' ')
      return texts.map((text) => ({ laboratory: laboratory!, groups: [day!], text }))
    })
    const [one] = analyseRows(rows, { nesting: ['day'] }).materials
    expect(one!.equality.reference.halfWidth95).toBeNull()
    expect(one!.equality.reference.reasons!['halfWidth95']).toContain('degrees of freedom')
    expect(one!.equality.reference.df).toBeLessThan(0.01)
    expect(one!.reproducibility.sd).toBeGreaterThan(0)
  })
})

describe('results that are equal, many times over', () => {
  it.each(['10.123', '0.1', '9.937'])('show no scatter at any inner level: %s', (first) => {
    // Unequal numbers of days and results, so that every mean is a sum of its own length.
    const rows = ['3.7', first, '8.219', '11.003'].flatMap((text, laboratory) =>
      Array.from({ length: 60 + 37 * laboratory }, (_, index) => ({
        laboratory: `L${laboratory}`,
        groups: [String(index % (2 + laboratory)), String(index % 7)],
        text,
      })),
    )
    const [one] = analyseRows(rows, { nesting: ['operator', 'day'] }).materials
    expect(one!.anova.rows.slice(1).map(({ ss }) => ss)).toEqual([0, 0, 0])
    expect(one!.anova.rows[0]!.f).toBeNull()
    for (const { cells } of one!.levels) expect(cells.every(({ ms, k }) => ms === 0 && k === null)).toBe(true)
  })

  it('in their means have no correlation with another material', () => {
    const equal = rowsOf({ A: '9.9 10.1 10.0', B: '10 10', C: '9.7 10.2 10.1', D: '9.8 10.1 10.1' }, 'M')
    const other = rowsOf({ A: '1.1', B: '1.4', C: '1.2', D: '1.9' }, 'N')
    const [plot] = analyseRows([...equal, ...other]).youden!
    expect(plot!.sd[0]).toBe(0)
    expect(plot!.correlation).toBeNull()
    expect(plot!.reasons!['correlation']).toContain('all equal')
  })
})

describe('a mean above every double', () => {
  it('is no figure of its own, and neither is anything that is told in parts of it', () => {
    const far = `7${'0'.repeat(400)}`
    const rows = rowsOf({ A: `${far}1 ${far}4`, B: `${far}2 ${far}7`, C: `${far}8 ${far}3` })
    const [one] = analyseRows(rows).materials
    expect(one!.mean).toBeNull()
    expect(one!.repeatability.relative).toBeNull()
    expect(one!.rounded.mean).toBeNull()
    // Deviations -1.5 and 1.5, -2.5 and 2.5, 2.5 and -2.5: squares 4.5 + 12.5 + 12.5 over 3.
    expect(one!.repeatability.variance).toBeCloseTo(29.5 / 3, 12)
  })
})

describe('a trend in the order of the runs', () => {
  const cell = (orders: readonly number[], values: readonly number[]) => [
    orders.map((order, index) => ({ order, value: values[index]! })),
  ]
  const values = [0.1, 0.4, 0.3, 0.9, 0.8]

  it('is the same in orders and values of any size', () => {
    const plain = trendPValue(cell([1, 2, 3, 4, 5], values))!
    expect(plain).toBeGreaterThan(0)
    for (const unit of [1e300, 1e-300]) {
      const far = cell(
        [1, 2, 3, 4, 5].map((order) => order * unit),
        values.map((value) => value / unit),
      )
      expect(Math.abs(trendPValue(far)! / plain - 1)).toBeLessThan(1e-12)
    }
  })

  it('is none where all runs have one place, however late', () => {
    expect(trendPValue(cell([1e308, 1e308, 1e308, 1e308, 1e308], values))).toBeNull()
  })
})

describe('REML', () => {
  it('finds the same maximum in any unit', () => {
    const rows = ['5 5 6 5', '5 5', '5 7 4', '9 8'].flatMap((texts, laboratory) =>
      texts.split(' ').map((text) => ({ laboratory: `L${laboratory}`, text })),
    )
    const plain = analyseRows(rows).materials[0]!.reml
    expect(plain.converged).toBe(true)
    for (const power of [-120, -70, -31, 31, 70, 120]) {
      const far = analyseRows(rows.map((row) => ({ ...row, text: `${row.text}e${power}` }))).materials[0]!
        .reml
      expect(far.converged).toBe(true)
      far.components.forEach(({ variance }, index) =>
        expect(variance! / 10 ** (2 * power) / plain.components[index]!.variance!).toBeCloseTo(1, 8),
      )
      // Ten contrasts among eleven results.
      expect(far.deviance! - 20 * power * Math.LN10).toBeCloseTo(plain.deviance!, 8)
    }
  })
})
