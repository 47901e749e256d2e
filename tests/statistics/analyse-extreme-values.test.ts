import { describe, expect, it } from 'vitest'
import { satterthwaiteInterval } from '@/lib/statistics/combination-interval'
import { analyseRows, rowsOf, type TestRow } from './analyse-rows'

const CELLS = { A: '1.0 1.2', B: '2.0 2.4', C: '1.5 1.6', D: '1.7 2.0', E: '1.3 1.1' }

describe('a reference value whose uncertainty dwarfs the scatter', () => {
  it('has the interval of the normal distribution', () => {
    const { trueness } = analyseRows(rowsOf(CELLS), {
      settings: { references: { M: { value: '1', uncertainty: 1e6 } } },
    }).materials[0]!
    // Φ⁻¹(0.975) from memory: 1.959963984540054.
    expect(trueness!.df).toBe(1e9)
    expect(trueness!.ci95.upper! - trueness!.bias!).toBeCloseTo(1.959963984540054e6, -1)
    expect((trueness!.ci95.upper! - trueness!.bias!) / 1.959963984540054e6).toBeCloseTo(1, 8)
  })

  it('is refused in words where its square is no number', () => {
    const { trueness } = analyseRows(rowsOf(CELLS), {
      settings: { references: { M: { value: '1', uncertainty: 1e300 } } },
    }).materials[0]!
    expect(trueness!.ci95.lower).toBeNull()
    expect(trueness!.ci95.reasons?.['lower']).toContain('too large')
  })
})

describe('results written with the minus sign U+2212', () => {
  const rows = (minus: string): TestRow[] =>
    rowsOf({
      A: '12.1 12.3 12.0',
      B: '12.2 12.4 12.5',
      C: '11.9 12.0 12.2',
      D: '12.3 12.2 12.1',
      E: '12.0 12.4 12.1',
      F: '21.2 12.2 12.3',
    }).map((row) => ({ ...row, text: `${minus}${row.text}` }))

  it('are analysed, explained and compared with a reference like those with a hyphen', () => {
    const settings = (minus: string) => ({ references: { M: { value: `${minus}12.2`, uncertainty: 0.01 } } })
    const ascii = analyseRows(rows('-'), { settings: settings('-') }).materials[0]!
    const typeset = analyseRows(rows('\u2212'), { settings: settings('\u2212') }).materials[0]!
    expect(ascii.proposals!.map(({ kind }) => kind)).toContain('digits')
    const figures = ({ kind, score, after }: NonNullable<typeof ascii.proposals>[number]) => ({
      kind,
      score,
      after,
    })
    expect(typeset.proposals!.map(figures)).toEqual(ascii.proposals!.map(figures))
    expect(typeset.trueness).toEqual(ascii.trueness)
    expect(typeset.repeatability).toEqual(ascii.repeatability)
  })
})

describe('laboratories that lie further apart, in their own scatter, than a double has digits', () => {
  it.each(['', 'e40', 'e120'])('are unlike beyond doubt, with figures of %s units', (exponent) => {
    const { equality } = analyseRows(
      rowsOf({
        A: `1${exponent} 1.00000000000000000001${exponent}`,
        B: '2 2.00000000000000000003',
        C: '3 3.00000000000000000002',
      }),
    ).materials[0]!
    expect(equality.rangePValue).toBeLessThan(1e-30)
    expect(equality.pValue).toBeLessThan(1e-30)
  })
})

describe('results about 1e-100', () => {
  const tiny = (rows: TestRow[]): TestRow[] => rows.map((row) => ({ ...row, text: `${row.text}e-100` }))

  it('have the figures of the same results about 1, a hundred powers of ten smaller', () => {
    const settings = { references: { M: { value: '1.5', uncertainty: 0.1 } } }
    const one = analyseRows(rowsOf(CELLS), { settings }).materials[0]!
    const other = analyseRows(tiny(rowsOf(CELLS)), {
      settings: { references: { M: { value: '1.5e-100', uncertainty: 1e-101 } } },
    }).materials[0]!
    for (const key of ['repeatability', 'betweenLaboratory', 'reproducibility'] as const) {
      expect(other[key].sd! * 1e100).toBeCloseTo(one[key].sd!, 12)
      expect(other[key].ci95.lower! * 1e100).toBeCloseTo(one[key].ci95.lower!, 12)
      expect(other[key].ci95.upper! * 1e100).toBeCloseTo(one[key].ci95.upper!, 12)
    }
    expect(other.reproducibility.satterthwaite95.df).toBeCloseTo(one.reproducibility.satterthwaite95.df!, 9)
    expect(other.reproducibility.satterthwaite95.upper! * 1e100).toBeCloseTo(
      one.reproducibility.satterthwaite95.upper!,
      12,
    )
    expect(other.trueness!.df).toBeCloseTo(one.trueness!.df!, 9)
    expect(other.trueness!.ci95.upper! * 1e100).toBeCloseTo(one.trueness!.ci95.upper!, 12)
  })

  it('have the same approximate F test in an uneven nested layout', () => {
    const days = ['1', '1', '2', '1', '2', '2', '1', '1', '1', '2', '1', '2']
    const values = ['1.0', '1.2', '1.9', '2.0', '2.4', '2.7', '1.5', '1.6', '1.1', '1.7', '2.0', '2.9']
    const labs = ['A', 'A', 'A', 'B', 'B', 'B', 'C', 'C', 'C', 'C', 'D', 'D']
    const rows = values.map((text, index): TestRow => ({
      laboratory: labs[index]!,
      text,
      groups: [days[index]!],
    }))
    const one = analyseRows(rows, { nesting: ['day'] }).materials[0]!
    const other = analyseRows(tiny(rows), { nesting: ['day'] }).materials[0]!
    expect(one.anova.rows[0]!.denominator!.kind).toBe('Satterthwaite')
    expect(other.anova.rows[0]!.denominator!.df).toBeCloseTo(one.anova.rows[0]!.denominator!.df!, 9)
    expect(other.anova.rows[0]!.pValue).toBeCloseTo(one.anova.rows[0]!.pValue!, 12)
    expect(other.intermediate[0]!.ci95.upper! * 1e100).toBeCloseTo(one.intermediate[0]!.ci95.upper!, 12)
  })
})

describe('several materials about 1e-120 or 1e120', () => {
  const levels = ['', '1', '2', '3']
  const at = (unit: string): TestRow[] =>
    levels.flatMap((level, place) =>
      Object.entries({ ...CELLS, C: ['1.5 1.6', '1.9 1.4', '2.9 2.4', '1.2 1.6'][place]! }).flatMap(
        ([laboratory, texts]) =>
          texts
            .split(' ')
            .map((text): TestRow => ({ laboratory, material: `M${place}`, text: `${level}${text}${unit}` })),
      ),
    )

  it.each(['e-120', 'e120'])(
    'have the two-sample plots and the level relation of those about 1: %s',
    (unit) => {
      const one = analyseRows(at(''))
      const other = analyseRows(at(unit))
      one.youden!.forEach((plot, index) => {
        const same = other.youden![index]!
        plot.points.forEach(({ distance2, pValue }, point) => {
          expect(distance2).toBeGreaterThan(0)
          expect(same.points[point]!.distance2).toBeCloseTo(distance2!, 9)
          expect(same.points[point]!.pValue).toBeCloseTo(pValue!, 9)
        })
        const size = Number(`1${unit}`)
        expect(same.semiAxes.map((axis) => axis! / size)).toEqual(
          plot.semiAxes.map((axis) => expect.closeTo(axis!, 9) as number),
        )
      })
      for (const key of ['repeatability', 'reproducibility'] as const) {
        for (const form of ['proportional', 'linear', 'power'] as const) {
          expect(other.levelRelation![key][form].q).toBeCloseTo(one.levelRelation![key][form].q!, 6)
        }
        expect(other.levelRelation![key].proposed).toBe(one.levelRelation![key].proposed)
      }
    },
  )
})

describe('a Satterthwaite interval on next to no degrees of freedom', () => {
  it('has neither limit, and says so', () => {
    // 1.001 − 1 on one degree of freedom each: df = 0.001²/(1.001² + 1²) = 5e-7.
    const terms = [
      { weight: 1, ms: 1.001, df: 1 },
      { weight: -1, ms: 1, df: 1 },
    ]
    const { df, lower, upper } = satterthwaiteInterval(terms)
    expect(df).toBeCloseTo(4.995e-7, 9)
    expect([lower, upper]).toEqual([null, null])
  })

  it('leaves both null with the reason in the document', () => {
    // Two laboratories of two: MS between 0.2704 against a residual of 0.25.
    const { betweenLaboratory } = analyseRows(rowsOf({ A: '1.0 1.7071', B: '1.52 2.2271' })).materials[0]!
    const { lower, upper, df, reasons } = betweenLaboratory.satterthwaite95
    expect(df).toBeLessThan(0.05)
    expect([lower, upper]).toEqual([null, null])
    expect(reasons).toEqual({
      lower: 'Too few degrees of freedom for limits.',
      upper: 'Too few degrees of freedom for limits.',
    })
  })
})
