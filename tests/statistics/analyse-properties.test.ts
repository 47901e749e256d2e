import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { AnalysisDocument, MaterialAnalysis } from '@/lib/statistics'
import { analyseRows, rowsOf, type TestRow } from './analyse-rows'
import { readRows } from './reference/read-reference'

const seed = 20261202

function setRows(set: string, nesting: readonly string[] = []): TestRow[] {
  return readRows(set).map((row) => ({
    laboratory: row.lab,
    material: row.material,
    groups: nesting.map((level) => row[level]!),
    text: row.value,
  }))
}

/** Every number of a document with its path, and every `null`. */
function leaves(value: unknown, path = ''): [string, unknown][] {
  if (value === null || typeof value !== 'object') return [[path, value]]
  return Object.entries(value).flatMap(([key, inner]) => leaves(inner, `${path}/${key}`))
}

function nullsWithoutReason(value: unknown, path = ''): string[] {
  if (value === null || typeof value !== 'object') return []
  const reasons = (value as { reasons?: Record<string, string> }).reasons ?? {}
  return Object.entries(value).flatMap(([key, inner]) =>
    inner === null && !Array.isArray(value) && !(key in reasons)
      ? [`${path}/${key}`]
      : nullsWithoutReason(inner, `${path}/${key}`),
  )
}

function expectNear(got: number | null, wanted: number | null, relative = 1e-9): void {
  expect(got).not.toBeNull()
  expect(Math.abs(got! - wanted!)).toBeLessThanOrEqual(relative * Math.abs(wanted!) + 1e-13)
}

const nested = { nesting: ['day'] }

describe('analyse', () => {
  it('gives the same bytes for the same input', () => {
    const rows = setRows('syn_nested3', ['day'])
    expect(JSON.stringify(analyseRows(rows, nested))).toBe(JSON.stringify(analyseRows([...rows], nested)))
  })

  it('keeps laboratories and materials in the order of the input', () => {
    const document = analyseRows([
      { laboratory: 'Z', material: 'second', text: '1' },
      { laboratory: 'A', material: 'first', text: '2' },
      { laboratory: 'A', material: 'second', text: '3' },
      { laboratory: 'Z', material: 'second', text: '4' },
    ])
    expect(document.materials.map(({ material }) => material)).toEqual(['second', 'first'])
    expect(document.materials[0]!.cells.map(({ laboratory }) => laboratory)).toEqual(['Z', 'A'])
  })

  it('is unmoved by the order of results inside laboratories and of the laboratories', () => {
    const rows = setRows('syn_nested3', ['day']).filter(({ material }) => material === 'A')
    const [one] = analyseRows(rows, nested).materials as [MaterialAnalysis]
    const [other] = analyseRows([...rows].reverse(), nested).materials as [MaterialAnalysis]
    expectNear(other.reproducibility.sd, one.reproducibility.sd, 1e-12)
    expectNear(other.reml.deviance, one.reml.deviance, 1e-12)
    expectNear(other.robust.qHampel.sd, one.robust.qHampel.sd, 1e-12)
    expectNear(other.intermediate[0]!.ci95.upper, one.intermediate[0]!.ci95.upper, 1e-10)
  })

  it('moves only the means when a common amount of a million million is added', () => {
    const rows = setRows('syn_nested3', ['day'])
    const shifted = rows.map((row) => ({ ...row, text: shift(row.text) }))
    const before = analyseRows(rows, nested).materials
    const after = analyseRows(shifted, nested).materials
    before.forEach((one, index) => {
      const other = after[index]!
      expectNear(other.repeatability.sd, one.repeatability.sd, 1e-12)
      expectNear(other.reproducibility.ci95.upper, one.reproducibility.ci95.upper, 1e-10)
      expectNear(other.robust.algorithmA.sd, one.robust.algorithmA.sd, 1e-10)
      expectNear(other.robust.qMethod.reproducibility.sd, one.robust.qMethod.reproducibility.sd, 1e-12)
      expectNear(other.reml.components[0]!.variance, one.reml.components[0]!.variance, 1e-6)
      expectNear(other.mean! - 1e12, one.mean, 1e-4)
    })
  })

  it('refuses levels and labels that do not fit together', () => {
    const row = { laboratory: 'A', text: '1', groups: ['1'] }
    expect(() => analyseRows([row], { nesting: ['residual'] })).toThrow(RangeError)
    expect(() => analyseRows([{ ...row, groups: ['1', '1'] }], { nesting: ['day', 'day'] })).toThrow(
      RangeError,
    )
    expect(() => analyseRows([row], {})).toThrow('a result of A has 1 labels for 0 inner levels')
    expect(() => analyseRows([{ ...row, text: '1,5' }], nested)).toThrow(RangeError)
  })

  it('scales with the unit', () => {
    const rows = setRows('syn_nested3', ['day'])
    const scaled = rows.map((row) => ({ ...row, text: `${row.text}e3` }))
    const before = analyseRows(rows, nested).materials[0]!
    const after = analyseRows(scaled, nested).materials[0]!
    expectNear(after.mean, before.mean! * 1e3)
    expectNear(after.reproducibility.limit, before.reproducibility.limit! * 1e3)
    expectNear(after.anova.rows[0]!.f, before.anova.rows[0]!.f)
    expectNear(after.robust.qHampel.mean, before.robust.qHampel.mean! * 1e3)
    expectNear(after.cells[0]!.h, before.cells[0]!.h)
  })

  it('holds neither NaN nor an infinite number, and gives every null a reason, whatever the data', () => {
    const result = fc.record({
      laboratory: fc.constantFrom('A', 'B', 'C', 'D'),
      material: fc.constantFrom('M', 'N'),
      groups: fc.constantFrom(['1'], ['2']),
      text: fc.constantFrom('', '0', '1', '1.0', '1.1', '-3', '7e5', '1e-8', '0.3', '0.10'),
      censored: fc.constantFrom(null, null, null, null, null, '<' as const, '>' as const),
      excluded: fc.constantFrom(false, false, false, true),
    })
    fc.assert(
      fc.property(fc.array(result, { maxLength: 24 }), fc.boolean(), (rows, isNested) => {
        const labelled = rows.map((row) => ({ ...row, groups: isNested ? row.groups : [] }))
        const document = analyseRows(labelled, isNested ? nested : {})
        for (const [path, value] of leaves(document)) {
          if (typeof value === 'number' && !Number.isFinite(value)) throw new Error(`${path} is ${value}`)
        }
        expect(nullsWithoutReason(document).filter((path) => !path.endsWith('/confounded'))).toEqual([])
      }),
      { seed, numRuns: 300 },
    )
  })
})

describe('results at the ends of what a double holds', () => {
  it.each([
    ['too large', '1e160 2e160', '3e160 5e160'],
    ['further apart than a double', '1e308 -1e308', '1e308 5'],
    ['too small', '1e-200 2e-200', '3e-200 5e-200'],
  ])('are given up with one reason when they lie %s', (_, a, b) => {
    const one = analyseRows(rowsOf({ A: a, B: b })).materials[0]!
    expect(one.mean).toBeNull()
    expect(one.reproducibility.reasons!['sd']).toContain('too large or too small to be squared')
  })

  it('are analysed like any others when only their common part is large', () => {
    const one = analyseRows(
      rowsOf({ A: '1e30 1000000000000000000000000000001', B: '1000000000000000000000000000003 1e30' }),
    )
    // Deviations 0, 1 and 3, 0: within squares 0.5 + 4.5 over 2.
    expectNear(one.materials[0]!.repeatability.variance, 2.5, 1e-14)
  })
})

describe('REML beside the analysis of variance', () => {
  it.each([
    ['rail', []],
    ['pastes', ['batch']],
    ['syn_nested4', ['operator', 'day']],
  ] as const)('agrees with it on balanced %s, where no component is cut at 0', (set, nesting) => {
    for (const { anova, reml } of analyseRows(setRows(set, nesting), { nesting }).materials) {
      expect(anova.components.every(({ varianceRaw }) => varianceRaw! > 0)).toBe(true)
      anova.components.forEach(({ source, variance }, index) => {
        expect(reml.components[index]!.source).toBe(source)
        expectNear(reml.components[index]!.variance, variance, 1e-10)
      })
    }
  })

  it('finds a component of exactly 0 on the boundary and pools what remains', () => {
    const { reml, anova } = analyseRows(setRows('dyestuff2')).materials[0]!
    expect(anova.components[0]!.varianceRaw).toBeLessThan(0)
    expect(reml.boundary).toEqual(['laboratory'])
    // With the component at 0 the likelihood is that of one sample of 30.
    const values = setRows('dyestuff2').map(({ text }) => Number(text))
    const mean = values.reduce((sum, value) => sum + value, 0) / 30
    const variance = values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / 29
    expectNear(reml.components[1]!.variance, variance, 1e-12)
  })
})

describe('figures of one layout against another', () => {
  it('take the same table for one level as the one-way figures beside it', () => {
    for (const one of analyseRows(setRows('iso2_coal')).materials) {
      expectNear(one.anova.components[0]!.varianceRaw, one.betweenLaboratory.varianceRaw, 1e-11)
      expectNear(one.anova.components[1]!.variance, one.repeatability.variance, 1e-11)
    }
  })

  it('call two days without repetition what they are: an intermediate precision and no repeatability', () => {
    const rows = [1, 2, 3, 4].flatMap((laboratory) =>
      ['1', '2', '3'].map((day, index) => ({
        laboratory: `L${laboratory}`,
        groups: [day],
        text: String(10 + laboratory + index * laboratory * 0.1),
      })),
    )
    const one = analyseRows(rows, nested).materials[0]!
    expect(one.anova.confounded).toBe('day')
    expect(one.anova.rows.map(({ source }) => source)).toEqual(['laboratory', 'residual'])
    expect(one.repeatability.sd).toBeNull()
    expect(one.repeatability.reasons!['sd']).toContain('No day holds two results')
    const withoutDays = analyseRows(rows.map((row) => ({ ...row, groups: [] }))).materials[0]!
    expectNear(one.intermediate[0]!.sd, withoutDays.repeatability.sd, 1e-12)
    expectNear(one.reproducibility.sd, withoutDays.reproducibility.sd, 1e-12)
    expectNear(one.levels[0]!.cells[3]!.k, withoutDays.cells[3]!.k, 1e-12)
  })

  it('leave out the row of a level in which every laboratory has one group', () => {
    const rows = rowsOf({ A: '1.0 1.2', B: '2.0 2.1', C: '1.4 1.8' }).map((row) => ({
      ...row,
      groups: ['1'],
    }))
    const one = analyseRows(rows, nested).materials[0]!
    expect(one.anova.rows.map(({ source }) => source)).toEqual(['laboratory', 'residual'])
    expect(one.anova.confounded).toBeNull()
    expect(one.intermediate[0]!.variance).toBeNull()
    expect(one.intermediate[0]!.reasons!['variance']).toContain('day apart from the level around it')
  })

  it('recognise single results everywhere and give their spread as reproducibility alone', () => {
    const one = analyseRows(rowsOf({ A: '1', B: '2', C: '4', D: '5' })).materials[0]!
    expect(one.repeatability.sd).toBeNull()
    expect(one.betweenLaboratory.sd).toBeNull()
    expect(one.reproducibility.basis).toBe('single results')
    // Mean 3; squares 4 + 1 + 1 + 4 over 3.
    expectNear(one.reproducibility.variance, 10 / 3, 1e-14)
    expect(one.anova.confounded).toBe('laboratory')
  })
})

describe('censored, missing and excluded results', () => {
  const document = (cells: Record<string, string>): AnalysisDocument =>
    analyseRows(
      rowsOf(cells).map((row) =>
        /^[<>]/.test(row.text)
          ? { ...row, text: row.text.slice(1), censored: row.text[0] as '<' | '>' }
          : row.text === '-'
            ? { ...row, text: '' }
            : row,
      ),
    )
  const eleven = Object.fromEntries(
    Array.from({ length: 11 }, (_, index) => [`L${index}`, `${10 + index} ${11 + index}`]),
  )

  it('are counted, and put no number in the place of one that is not known', () => {
    const { input, materials } = document({ ...eleven, X: '<0.5 1.2', L1: '7 -' })
    expect(input).toMatchObject({ results: 21, besideCensored: 1, censored: 1, missing: 1 })
    const [one] = materials as [MaterialAnalysis]
    expect(one.laboratories).toBe(11)
    expect(one.cells.map(({ laboratory }) => laboratory)).not.toContain('X')
    expect(one.censored).toEqual({
      results: 1,
      cells: [{ laboratory: 'X', below: 1, above: 0, quantified: 1 }],
    })
  })

  it('take every figure of a material when more than a tenth of its cells is lost, but leave the median', () => {
    const [one] = document({
      A: '1 1.1',
      B: '2 2.1',
      C: '3 3.1',
      D: '4 4.1',
      E: '5 5.1',
      F: '<0.5 0.6',
      G: '0.8 0.9',
    }).materials as [MaterialAnalysis]
    expect(one.mean).toBeNull()
    expect(one.repeatability.sd).toBeNull()
    expect(one.reproducibility.reasons!['sd']).toContain('More than 10 % of the cells')
    // Cells rank F, G, A, B, C, D, E; the fourth is B.
    expectNear(one.median, 2.05, 1e-14)
  })

  it('give no median where it does not lie clear of a limit', () => {
    const [one] = document({ A: '1', B: '2', C: '<3' }).materials as [MaterialAnalysis]
    expect(one.median).toBeNull()
    expect(one.reasons!['median']).toContain('does not lie clear')
  })
})

/** Adds 10¹² to a positive decimal text without a float on the way. */
function shift(text: string): string {
  const [whole = '0', fraction] = text.split('.')
  const moved = BigInt(whole) + 1_000_000_000_000n
  return fraction === undefined ? String(moved) : `${moved}.${fraction}`
}
