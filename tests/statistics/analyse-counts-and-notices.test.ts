import { describe, expect, it } from 'vitest'
import type { LevelPoint } from '@/lib/statistics/level-relation'
import { convergedLinearRelation, linearRelation } from '@/lib/statistics/level-relation'
import { analyseRows, rowsOf, type TestRow } from './analyse-rows'

const TWELVE = Object.fromEntries(
  Array.from({ length: 12 }, (_, index) => [`L${index}`, `${10 + index}.1 ${10 + index}.3`]),
)

describe('the counts of the input', () => {
  it('take every row once: used, beside a censored one, set aside, censored, missing', () => {
    const rows: TestRow[] = [
      ...rowsOf(TWELVE),
      { laboratory: 'X', text: '0.5', censored: '<' },
      { laboratory: 'X', text: '1.2' },
      { laboratory: 'X', text: '1.3' },
      { laboratory: 'L0', text: '99', excluded: true },
      { laboratory: 'Y', text: '5', censored: '<', excluded: true },
      { laboratory: 'L0', text: '', excluded: true },
      { laboratory: 'L1', text: '' },
    ]
    const { input, materials } = analyseRows(rows)
    expect(input).toMatchObject({ results: 24, besideCensored: 2, excluded: 2, censored: 1, missing: 2 })
    expect(input.results + input.besideCensored + input.excluded + input.censored + input.missing).toBe(
      rows.length,
    )
    expect(materials[0]!.results).toBe(input.results)
    // Y has nothing that was kept.
    expect(input.laboratories).toBe(13)
  })
})

describe('what is noticed', () => {
  it('names a trend at the first material that can be judged, were it not the first', () => {
    const drifting = (material: string, level: number): TestRow[] =>
      ['A', 'B', 'C', 'D', 'E'].flatMap((laboratory, place) =>
        ['1', '2', '3'].map((_, run): TestRow => ({
          laboratory,
          material,
          order: level + run,
          text: (
            level +
            place / 10 +
            (laboratory === 'A' ? run * 2 : ((run * (place + 1)) % 3) / 20)
          ).toFixed(2),
        })),
      )
    const rows = [
      ...rowsOf({ A: '1.0 1.1', B: '1.1 1.2' }, 'few'),
      ...drifting('P', 10),
      ...drifting('Q', 20),
    ]
    const [few, p, q] = analyseRows(rows).materials
    expect(few!.noticed).toBeNull()
    expect(p!.noticed!.map(({ kind, laboratory }) => [kind, laboratory])).toContainEqual(['trend', 'A'])
    expect(q!.noticed!.map(({ kind }) => kind)).not.toContain('trend')
  })

  it('takes the step of identical results from their exponents too', () => {
    // A step of 0.01 beside a scatter near 3.
    const cells = {
      A: '140.00 131.00',
      B: '133.00 138.00',
      C: '139.00 134.00',
      D: '137.50 132.00',
      E: '135.00 135.00',
    }
    const written = { ...cells, E: '1.3500e2 1.3500e2' }
    const plain = analyseRows(rowsOf(cells)).materials[0]!.noticed
    expect(plain!.map(({ kind, laboratory }) => [kind, laboratory])).toEqual([['identical', 'E']])
    expect(analyseRows(rowsOf(written)).materials[0]!.noticed).toEqual(plain)
    // Written as 1.35e2 the last digit stands for 1, and agreement is no wonder.
    expect(analyseRows(rowsOf({ ...cells, E: '1.35e2 1.35e2' })).materials[0]!.noticed).toEqual([])
  })
})

describe('a cell with nearly all the scatter', () => {
  it('keeps the digits of its p-values, which a difference from the whole would lose', () => {
    const { cells } = analyseRows(rowsOf({ A: '0 1000000000', B: '1.0 1.1' })).materials[0]!
    // F(1, 1) of 10²⁰: 1 − (2/π) atan 10¹⁰ = (2/π) 10⁻¹⁰, by hand.
    const p = (2 / Math.PI) * 1e-10
    expect(cells[0]!.kPValue! / p).toBeCloseTo(1, 9)
    expect(cells[0]!.generalisedCochran.pValue! / (2 * p)).toBeCloseTo(1, 9)
    expect(cells[0]!.generalisedCochran.statistic).toBe(1)
  })

  it('keeps them at the inner levels of a nested layout', () => {
    const rows = Object.entries({ A: ['0', '1000000000'], B: ['1.0', '1.1'] }).flatMap(
      ([laboratory, texts]) => texts.map((text, day): TestRow => ({ laboratory, text, groups: [`${day}`] })),
    )
    const [day] = analyseRows(rows, { nesting: ['day'] }).materials[0]!.levels
    expect(day!.cells[0]!.kPValue! / ((2 / Math.PI) * 1e-10)).toBeCloseTo(1, 9)
  })
})

describe('the level relation', () => {
  // Found by trial: the third fit exists and gives a negative standard deviation at one of the levels.
  const points: LevelPoint[] = [
    { material: '1', mean: 7, sd: 0.8 },
    { material: '2', mean: 4, sd: 4.9 },
    { material: '3', mean: 17, sd: 6.9 },
    { material: '4', mean: 11, sd: 1.5 },
  ]

  it('keeps the third fit where a later one fails', () => {
    const { a, b } = linearRelation(points)
    expect(a).toBeCloseTo(-2.329435840636809, 10)
    expect(b).toBeCloseTo(0.5423882173023341, 10)
    expect(() => convergedLinearRelation(points)).toThrow('not above 0')
  })

  it('compares its forms over the materials that all of them can use', () => {
    const rows = [
      ...rowsOf({ A: '-0.4 -0.2', B: '-0.1 -0.3', C: '-0.3 -0.6' }, 'below 0'),
      ...rowsOf({ A: '1.0 1.2', B: '1.1 1.4', C: '0.9 1.1' }, 'P'),
      ...rowsOf({ A: '10 11', B: '12 10', C: '11 13' }, 'Q'),
      ...rowsOf({ A: '100 107', B: '112 101', C: '103 115' }, 'R'),
    ]
    const { materials, levelRelation } = analyseRows(rows)
    const { linear, leftOut } = levelRelation!.repeatability
    expect(leftOut).toEqual(['below 0'])
    const common = materials.slice(1).map(({ mean, repeatability }) => [mean!, repeatability.sd!] as const)
    const q = common.reduce((sum, [m, s]) => sum + Math.log(s / (linear.a! + linear.b! * m)) ** 2, 0)
    expect(linear.q).toBeCloseTo(q / (3 - 2), 12)
  })
})
