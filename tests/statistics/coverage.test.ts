import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { coverageFaults, coveragePoints, simulate } from '@/tests/statistics/coverage-simulation'

/*
 * The shortened run. A share of 2,000 draws has a standard error of 0.5 points,
 * so each bound of 20,000 draws is widened by 1.5. The full run is `npm run
 * bench -- coverage`; its table stands beside this file.
 */
const DRAWS = 2000
const SLACK = 0.015

const points = coveragePoints()
/** Some of each group, the smallest and the most unequal designs among them. */
const DESIGNS = [
  '6 × 2',
  '6 × 2, 15 % missing',
  '12 × 3, 15 % missing',
  '2×6, 6×4',
  '1×4, 4×4',
  '2×9, 20×1',
  '8 × 2 × 2, 15 % missing',
  'staggered 8',
]

describe.each(DESIGNS)('95 %% intervals of %s', (design) => {
  it('hold the truth as often as they say', () => {
    const own = points.filter((point) => point.design === design)
    expect(own.length).toBeGreaterThan(2)
    // Of the six pairs of components, the nested designs take every other.
    const chosen = own.length > 3 ? own.filter((_, index) => index % 2 === 1) : own
    expect(
      chosen.flatMap((point) => simulate(point, DRAWS)).flatMap((row) => coverageFaults(row, SLACK)),
    ).toEqual([])
  })
})

describe('the full table', () => {
  const lines = readFileSync(join(import.meta.dirname, 'coverage.csv'), 'utf8')
    .split('\n')
    .filter((line) => line !== '' && !line.startsWith('#'))
    .slice(1)

  it('has a row for each point and quantity, and none out of bounds', () => {
    // Three quantities in each of 72, three and the rejected choice in 12, four in 66.
    expect(lines).toHaveLength(72 * 3 + 12 * 4 + 66 * 4)
    expect(lines.filter((line) => !line.endsWith(',yes'))).toEqual([])
  })
})
