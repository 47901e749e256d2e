import { describe, expect, test } from 'vitest'
import { describeProposal } from '@/app/ui/analysis/describe-proposal'
import type { Proposal } from '@/lib/statistics/analysis-document'

const state = { h: 0.5, k: null, surprise: 1 }
const proposal = (changes: Partial<Proposal>): Proposal => ({
  laboratory: 'M23',
  kind: 'digits',
  detail: '451 → 415',
  cells: ['coir'],
  before: { h: 3.25, k: null, surprise: 9.04 },
  after: state,
  price: 1,
  score: 3,
  ...changes,
})

describe('an explanation in words', () => {
  test('asks a question and says what would follow', () => {
    expect(describeProposal(proposal({}), 'N')).toBe(
      'Were two digits exchanged? Take 451 → 415. Corrected so, the cell would fit the others: h\u00a0=\u00a00.500 instead of 3.250, surprise\u00a01.0 instead of 9.0.',
    )
  })

  test('says on which side a common amount lies, without a sign', () => {
    const cells = ['a', 'b', 'c']
    expect(describeProposal(proposal({ kind: 'offset', detail: '-1.5', cells }), 'N')).toContain(
      '1.5\u00a0N below those of the others',
    )
    expect(describeProposal(proposal({ kind: 'offset', detail: '1.5', cells }), 'N')).toContain(
      '1.5\u00a0N above those of the others',
    )
  })

  test('writes a negative result with a real minus sign', () => {
    expect(describeProposal(proposal({ kind: 'oneApart', detail: '-4.1' }), 'N')).toContain('\u22124.1')
  })

  test('says whether materials or measurands were exchanged', () => {
    const exchange = { kind: 'exchange' as const, detail: 'C ↔ D' }
    expect(describeProposal(proposal({ ...exchange, cells: ['C', 'D'] }), 'N')).toContain('two materials')
    expect(describeProposal(proposal({ ...exchange, cells: ['coir'] }), 'N')).toContain('two measurands')
  })

  test('names no figure that could not be computed', () => {
    const words = describeProposal(proposal({ after: { h: null, k: null, surprise: null } }), 'N')
    expect(words).toMatch(/fit the others\.$/)
  })
})
