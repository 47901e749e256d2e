import { describe, expect, it } from 'vitest'
import { flaggedCells } from '@/lib/statistics/document/flagged-cells'
import { analyseRows, rowsOf } from './analyse-rows'

function grubbsOf(means: readonly string[]) {
  const cells = Object.fromEntries(means.map((text, index) => [`L${index + 1}`, text]))
  const document = analyseRows(rowsOf(cells))
  return document.materials[0]!.grubbs
}

/** Eight laboratories whose last lies 2 above the others. */
const ONE_HIGH = ['0.1', '-0.1', '0.2', '-0.2', '0.05', '-0.05', '0.15', '2']

/** One far above, one below by less. */
const TWO_ENDS = ['-1', ...ONE_HIGH.slice(0, -1), '10']

describe('the order of Grubbs’ tests', () => {
  it('proposes the one laboratory beyond 1 % and does not consult the pairs that would drag in its neighbour', () => {
    const { high, low, pairHigh, proposed, pairsConsulted } = grubbsOf(ONE_HIGH)
    expect(high.level).toBe('outlier')
    expect(low.level).toBe('none')
    // The pair test has a level of its own, for its own sake.
    expect(pairHigh).toMatchObject({ level: 'outlier', laboratories: ['L3', 'L8'] })
    expect(pairsConsulted).toBe(false)
    expect(proposed).toEqual([{ laboratories: ['L8'], test: 'high', level: 'outlier' }])
  })

  it('sets that mean aside in thought and tests the other end of those that remain', () => {
    const { low, proposed, pairsConsulted } = grubbsOf(TWO_ENDS)
    // Hidden behind the first while both are there.
    expect(low.level).toBe('none')
    expect(pairsConsulted).toBe(false)
    expect(proposed).toEqual([
      { laboratories: ['L9'], test: 'high', level: 'outlier' },
      { laboratories: ['L1'], test: 'low', level: 'outlier' },
    ])
  })

  it('begins at the low end where that is the one beyond 1 %', () => {
    const mirrored = TWO_ENDS.map((text) => (text.startsWith('-') ? text.slice(1) : `-${text}`))
    expect(grubbsOf(mirrored).proposed).toEqual([
      { laboratories: ['L9'], test: 'low', level: 'outlier' },
      { laboratories: ['L1'], test: 'high', level: 'outlier' },
    ])
  })

  it('consults the pairs where neither end is beyond 1 % by itself', () => {
    const { high, proposed, pairsConsulted } = grubbsOf([
      '0.1',
      '-0.1',
      '0.2',
      '-0.2',
      '0.05',
      '-0.05',
      '2',
      '2.1',
    ])
    expect(high.level).toBe('none')
    expect(pairsConsulted).toBe(true)
    expect(proposed).toEqual([{ laboratories: ['L7', 'L8'], test: 'pairHigh', level: 'outlier' }])
  })

  it('proposes nothing where the laboratories agree, and where there is no test', () => {
    expect(grubbsOf(['1', '2', '3', '4', '5'])).toMatchObject({ proposed: [], pairsConsulted: true })
    expect(grubbsOf(['1', '2'])).toMatchObject({ proposed: [], pairsConsulted: false })
    expect(grubbsOf(['1', '2', '3'])).toMatchObject({ proposed: [], pairsConsulted: false })
  })

  it('decides which cells are flagged: a neighbour that the pair alone would drag in is left in peace', () => {
    const cells = Object.fromEntries(ONE_HIGH.map((text, index) => [`L${index + 1}`, text]))
    expect(flaggedCells(analyseRows(rowsOf(cells)).materials[0]!)).toEqual(['L8'])
  })
})
