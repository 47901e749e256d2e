import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { AnalysisDocument, AnalysisSettings, MaterialAnalysis } from '@/lib/statistics'
import { analyseRows, type TestRow } from './analyse-rows'

const seed = 20261205

/*
 * Wilder than any study: results of every size side by side, written in every way, in layouts of any shape. What must hold
 * of all of them is tried on some hundreds, always the same.
 */

const digit = fc.integer({ min: 0, max: 9 })

/** Kinds of results; those of one material are of one kind. */
const WILD: readonly fc.Arbitrary<string>[] = [
  fc.constantFrom('0', '-0', '0.0', '0e5'),
  fc.constantFrom('1e400', '1e400', '10e399', '2e400'),
  digit.map((last) => `7${'0'.repeat(400)}${last}.${last}`),
  digit.map((last) => `${last}e-324`),
  digit.map((last) => `${last + 1}e-1990`),
  fc.constantFrom(
    '1.2',
    '3.4',
    '2.2',
    '1e-30',
    '1.00000000000000000000000000000000001',
    '5e3',
    '1e-250',
    '1e-2000',
  ),
  fc.constantFrom(
    '1.',
    '.5',
    '+1.0',
    '-0',
    '000012.50',
    '1E1',
    '1e+1',
    '\u22123',
    '-.5',
    '100e-1',
    '9007199254740993',
  ),
  fc.integer({ min: -300, max: 300 }).map((power) => `1.${Math.abs(power)}e${power}`),
  fc.constantFrom('9.9', '10.1', '10', '10.0'),
  digit.map((last) => `123456789012345678901234567890.${last}`),
  fc.oneof(
    { weight: 30, arbitrary: digit.map((last) => `10.${last}`) },
    { weight: 1, arbitrary: fc.constant('1e100') },
  ),
]

/** Where digits can be counted on: the largest is not many powers of ten beyond what tells results apart. */
const TAME: readonly fc.Arbitrary<string>[] = [
  fc.integer({ min: 0, max: 9999 }).map((units) => (units / 100).toFixed(2)),
  fc.integer({ min: 0, max: 5 }).map(String),
  fc.constantFrom('9.9', '10.1', '10', '10.0'),
  fc.constantFrom('3.1', '3.1', '3.1', '3.2'),
  digit.map((last) => `1234567890123456.${last}`),
]

type Study = { rows: TestRow[]; nesting: string[]; settings: Partial<AnalysisSettings> }

const LEVELS = ['day', 'constructor', '__proto__']

function study(kinds: readonly fc.Arbitrary<string>[], marks: boolean): fc.Arbitrary<Study> {
  const label = fc.constantFrom('1', '2')
  const settings = fc.record({
    references: fc.constantFrom<NonNullable<AnalysisSettings['references']>>(
      {},
      { M: { value: '2', uncertainty: 0.05 } },
    ),
    sigmas: fc.constantFrom<NonNullable<AnalysisSettings['sigmas']>>({}, { M: 0.6 }),
    homogeneity: fc.boolean(),
  })
  return fc
    .record({
      kinds: fc.tuple(fc.constantFrom(...kinds), fc.constantFrom(...kinds)),
      depth: fc.integer({ min: 0, max: 3 }),
      settings,
    })
    .chain(({ kinds: [one, other], depth, settings }) => {
      const row = (material: string, text: fc.Arbitrary<string>): fc.Arbitrary<TestRow> =>
        fc.record({
          laboratory: fc.constantFrom('A', 'B', 'C', 'D', 'E', 'constructor'),
          material: fc.constant(material),
          groups: fc.array(label, { minLength: depth, maxLength: depth }),
          text: marks ? fc.oneof({ weight: 15, arbitrary: text }, fc.constant('')) : text,
          censored: marks
            ? fc.constantFrom(...Array<null>(25).fill(null), '<' as const, '>' as const)
            : fc.constant(null),
          excluded: marks ? fc.constantFrom(...Array<boolean>(9).fill(false), true) : fc.constant(false),
          order: marks ? fc.constantFrom(null, 1, 2, 3, 1e308, -1e308) : fc.constant(null),
          uncertainty: marks ? fc.constantFrom(null, 0.1, 1e-300, 1e300) : fc.constant(0.1),
        })
      return fc
        .tuple(
          fc.array(row('M', one), { maxLength: 40 }),
          fc.array(row('toString', other), { maxLength: 20 }),
        )
        .map((materials) => ({ rows: materials.flat(), nesting: LEVELS.slice(0, depth), settings }))
    })
}

function documentOf({ rows, nesting, settings }: Study): AnalysisDocument {
  return analyseRows(rows, { nesting, settings })
}

/** Where a number is not finite, and where a `null`, or an array that holds one, has no reason. */
function faultsOf(value: unknown, path = ''): string[] {
  if (typeof value === 'number') return Number.isFinite(value) ? [] : [`${path} is ${value}`]
  if (value === null || typeof value !== 'object') return []
  const reasons = (value as { reasons?: Record<string, string> }).reasons ?? {}
  return Object.entries(value).flatMap(([key, inner]) => {
    const holdsNull = inner === null || (Array.isArray(inner) && inner.includes(null))
    const lacksReason =
      holdsNull && !Object.hasOwn(reasons, key) && !Array.isArray(value) && key !== 'confounded'
    return lacksReason ? [`${path}/${key} is null without a reason`] : faultsOf(inner, `${path}/${key}`)
  })
}

/** The figures that have no unit (power 0), are in the unit of the results (1) or in its square (2). */
function figuresOf(one: MaterialAnalysis): [string, number | null, 0 | 1 | 2][] {
  return [
    ['s_r', one.repeatability.sd, 1],
    ['s_L²', one.betweenLaboratory.varianceRaw, 2],
    ['s_R', one.reproducibility.variance, 2],
    ['C', one.cochran.statistic, 0],
    ['C generalised', one.cochran.generalised.pValue, 0],
    ['G', one.grubbs.high.statistic, 0],
    ['pair', one.grubbs.pairLow.statistic, 0],
    ['A', one.robust.algorithmA.sd, 1],
    ['Q of means', one.robust.qHampel.sd, 1],
    ['Q of results', one.robust.qMethod.reproducibility.sd, 1],
    ['Q within', one.robust.qMethod.repeatability.sd, 1],
    ...one.anova.rows.map(({ source, ss }): [string, number | null, 2] => [`SS ${source}`, ss, 2]),
    ...one.reml.components.map(({ source, variance }): [string, number | null, 2] => [
      `REML ${source}`,
      variance,
      2,
    ]),
    ...one.cells.flatMap(({ laboratory, h, k, scores: { z } }): [string, number | null, 0][] => [
      [`h ${laboratory}`, h, 0],
      [`k ${laboratory}`, k, 0],
      [`z ${laboratory}`, z, 0],
    ]),
  ]
}

/** `size` is that of what tells results apart: a figure this much smaller is nothing but rounding. */
function expectSameFigures(before: AnalysisDocument, after: AnalysisDocument, unit: number): void {
  before.materials.forEach((one) => {
    const other = after.materials.find(({ material }) => material === one.material)!
    const size = Math.sqrt(one.anova.rows.reduce((sum, { ss }) => sum + (ss ?? 0), 0))
    const afterwards = new Map(figuresOf(other).map(([name, value]) => [name, value]))
    for (const [name, value, power] of figuresOf(one)) {
      const got = afterwards.get(name)!
      if (value === null || got === null) expect([name, got]).toEqual([name, value])
      else {
        const wanted = value * unit ** power
        const tolerance = name.startsWith('REML') ? 1e-6 : 1e-9
        const rounding = 1e-12 * (power === 0 ? 1 : (size * unit) ** power)
        const apart = Math.abs(got - wanted) - tolerance * Math.abs(wanted) - rounding
        if (apart > 0) throw new Error(`${one.material} ${name}: ${got} instead of ${wanted}`)
      }
    }
  })
}

describe('analyse, whatever the results', () => {
  it('gives a document with no figure that is none, a reason for each that is missing, and the same again', () => {
    fc.assert(
      fc.property(study(WILD, true), (one) => {
        const document = documentOf(one)
        expect(faultsOf(document)).toEqual([])
        expect(JSON.stringify(documentOf(one))).toBe(JSON.stringify(document))
      }),
      { seed, numRuns: 100 },
    )
  })

  it('gives the same figures in any order of the rows', () => {
    fc.assert(
      fc.property(study(TAME, false), (one) => {
        const reversed = { ...one, rows: [...one.rows].reverse() }
        expectSameFigures(documentOf(one), documentOf(reversed), 1)
      }),
      { seed, numRuns: 30 },
    )
  })

  it('follows the unit, however small or large', () => {
    const power = fc.constantFrom(-100, -40, -3, 3, 40, 100)
    fc.assert(
      fc.property(study(TAME, false), power, (one, by) => {
        const rows = one.rows.map((row) => ({ ...row, text: `${row.text}e${by}` }))
        const unit = Number(`1e${by}`)
        const { references = {}, sigmas = {} } = one.settings
        const settings = {
          ...one.settings,
          references: Object.fromEntries(
            Object.entries(references).map(([name, { value, uncertainty }]) => [
              name,
              { value: `${value}e${by}`, uncertainty: uncertainty * unit },
            ]),
          ),
          sigmas: Object.fromEntries(Object.entries(sigmas).map(([name, sigma]) => [name, sigma * unit])),
        }
        expectSameFigures(documentOf(one), documentOf({ ...one, rows, settings }), unit)
      }),
      { seed, numRuns: 30 },
    )
  })

  it('is unmoved by a million million added to every result', () => {
    fc.assert(
      fc.property(study(TAME, false), (one) => {
        const rows = one.rows.map((row) => ({ ...row, text: moved(row.text) }))
        const { references = {} } = one.settings
        const settings = {
          ...one.settings,
          references: Object.fromEntries(
            Object.entries(references).map(([name, given]) => [
              name,
              { ...given, value: moved(given.value) },
            ]),
          ),
        }
        expectSameFigures(documentOf(one), documentOf({ ...one, rows, settings }), 1)
      }),
      { seed, numRuns: 30 },
    )
  })
})

/** Adds 10¹² to a positive decimal text without a float on the way. */
function moved(text: string): string {
  const [whole = '0', fraction] = text.split('.')
  const sum = BigInt(whole) + 10n ** 12n
  return fraction === undefined ? String(sum) : `${sum}.${fraction}`
}
