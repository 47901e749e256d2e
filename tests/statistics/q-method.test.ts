import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { normalQuantile } from '@/lib/statistics/distributions/normal'
import { toCommonScale } from '@/lib/statistics/decimal'
import type { IntegerCells } from '@/lib/statistics/pairwise-differences'
import { NotComputable } from '@/lib/statistics/not-computable'
import { qOfCellMeans, qRepeatability, qReproducibility } from '@/lib/statistics/q-method'

const seed = 20261203

type Pair = { size: number; weight: number }

/** The definition of ISO 13528, C.5, read off word for word: H, G and the straight lines between. */
function naiveSpread(
  pairs: readonly Pair[],
  share: number,
  probability: number,
  ofTies: number,
): number | null {
  const h = (x: number): number => pairs.reduce((sum, { size, weight }) => sum + (size <= x ? weight : 0), 0)
  const sizes = [...new Set(pairs.map(({ size }) => size))].sort((one, other) => one - other)
  const ties = h(0)
  const points = sizes.map((size, index) => ({
    x: size,
    g: size === 0 ? 0 : ((index === 0 ? 0 : h(sizes[index - 1]!)) + h(size)) / 2,
  }))
  if (points[0]!.x > 0) points.unshift({ x: 0, g: 0 })
  const target = share + (1 - share) * ties
  const upper = points.findIndex(({ g }) => g >= target)
  if (upper < 1) return null
  const [a, b] = [points[upper - 1]!, points[upper]!]
  const x = a.x + ((b.x - a.x) * (target - a.g)) / (b.g - a.g)
  return x / (Math.SQRT2 * normalQuantile(probability + ofTies * ties))
}

function betweenPairs(cells: readonly (readonly number[])[]): Pair[] {
  return cells.flatMap((cell, index) =>
    cells.slice(index + 1).flatMap((other) =>
      cell.flatMap((one) =>
        other.map((two) => ({
          size: Math.abs(one - two),
          weight: 2 / (cells.length * (cells.length - 1) * cell.length * other.length),
        })),
      ),
    ),
  )
}

/** The definition once more, every weight a whole number (60 is a multiple of all sizes up to 6), so that none is rounded. */
function exactBetween(cells: readonly (readonly number[])[]): number | null {
  const pairs = betweenPairs(cells)
  const unit = (cells.length * (cells.length - 1)) / 2
  return naiveWhole(
    pairs.map(({ size, weight }) => ({ size, weight: Math.round(weight * unit * 3600) })),
    unit * 3600,
  )
}

function naiveWhole(pairs: readonly Pair[], all: number): number | null {
  const weights = new Map<number, number>()
  for (const { size, weight } of pairs) weights.set(size, (weights.get(size) ?? 0) + weight)
  const ties = weights.get(0) ?? 0
  const target = (all + 3 * ties) / 4
  let [x, g, sum] = [0, 0, ties]
  for (const size of [...weights.keys()].filter((one) => one > 0).sort((one, other) => one - other)) {
    const next = sum + weights.get(size)! / 2
    if (next >= target) {
      const at = x + ((size - x) * (target - g)) / (next - g)
      return at / (Math.SQRT2 * normalQuantile(0.625 + (0.375 * ties) / all))
    }
    sum += weights.get(size)!
    ;[x, g] = [size, next]
  }
  return null
}

function withinPairs(cells: readonly (readonly number[])[]): Pair[] {
  const replicated = cells.filter(({ length }) => length >= 2)
  return replicated.flatMap((cell) =>
    cell.flatMap((one, index) =>
      cell.slice(index + 1).map((two) => ({
        size: Math.abs(one - two),
        weight: 2 / (replicated.length * cell.length * (cell.length - 1)),
      })),
    ),
  )
}

function orNull(compute: () => number): number | null {
  try {
    return compute()
  } catch (error) {
    if (error instanceof NotComputable) return null
    throw error
  }
}

/** As doubles where they are small, as the product reads them. */
function integerCells(cells: readonly (readonly bigint[])[]): IntegerCells {
  const starts = new Int32Array(cells.length + 1)
  cells.forEach((cell, index) => (starts[index + 1] = starts[index]! + cell.length))
  const { units } = toCommonScale(cells.flat().map((unit) => ({ units: unit, scale: 0 })))
  return { units, starts }
}

function expectSame(got: number | null, wanted: number | null): void {
  if (wanted === null) expect(got).toBeNull()
  else expect(Math.abs(got! - wanted)).toBeLessThanOrEqual(1e-12 * wanted)
}

const cellsOf = fc.array(fc.array(fc.integer({ min: 0, max: 400 }), { minLength: 1, maxLength: 4 }), {
  minLength: 3,
  maxLength: 8,
})

describe('the Q method', () => {
  it('equals its definition, cells of any size', () => {
    fc.assert(
      fc.property(cellsOf, (cells) => {
        const integers = cells.map((cell) => cell.map(BigInt))
        const between = naiveSpread(betweenPairs(cells), 0.25, 0.625, 0.375)
        expectSame(
          orNull(() => qReproducibility(integerCells(integers), 1)),
          between,
        )
        if (!cells.some(({ length }) => length >= 2)) return
        const within = naiveSpread(withinPairs(cells), 0.5, 0.75, 0.25)
        expectSame(
          orNull(() => qRepeatability(integerCells(integers), 1)),
          within,
        )
      }),
      { seed, numRuns: 300 },
    )
  })

  it.each([
    // Of the five differences one is 0 and one is 1: the distribution stands at 0.4, its target, from 1 up to 7.
    [[[13], [6, 12, 3, 6, 13]]],
    [[[12], [12, 11, 2, 0, 3]]],
    [
      [
        [7, 42],
        [25, 44, 21, 34, 14, 23],
      ],
    ],
    [[[39, 39, 46, 4, 8], [10, 12, 23, 18], [27]]],
  ])('reads the target at a difference, where the distribution stands still at it: %j', (cells) => {
    expectSame(qReproducibility(integerCells(cells.map((cell) => cell.map(BigInt))), 1), exactBetween(cells))
  })

  it('equals its definition in whole numbers, cells of any two to four laboratories', () => {
    const few = fc.array(fc.array(fc.integer({ min: 0, max: 30 }), { minLength: 1, maxLength: 6 }), {
      minLength: 2,
      maxLength: 4,
    })
    fc.assert(
      fc.property(few, (cells) => {
        const integers = integerCells(cells.map((cell) => cell.map(BigInt)))
        expectSame(
          orNull(() => qReproducibility(integers, 1)),
          exactBetween(cells),
        )
      }),
      { seed, numRuns: 4000 },
    )
  })

  it('takes means of unequal cells at a common multiple, so that equal differences stay equal', () => {
    // Means 1/3, 2/3, 1, 4/3 in units: the differences of neighbours are equal, which thirds as doubles are not.
    const cells = [[0n, 0n, 1n], [1n, 0n, 1n], [1n], [1n, 1n, 2n]]
    const thirds = [1, 2, 3, 4].map((value) => [value])
    expectSame(
      qOfCellMeans(integerCells(cells), 1),
      naiveSpread(betweenPairs(thirds), 0.25, 0.625, 0.375)! / 3,
    )
  })

  it('keeps its figure when the results lie further apart than doubles count', () => {
    const near = [[1n], [2n], [4n], [8n], [15n]]
    const far = near.map((cell) => cell.map((one) => one * 10n ** 20n))
    expectSame(qReproducibility(integerCells(far), 1e-20), qReproducibility(integerCells(near), 1))
  })

  it('does not exist where results do not differ or laboratories are too few', () => {
    expect(() => qOfCellMeans(integerCells([[1n], [1n], [1n]]), 1)).toThrow('All the values are equal.')
    expect(() => qOfCellMeans(integerCells([[1n], [2n]]), 1)).toThrow(NotComputable)
    expect(() => qRepeatability(integerCells([[1n], [2n], [3n]]), 1)).toThrow('No cell holds two results.')
  })
})
