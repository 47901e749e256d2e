import { cellTable, type CellSummary, summariseCells } from '@/lib/statistics/cells'
import type { WeightedMeanSquare } from '@/lib/statistics/combination-interval'
import { type NestedAnova, nestedAnova } from '@/lib/statistics/nested-anova'
import { buildNestedLayout, nestedTable, type NestedObservation } from '@/lib/statistics/nested-layout'
import { betweenLaboratories, repeatability, reproducibility } from '@/lib/statistics/one-way-precision'
import { nestedTerms, oneWayTerms, sdInterval } from '@/lib/statistics/precision-intervals'
import { type Random, randomSource } from '@/tests/statistics/random-source'

/*
 * Do the 95 % intervals hold the truth in 95 % of studies? Seeded draws from
 * known components. A truth counts as covered between the reported limits.
 */

/** One design with one set of components. */
export type CoveragePoint = {
  group: 'a' | 'b' | 'c' | 'c, irregular'
  design: string
  /** Components over that of the replicate, outermost first. */
  components: readonly number[]
  seed: number
  draw: (random: Random) => Drawn[] | null
}

type Drawn = { what: Quantity; truth: number; lower: number; upper: number }
type Quantity = 's_r' | 's_L' | 's_I' | 's_R' | 's_L by n̄'

export type CoverageRow = {
  point: CoveragePoint
  what: Quantity
  covered: number
  /** Shares of draws whose lower limit lies above the truth, and whose upper limit lies below. */
  tooHigh: number
  tooLow: number
}

export function simulate(point: CoveragePoint, draws: number): CoverageRow[] {
  const random = randomSource(point.seed)
  const rows = new Map<Quantity, CoverageRow>()
  for (let draw = 0; draw < draws; draw += 1) {
    for (const { what, truth, lower, upper } of usable(() => point.draw(random))) {
      const row = rows.get(what) ?? { point, what, covered: 0, tooHigh: 0, tooLow: 0 }
      rows.set(what, row)
      row.covered += Number(lower <= truth && truth <= upper) / draws
      row.tooHigh += Number(lower > truth) / draws
      row.tooLow += Number(upper < truth) / draws
    }
  }
  return [...rows.values()]
}

/** What is wrong with a row, in words; `slack` widens every bound, for fewer draws than 20,000. */
export function coverageFaults({ point, what, covered, tooHigh, tooLow }: CoverageRow, slack = 0): string[] {
  const [ratio] = point.components
  const faults: string[] = []
  const hold = (name: string, share: number, [low, high]: readonly [number, number]): void => {
    if (share >= low - slack && share <= high + slack) return
    const bounds = `${(100 * low).toFixed(1)} to ${(100 * high).toFixed(1)} %`
    faults.push(
      `${point.design}, ${point.components.join(', ')}, ${what}: ${name} ${(100 * share).toFixed(2)} %, wanted ${bounds}`,
    )
  }
  if (what === 's_L by n̄') {
    // The choice that was not made must fail where the design can tell them apart.
    if (ratio === 5 && point.design !== MIXED) hold('covered', covered, [0, 0.933])
    return faults
  }
  hold('covered', covered, COVERED[point.group])
  if (point.group !== 'a') return faults
  for (const [name, share] of [
    ['too high', tooHigh],
    ['too low', tooLow],
  ] as const) {
    if (what === 's_L') hold(name, share, [0.015, 0.035])
    if (what === 's_R') hold(name, share, [0, 0.052])
  }
  return faults
}

const COVERED: Readonly<Record<CoveragePoint['group'], readonly [number, number]>> = {
  a: [0.938, 0.97],
  b: [0.93, 0.965],
  c: [0.935, 0.97],
  'c, irregular': [0.92, 1],
}

const RATIOS = [0.1, 1, 5]
const MIXED = '1,2,2,3,4,5,3,2'
const UNEQUAL: Readonly<Record<string, readonly number[]>> = {
  [MIXED]: [1, 2, 2, 3, 4, 5, 3, 2],
  '2×6, 6×4': [2, 2, 2, 2, 2, 2, 6, 6, 6, 6],
  '1×4, 4×4': [1, 1, 1, 1, 4, 4, 4, 4],
  '2×9, 20×1': [2, 2, 2, 2, 2, 2, 2, 2, 2, 20],
}

/** Every point, in the order of the table. */
export function coveragePoints(): CoveragePoint[] {
  const oneWay = [6, 8, 12, 30].flatMap((p) =>
    [2, 3, 4].flatMap((n) =>
      [false, true].flatMap((gaps) =>
        RATIOS.map((ratio) => ({
          group: 'a' as const,
          design: `${p} × ${n}${gaps ? ', 15 % missing' : ''}`,
          components: [ratio],
          draw: (random: Random) =>
            oneWayIntervals(oneWayDraw(random, sizes(random, p, n, gaps), ratio), ratio),
        })),
      ),
    ),
  )
  const unequal = Object.entries(UNEQUAL).flatMap(([design, counts]) =>
    RATIOS.map((ratio) => ({
      group: 'b' as const,
      design,
      components: [ratio],
      draw: (random: Random) => {
        const cells = oneWayDraw(random, counts, ratio)
        return [...oneWayIntervals(cells, ratio), plugInInterval(cells, ratio)]
      },
    })),
  )
  const nested = Object.entries(NESTED).flatMap(([design, layout]) =>
    NESTED_COMPONENTS.map(([laboratory, day]) => ({
      group: design === IRREGULAR ? ('c, irregular' as const) : ('c' as const),
      design,
      components: [laboratory, day],
      draw: (random: Random) => nestedIntervals(random, layout(random), laboratory, day),
    })),
  )
  return [...oneWay, ...unequal, ...nested].map((point, index) => ({ ...point, seed: 20261201 + index }))
}

const NESTED_COMPONENTS = [
  [0.1, 0.1],
  [0.1, 1],
  [1, 0.1],
  [1, 1],
  [5, 1],
  [5, 5],
] as const

const IRREGULAR = '8 laboratories, 1–4 days of 1–3'

const NESTED: Readonly<Record<string, (random: Random) => number[][]>> = {
  '6 × 2 × 2': () => repeated(6, [2, 2]),
  '8 × 2 × 2': () => repeated(8, [2, 2]),
  '6 × 3 × 2': () => repeated(6, [2, 2, 2]),
  '30 × 2 × 2': () => repeated(30, [2, 2]),
  '6 × 2 × 2, 15 % missing': (random) => withGaps(random, repeated(6, [2, 2])),
  '8 × 2 × 2, 15 % missing': (random) => withGaps(random, repeated(8, [2, 2])),
  '6 × 3 × 2, 15 % missing': (random) => withGaps(random, repeated(6, [2, 2, 2])),
  '30 × 2 × 2, 15 % missing': (random) => withGaps(random, repeated(30, [2, 2])),
  'staggered 8': () => repeated(8, [2, 1]),
  'staggered 20': () => repeated(20, [2, 1]),
  [IRREGULAR]: (random) =>
    Array.from({ length: 8 }, () => Array.from({ length: upTo(random, 4) }, () => upTo(random, 3))),
}

function usable<Value>(draw: () => Value | null): Value {
  for (;;) {
    const drawn = draw()
    if (drawn !== null) return drawn
  }
}

function upTo(random: Random, most: number): number {
  return 1 + Math.floor(random.uniform() * most)
}

function sizes(random: Random, p: number, n: number, gaps: boolean): number[] {
  const counts = new Array<number>(p).fill(n)
  for (let missing = gaps ? Math.round(0.15 * p * n) : 0; missing > 0;) {
    // Every result is as likely to go as any other, so a cell goes by how many it still has.
    const cell = Math.floor(random.uniform() * p)
    if (random.uniform() * n >= counts[cell]!) continue
    counts[cell]! -= 1
    missing -= 1
  }
  return counts
}

function oneWayDraw(random: Random, counts: readonly number[], ratio: number): CellSummary[] {
  return summariseCells(
    cellTable(
      counts.map((n, index) => {
        const laboratory = Math.sqrt(ratio) * random.normal()
        const deviations = Array.from({ length: n }, () => laboratory + random.normal())
        return { laboratory: String(index), deviations }
      }),
    ),
  )
}

function oneWayIntervals(cells: readonly CellSummary[], ratio: number): Drawn[] {
  const within = repeatability(cells)
  const between = betweenLaboratories(cells)
  const terms = oneWayTerms({
    laboratories: cells.length,
    varianceOfCellMeans: between.meanSquareOfMeans / between.harmonicReplicates,
    harmonicCellSize: between.harmonicReplicates,
    repeatabilityVariance: within.variance,
    repeatabilityDf: within.df,
  })
  const alone = [{ weight: 1, ms: within.variance, df: within.df }]
  return [
    { what: 's_r', truth: 1, ...sdInterval(alone, within.variance) },
    { what: 's_L', truth: Math.sqrt(ratio), ...sdInterval(terms.betweenLaboratory, between.variance) },
    {
      what: 's_R',
      truth: Math.sqrt(1 + ratio),
      ...sdInterval(terms.reproducibility, reproducibility(cells).variance),
    },
  ]
}

/** s_L by the weighted mean square and n̄. */
function plugInInterval(cells: readonly CellSummary[], ratio: number): Drawn {
  const within = repeatability(cells)
  const between = betweenLaboratories(cells)
  const share = 1 / between.effectiveReplicates
  const terms: WeightedMeanSquare[] = [
    { weight: share, ms: between.meanSquare, df: between.df },
    { weight: -share, ms: within.variance, df: within.df },
  ]
  return { what: 's_L by n̄', truth: Math.sqrt(ratio), ...sdInterval(terms, between.variance) }
}

function repeated(laboratories: number, days: readonly number[]): number[][] {
  return Array.from({ length: laboratories }, () => [...days])
}

function withGaps(random: Random, layout: number[][]): number[][] {
  const whole = layout.flat().reduce((sum, n) => sum + n, 0)
  for (let missing = Math.round(0.15 * whole); missing > 0;) {
    const days = layout[Math.floor(random.uniform() * layout.length)]!
    const day = Math.floor(random.uniform() * days.length)
    if (random.uniform() * 2 >= days[day]!) continue
    days[day]! -= 1
    missing -= 1
  }
  return layout
}

function nestedIntervals(
  random: Random,
  layout: readonly (readonly number[])[],
  laboratory: number,
  day: number,
): Drawn[] | null {
  const anova = nestedDraw(random, layout, laboratory, day)
  if (anova === null) return null
  const wanted = [
    { what: 's_r', sources: ['residual'], variance: 1 },
    { what: 's_L', sources: ['laboratory'], variance: laboratory },
    { what: 's_I', sources: ['day', 'residual'], variance: day + 1 },
    { what: 's_R', sources: ['laboratory', 'day', 'residual'], variance: laboratory + day + 1 },
  ] as const
  return wanted.map(({ what, sources, variance }) => {
    const reported = anova.components
      .filter(({ source }) => (sources as readonly string[]).includes(source))
      .reduce((sum, component) => sum + component.variance, 0)
    return { what, truth: Math.sqrt(variance), ...sdInterval(nestedTerms(anova.rows, sources), reported) }
  })
}

function nestedDraw(
  random: Random,
  layout: readonly (readonly number[])[],
  laboratory: number,
  day: number,
): NestedAnova | null {
  const observations: NestedObservation[] = []
  layout.forEach((days, i) => {
    const own = Math.sqrt(laboratory) * random.normal()
    days.forEach((n, j) => {
      const ofDay = own + Math.sqrt(day) * random.normal()
      for (let k = 0; k < n; k += 1) {
        observations.push({ path: [String(i), String(j)], deviation: ofDay + random.normal() })
      }
    })
  })
  const drawn = buildNestedLayout(['laboratory', 'day'], nestedTable(observations, 2))
  return drawn.strata.length === 3 ? nestedAnova(drawn) : null
}
