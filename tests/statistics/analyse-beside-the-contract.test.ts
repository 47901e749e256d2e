import { describe, expect, it } from 'vitest'
import { analyse, laboratoryBias, NotComputable, stabilityVerdict } from '@/lib/statistics'
import { tQuantileUpper } from '@/lib/statistics/distributions/students-t'
import { lastPlace } from '@/lib/statistics/rounding'
import { analyseRows, rowsOf, type TestRow } from './analyse-rows'

describe('the bias of one laboratory', () => {
  it('has an interval from its own replicates and a component beside that of the method', () => {
    const rows = rowsOf({ A: '10.1 10.3', B: '10.6 10.4', C: '9.9 10.1', D: '10.8 11.0' })
    const one = analyseRows(rows, { settings: { references: { M: { value: '10', uncertainty: 0 } } } })
      .materials[0]!
    const found = laboratoryBias({
      bias: one.cells[3]!.bias!,
      methodBias: one.trueness!.bias!,
      results: one.cells[3]!.n,
      repeatability: { variance: one.repeatability.variance!, df: one.repeatability.df! },
    })
    // Every cell has a range of 0.2, so that s_r² = 0.02 on 4 degrees of freedom; Δ_D = 0.9 and δ = 0.4.
    const half = tQuantileUpper(0.025, 4) * Math.sqrt(0.02 / 2)
    expect(found.lower).toBeCloseTo(0.9 - half, 12)
    expect(found.upper).toBeCloseTo(0.9 + half, 12)
    expect(found.component).toBeCloseTo(0.5, 12)
  })

  it('has no interval where nothing was replicated', () => {
    const of = { bias: 0.1, methodBias: 0, results: 1, repeatability: { variance: 0, df: 0 } }
    expect(() => laboratoryBias(of)).toThrow(NotComputable)
  })
})

describe('the check of stability', () => {
  const at = (mean: number, standardUncertainty: number) => ({ mean, standardUncertainty })

  it('passes within 0.3 σ, and in its expanded form allows for the uncertainty of both means', () => {
    // σ = 1: a difference of 0.35 is beyond 0.3, and within 0.3 + 2 √(0.03² + 0.04²) = 0.4.
    expect(stabilityVerdict({ first: at(10, 0.03), second: at(10.3, 0.04), target: 1.1 })).toEqual({
      difference: expect.closeTo(0.3, 12) as number,
      basic: true,
      expanded: true,
    })
    expect(stabilityVerdict({ first: at(10.35, 0.03), second: at(10, 0.04), target: 1 })).toMatchObject({
      basic: false,
      expanded: true,
    })
    expect(stabilityVerdict({ first: at(10, 0.03), second: at(10.45, 0.04), target: 1 })).toMatchObject({
      basic: false,
      expanded: false,
    })
  })

  it('refuses a target that is none', () => {
    expect(() => stabilityVerdict({ first: at(1, 0), second: at(1, 0), target: 0 })).toThrow(RangeError)
  })
})

describe('the check of homogeneity', () => {
  const units = (count: number) =>
    Object.fromEntries(
      Array.from({ length: count }, (_, unit) => [`U${unit}`, `${10 + (unit % 3)} ${10 + (unit % 2)}`]),
    )

  it('says so where it was made on fewer than 10 units', () => {
    const check = (count: number) =>
      analyseRows(rowsOf(units(count)), { settings: { homogeneity: true, sigmas: { M: 1 } } })
        .homogeneity![0]!
    expect(check(9).reasons).toEqual({ units: 'Fewer than 10 units suffice only with earlier evidence.' })
    expect(check(9).sx).not.toBeNull()
    expect(check(10).reasons).toBeUndefined()
  })
})

describe('a plan', () => {
  const plan = (gamma: number) =>
    analyse({
      results: [],
      nesting: [],
      settings: { limitFactor: 2.8, plan: { from: 8, to: 9, n: 2, gamma } },
      sha256: '',
      version: '0.0.0',
    }).planning!

  it('says where its figure for reproducibility is too small', () => {
    expect(plan(1).reasons).toEqual({
      reproducibility:
        'A first-order figure: right to 6 % from gamma 1.5, at gamma 1 it is 6 to 14 % too small.',
    })
    expect(plan(1.5).reasons).toBeUndefined()
  })
})

describe('rounded figures', () => {
  it('hold the laboratory component and the intermediate precisions, at the place of s_r and s_R', () => {
    const rows = Object.entries({
      A: '10.13 10.41 11.02 11.24',
      B: '12.05 12.33 13.11 12.96',
      C: '9.04 9.15 10.21 10.02',
    }).flatMap(([laboratory, texts]) =>
      texts.split(' ').map((text, index): TestRow => ({ laboratory, text, groups: [`${index >> 1}`] })),
    )
    const one = analyseRows(rows, { nesting: ['day'] }).materials[0]!
    const decimals = -Math.min(lastPlace(one.repeatability.sd!), lastPlace(one.reproducibility.sd!))
    // No figure here lies at a half, so that fixed notation rounds alike.
    expect(one.rounded.betweenLaboratory).toBe(one.betweenLaboratory.sd!.toFixed(decimals))
    expect(one.rounded.intermediate).toEqual([one.intermediate[0]!.sd!.toFixed(decimals)])
    expect(one.rounded.repeatability).toBe(one.repeatability.sd!.toFixed(decimals))
  })

  it('print a component of 0 at that place, and hold no intermediate precision without inner levels', () => {
    const { rounded } = analyseRows(rowsOf({ A: '1 2', B: '2 1', C: '1 2.2' })).materials[0]!
    expect(rounded.betweenLaboratory).toBe('0.00')
    expect(rounded.intermediate).toEqual([])
  })

  it('say what is missing', () => {
    const rows = ['1', '2', '4'].map((text): TestRow => ({ laboratory: 'A', text, groups: [text] }))
    const { rounded } = analyseRows(rows, { nesting: ['day'] }).materials[0]!
    expect(rounded.betweenLaboratory).toBeNull()
    expect(rounded.intermediate).toEqual([null])
    expect(rounded.reasons).toMatchObject({
      betweenLaboratory: expect.any(String) as string,
      intermediate: expect.any(String) as string,
    })
  })
})
