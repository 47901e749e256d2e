import { describe, expect, test } from 'vitest'
import { listCellsApart } from '@/app/(work)/studies/[studyId]/scrutiny/list-cells-apart'
import type { Proposal } from '@/lib/statistics'
import { analyseRows, type TestRow } from '../statistics/analyse-rows'

// Eight laboratories, two results a cell, a few units apart; M25's results for B lie far above.
const rows = ['A', 'B'].flatMap((material, level) =>
  ['M21', 'M22', 'M23', 'M24', 'M25', 'M26', 'M27', 'M28'].flatMap((laboratory, place): TestRow[] => {
    const apart = laboratory === 'M25' ? 40 + 13 * level : 0
    const middle = 300 + 100 * level + ((place * 5) % 8) + apart
    return [middle, middle + 1 + (place % 2)].map((value) => ({ laboratory, material, text: String(value) }))
  }),
)
const analysed = analyseRows(rows)

const state = { h: 0, k: 1, surprise: 1 }
const proposal = (score: number, changes: Partial<Proposal> = {}): Proposal => ({
  laboratory: 'M25',
  kind: 'digits',
  detail: String(score),
  cells: ['B'],
  before: state,
  after: state,
  price: 1,
  score,
  ...changes,
})

function withProposals(byMaterial: Readonly<Record<string, Proposal[]>>) {
  const materials = analysed.materials.map((one) => ({ ...one, proposals: byMaterial[one.material] ?? [] }))
  return listCellsApart({ materials }).map(({ material, explanations, isUnexplained }) => ({
    material,
    told: explanations.map(({ likelihood, proposal: { score } }) => `${likelihood} ${score}`),
    isUnexplained,
  }))
}

describe('the cells that lie apart', () => {
  test('bring all their explanations, each said to be as likely as the one above or less', () => {
    const found = withProposals({ B: [proposal(9), proposal(8.8), proposal(8.6)], A: [] })
    expect(found.find(({ material }) => material === 'B')!.told).toEqual([
      'likeliest 9',
      'equal 8.8',
      'less 8.6',
    ])
  })

  test('have an explanation of several of them told once, at the cell furthest out', () => {
    const common = proposal(9, { kind: 'offset', detail: '45', cells: ['A', 'B'] })
    const found = withProposals({ A: [common, proposal(5)], B: [common] })
    expect(found.map(({ material, told }) => [material, told])).toEqual([
      ['B', ['likeliest 9']],
      ['A', []],
    ])
  })

  test('say where an explanation was looked for in vain', () => {
    const found = withProposals({ A: [], B: [proposal(9)] })
    expect(found.map(({ material, isUnexplained }) => [material, isUnexplained]).sort()).toEqual([
      ['A', true],
      ['B', false],
    ])
    const materials = analysed.materials.map((one) => ({ ...one, proposals: null }))
    expect(listCellsApart({ materials }).map(({ isUnexplained }) => isUnexplained)).toEqual([false, false])
  })
})
