import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { cellFigures } from '@/lib/statistics/explanations'
import { oneResultChanged } from '@/lib/statistics/one-result-changed'
import { analyseRows } from './analyse-rows'
import { randomSource } from './random-source'

const seed = 20261204

const near = (got: number, wanted: number, size: number): void =>
  expect(Math.abs(got - wanted)).toBeLessThanOrEqual(1e-6 * (Math.abs(wanted) + size))

describe('a cell after a change of one result', () => {
  it('has the figures of the changed results, or says that sums do not tell them', () => {
    const result = fc.record({
      value: fc.oneof(fc.double({ min: -20, max: 20, noNaN: true }), fc.constantFrom(0, 1, 1e9, -1e17)),
      group: fc.constantFrom('1', '2', '3'),
    })
    let told = 0
    fc.assert(
      fc.property(
        fc.array(result, { minLength: 2, maxLength: 9 }),
        fc.nat(),
        fc.option(fc.double({ min: -1e4, max: 1e4, noNaN: true })),
        (cell, choice, to) => {
          const index = choice % cell.length
          const figures = oneResultChanged(
            cell.map(({ value }) => value),
            cell.map(({ group }) => group),
          )(index, to)
          if (figures === null) return
          told += 1
          const changed = cell.flatMap((one, place) =>
            place !== index ? [one] : to === null ? [] : [{ ...one, value: to }],
          )
          const wanted = cellFigures(
            changed.map(({ value }) => value),
            changed.map(({ group }) => group),
          )
          expect([figures.n, figures.df]).toEqual([wanted.n, wanted.df])
          const size = Math.max(...changed.map(({ value }) => Math.abs(value))) * 1e-6
          near(figures.mean, wanted.mean, size)
          if (wanted.sd === undefined) expect(figures.sd).toBeUndefined()
          else near(figures.sd!, wanted.sd, size)
        },
      ),
      { seed, numRuns: 2000 },
    )
    // Mostly they do tell.
    expect(told).toBeGreaterThan(1000)
  })
})

// Tried one by one with all their results, the changes of such a cell took a dozen seconds and a gigabyte.
describe('a cell of thousands of results', () => {
  it('is explained like any other: one of them a thousand times too large', () => {
    const { uniform } = randomSource(seed)
    const rows = Array.from({ length: 8 }, (_, laboratory) =>
      Array.from({ length: laboratory === 1 ? 4000 : 3 }, (_, index) => ({
        laboratory: `L${laboratory}`,
        text: (laboratory === 1 && index === 1234 ? 10_000 : 9 + 2 * uniform()).toFixed(3),
      })),
    ).flat()
    const [first] = analyseRows(rows).materials[0]!.proposals!
    expect(first).toMatchObject({ laboratory: 'L1', kind: 'factorOneResult', detail: '0.001 × 10000.000' })
  }, 5_000)
})
