import { describe, expect, it } from 'vitest'
import { planningBlock } from '@/lib/statistics/document/planning-block'
import { leastLaboratories } from '@/lib/statistics/least-laboratories'
import { nestedAnova } from '@/lib/statistics/nested-anova'
import { buildNestedLayout, nestedTable, type NestedObservation } from '@/lib/statistics/nested-layout'
import {
  nestedBiasPrecision,
  type NestedDesign,
  nestedRepeatabilityPrecision,
  nestedStudies,
} from '@/lib/statistics/nested-planning'
import { NotComputable } from '@/lib/statistics/not-computable'
import { biasPrecision, repeatabilityPrecision, reproducibilityPrecision } from '@/lib/statistics/planning'
import { type Random, randomSource } from '@/tests/statistics/random-source'

const CHANCE = { seed: 20261201, draws: 10_000 }
const DAYS: NestedDesign = { inner: [{ source: 'day', groups: 2, share: 0.4 }], n: 2, gamma: 2 }

describe('a layout without inner levels', () => {
  // ISO 5725-1, 6.3 is the first order; from γ = 1.5 it is right to 6 %, and 1 % is left to the draws.
  it.each([1.5, 2, 5])('agrees with the standard to 6 % at gamma %d', (gamma) => {
    for (const n of [2, 3]) {
      const studies = nestedStudies({ inner: [], n, gamma }, CHANCE)
      for (const p of [6, 8, 12, 20, 30]) {
        const ratio = studies(p).reproducibility / reproducibilityPrecision({ p, n, gamma })
        expect(ratio, `p = ${p}, n = ${n}`).toBeGreaterThan(0.94 - 0.01)
        expect(ratio, `p = ${p}, n = ${n}`).toBeLessThan(1.06 + 0.01)
      }
    }
  })

  it('shows at gamma 1 by how much the first order falls short: 6 to 14 %', () => {
    for (const n of [2, 3]) {
      const studies = nestedStudies({ inner: [], n, gamma: 1 }, CHANCE)
      for (const p of [6, 8, 12, 30]) {
        const short = 1 - reproducibilityPrecision({ p, n, gamma: 1 }) / studies(p).reproducibility
        expect(short, `p = ${p}, n = ${n}`).toBeGreaterThan(0.06 - 0.01)
        expect(short, `p = ${p}, n = ${n}`).toBeLessThan(0.14 + 0.01)
      }
    }
  })

  it('has the standard’s figure for the bias, and nearly its figure for repeatability', () => {
    const design = { inner: [], n: 2, gamma: 2 }
    expect(nestedBiasPrecision(design, 8)).toBeCloseTo(biasPrecision({ p: 8, n: 2, gamma: 2 }), 14)
    const first = repeatabilityPrecision({ p: 100, n: 2, gamma: 2 })
    expect(nestedRepeatabilityPrecision(design, 100) / first).toBeCloseTo(1, 2)
  })
})

describe('what has an exact answer', () => {
  it('is it for repeatability', () => {
    // Tables of chi-squared on 16 degrees of freedom: 2.5 % at 6.908, 97.5 % at 28.845. 4 laboratories × 2 days × 3 results.
    const exact = (Math.sqrt(28.845 / 16) - Math.sqrt(6.908 / 16)) / 2
    expect(nestedRepeatabilityPrecision({ ...DAYS, n: 3 }, 4)).toBeCloseTo(exact, 4)
  })

  it('is met by the draws where one mean square is all: days with one result each', () => {
    const { intermediate } = nestedStudies({ ...DAYS, n: 1 }, CHANCE)(16)
    // The same 16 degrees of freedom, 16 laboratories × (2 − 1).
    expect(intermediate).toHaveLength(1)
    expect(intermediate[0]! / ((Math.sqrt(28.845 / 16) - Math.sqrt(6.908 / 16)) / 2)).toBeCloseTo(1, 2)
  })

  it('is it for the bias: worked by hand', () => {
    // γ² − 1 = 3, shared 1.8 and 1.2: variance of the mean 1.8/8 + 1.2/16 + 1/32 of σ_r², over γ² = 4.
    expect(nestedBiasPrecision(DAYS, 8)).toBeCloseTo(1.96 * Math.sqrt(0.33125 / 4), 12)
  })
})

/** Studies drawn result by result and computed as any study is. */
function slowly(design: NestedDesign, laboratories: number, studies: number): number[] {
  const random = randomSource(7)
  const between = design.gamma ** 2 - 1
  const left = design.inner.reduce((rest, { share }) => rest - share, 1)
  const levels = [
    { groups: laboratories, component: left * between },
    ...design.inner.map(({ groups, share }) => ({ groups, component: share * between })),
    { groups: design.n, component: 1 },
  ]
  const names = ['laboratory', ...design.inner.map(({ source }) => source)]
  const drawn = Array.from({ length: studies }, () => {
    const results = draw(levels, random).map(({ path, deviation }) => ({
      path: path.slice(0, -1),
      deviation,
    }))
    const { components } = nestedAnova(buildNestedLayout(names, nestedTable(results, names.length)))
    let sum = 0
    const outwards = components.toReversed().map(({ variance }) => (sum += variance))
    return design.n > 1 ? outwards.slice(1) : outwards
  })
  return drawn[0]!.map((_, set) => {
    // The first set holds the innermost level and what varies within it, whether told apart from it or not.
    const truth = levels.slice(-2 - set).reduce((sum, { component }) => sum + component, 0)
    const sorted = drawn.map((one) => Math.sqrt(one[set]! / truth)).sort((a, b) => a - b)
    return (sorted[Math.round(0.975 * (studies - 1))]! - sorted[Math.round(0.025 * (studies - 1))]!) / 2
  })
}

function draw(levels: readonly { groups: number; component: number }[], random: Random): NestedObservation[] {
  const [level, ...inside] = levels
  if (level === undefined) return [{ path: [], deviation: 0 }]
  return Array.from({ length: level.groups }, (_, group) => {
    const own = Math.sqrt(level.component) * random.normal()
    return draw(inside, random).map(({ path, deviation }) => ({
      path: [String(group), ...path],
      deviation: own + deviation,
    }))
  }).flat()
}

describe('mean squares drawn at once', () => {
  const operators: NestedDesign = {
    inner: [
      { source: 'operator', groups: 2, share: 0.3 },
      { source: 'day', groups: 3, share: 0.1 },
    ],
    n: 2,
    gamma: 1.5,
  }
  // A half-width from 4,000 studies has a standard error of 1.5 to 2 %, from 10,000 draws of 1 %; three of both together.
  it.each([
    ['6 × 2 × 2', DAYS],
    [
      '6 × 2 × 2 with days alike, often truncated',
      { ...DAYS, inner: [{ source: 'day', groups: 2, share: 0 }] },
    ],
    ['6 × 3 days of one result', { inner: [{ source: 'day', groups: 3, share: 0.5 }], n: 1, gamma: 2 }],
    ['6 × 2 × 3 × 2', operators],
  ] as [string, NestedDesign][])('say the same as results drawn one by one: %s', (_, design) => {
    const { intermediate, reproducibility } = nestedStudies(design, CHANCE)(6)
    const quick = [...intermediate, reproducibility]
    const slow = slowly(design, 6, 4000)
    expect(quick).toHaveLength(slow.length)
    quick.forEach((halfWidth, set) => expect(Math.abs(halfWidth / slow[set]! - 1)).toBeLessThan(0.06))
  })
})

describe('a curve over numbers of laboratories', () => {
  const studies = nestedStudies(DAYS, CHANCE)

  it('falls throughout', () => {
    const curve = Array.from({ length: 60 }, (_, index) => studies(index + 2))
    for (let index = 1; index < curve.length; index += 1) {
      expect(curve[index]!.reproducibility).toBeLessThan(curve[index - 1]!.reproducibility)
      expect(curve[index]!.intermediate[0]!).toBeLessThan(curve[index - 1]!.intermediate[0]!)
    }
  })

  it('is the same whoever asks, in whatever order, and another with another seed only within 5 %', () => {
    expect(nestedStudies(DAYS, CHANCE)(8)).toEqual(studies(8))
    const other = nestedStudies(DAYS, { ...CHANCE, seed: 5 })(8)
    expect(other).not.toEqual(studies(8))
    expect(other.reproducibility / studies(8).reproducibility).toBeGreaterThan(0.95)
    expect(other.reproducibility / studies(8).reproducibility).toBeLessThan(1.05)
  })
})

describe('the least number of laboratories', () => {
  // 1.96 √(1/(2p)) ≤ 0.3 from p = 21.34.
  const precision = (p: number) => repeatabilityPrecision({ p, n: 2, gamma: 2 })

  it('is the first that is precise enough', () => {
    expect(leastLaboratories({ precision, wished: 0.3, limit: 200 })).toBe(22)
    expect(leastLaboratories({ precision, wished: 0.3, limit: 22 })).toBe(22)
    expect(leastLaboratories({ precision, wished: 9, limit: 200 })).toBe(2)
  })

  it('is the first on a simulated curve', () => {
    const studies = nestedStudies(DAYS, CHANCE)
    const least = leastLaboratories({
      precision: (p) => studies(p).reproducibility,
      wished: 0.25,
      limit: 100,
    })
    expect(studies(least).reproducibility).toBeLessThanOrEqual(0.25)
    expect(studies(least - 1).reproducibility).toBeGreaterThan(0.25)
  })

  it('is refused where the limit is not enough', () => {
    expect(() => leastLaboratories({ precision, wished: 0.3, limit: 21 })).toThrow(
      new NotComputable('not-reached', 'Not even 21 laboratories bring it down so far.'),
    )
    expect(() => leastLaboratories({ precision, wished: 0, limit: 21 })).toThrow(RangeError)
    expect(() => leastLaboratories({ precision, wished: 0.3, limit: 1 })).toThrow(RangeError)
  })
})

describe('a nested plan that is none', () => {
  it.each([
    ['one day', { ...DAYS, inner: [{ source: 'day', groups: 1, share: 0.4 }] }],
    ['a negative share', { ...DAYS, inner: [{ source: 'day', groups: 2, share: -0.1 }] }],
    ['more than the whole', { ...DAYS, inner: [{ source: 'day', groups: 2, share: 1.01 }] }],
    ['no replicate', { ...DAYS, n: 0 }],
    ['a gamma below 1', { ...DAYS, gamma: 0.9 }],
    ['an infinite gamma', { ...DAYS, gamma: Infinity }],
  ])('is refused: %s', (_, design) => {
    expect(() => nestedStudies(design, CHANCE)).toThrow(RangeError)
    expect(() => nestedRepeatabilityPrecision(design, 8)).toThrow(RangeError)
    expect(() => nestedBiasPrecision(design, 8)).toThrow(RangeError)
  })

  it('is refused for one laboratory, and repeatability for one replicate', () => {
    expect(() => nestedStudies(DAYS, CHANCE)(1)).toThrow(RangeError)
    expect(() => nestedRepeatabilityPrecision({ ...DAYS, n: 1 }, 8)).toThrow(
      new NotComputable('no-replication', 'One replicate tells nothing of repeatability.'),
    )
  })

  it('may give the inner levels everything', () => {
    const all = { ...DAYS, inner: [{ source: 'day', groups: 2, share: 1 }] }
    expect(nestedStudies(all, CHANCE)(8).reproducibility).toBeGreaterThan(0)
  })
})

describe('the block of a nested plan', () => {
  const inner = [
    { source: 'operator', groups: 2, share: 0.4 },
    { source: 'day', groups: 2, share: 0.2 },
  ]
  const block = planningBlock({ from: 8, to: 10, n: 2, gamma: 2, inner, wished: 0.25 })

  it('names what may vary, from the innermost level outwards, and says what was assumed', () => {
    expect(block.points.map(({ p }) => p)).toEqual([8, 9, 10])
    expect(block.points[0]!.intermediate!.map(({ varies }) => varies)).toEqual([['day'], ['operator', 'day']])
    expect(block.nested).toMatchObject({ inner, draws: 10_000 })
    expect(block.nested!.laboratoryShare).toBeCloseTo(0.4, 12)
    expect(block.points[0]!.bias).toBe(nestedBiasPrecision({ inner, n: 2, gamma: 2 }, 8))
    expect(block.points[0]!.repeatability).toBe(nestedRepeatabilityPrecision({ inner, n: 2, gamma: 2 }, 8))
  })

  it('gives the least number of laboratories for each figure, and the curve passes the wish there', () => {
    const { repeatability, reproducibility, intermediate } = block.least!
    const at = (p: number) => planningBlock({ from: p, to: p, n: 2, gamma: 2, inner }).points[0]!
    expect(at(repeatability!).repeatability!).toBeLessThanOrEqual(0.25)
    expect(at(repeatability! - 1).repeatability!).toBeGreaterThan(0.25)
    expect(at(reproducibility!).reproducibility!).toBeLessThanOrEqual(0.25)
    expect(at(reproducibility! - 1).reproducibility!).toBeGreaterThan(0.25)
    intermediate.forEach(({ p }, set) => {
      expect(at(p!).intermediate![set]!.halfWidth).toBeLessThanOrEqual(0.25)
      expect(at(p! - 1).intermediate![set]!.halfWidth).toBeGreaterThan(0.25)
    })
  })

  it('says why something is missing', () => {
    const { points, least, reasons } = planningBlock({ from: 8, to: 8, n: 1, gamma: 2, inner })
    expect(points[0]).toMatchObject({
      repeatability: null,
      reasons: { repeatability: 'One replicate tells nothing of repeatability.' },
    })
    expect(least).toBeNull()
    expect(reasons).toEqual({ least: 'not asked for' })
    const far = planningBlock({ from: 8, to: 8, n: 2, gamma: 2, inner, wished: 0.01 }).least!
    expect(far.reproducibility).toBeNull()
    expect(far.reasons!['reproducibility']).toBe('Not even 1000 laboratories bring it down so far.')
    expect(far.intermediate[0]).toMatchObject({ varies: ['day'], p: null })
  })

  it('is not added to a one-way plan', () => {
    const oneWay = planningBlock({ from: 8, to: 8, n: 2, gamma: 2 })
    expect(Object.keys(oneWay)).toEqual(['n', 'gamma', 'points'])
    expect(Object.keys(oneWay.points[0]!)).toEqual(['p', 'repeatability', 'reproducibility', 'bias'])
    expect(planningBlock({ from: 8, to: 8, n: 2, gamma: 2, inner: [] })).toEqual(oneWay)
  })
})
