import { describe, expect, it } from 'vitest'
import { readPlanAssumptions } from '@/lib/domain/read-plan-assumptions'

describe('the assumptions of a plan', () => {
  it('stand at equal shares until something is typed', () => {
    expect(readPlanAssumptions({}, 1)).toEqual({
      assumptions: { ratio: 2, shares: [0.5], within: 0.3 },
      texts: { ratio: '2', 'share.0': '50', within: '30' },
      errors: {},
    })
    expect(readPlanAssumptions({}, 2).assumptions.shares).toEqual([0.33, 0.33])
    expect(readPlanAssumptions({}, 0).assumptions.shares).toEqual([])
  })

  it('are read with a decimal point or comma', () => {
    const query = { ratio: '1,5', 'share.0': ' 12.5 ', within: '25' }
    expect(readPlanAssumptions(query, 1)).toEqual({
      assumptions: { ratio: 1.5, shares: [0.125], within: 0.25 },
      texts: { ratio: '1,5', 'share.0': '12.5', within: '25' },
      errors: {},
    })
  })

  it.each(['', '0.5', '101', '1e1', '-2', 'two', '9'.repeat(400)])(
    'keep %j as typed and assume 2 in its place',
    (ratio) => {
      const { assumptions: read, texts, errors } = readPlanAssumptions({ ratio }, 0)
      expect(read.ratio).toBe(2)
      expect(texts['ratio']).toBe(ratio)
      expect(errors['ratio']).toBe('Give a number from 1 to 100; until then 2 is assumed.')
    },
  )

  it('do not share out more than there is', () => {
    const { assumptions: read, errors } = readPlanAssumptions({ 'share.0': '60', 'share.1': '41' }, 2)
    expect(read.shares).toEqual([0.33, 0.33])
    expect(errors).toEqual({ 'share.1': 'The shares come to more than 100 %; until then each is 33.' })
    expect(readPlanAssumptions({ 'share.0': '60', 'share.1': '40' }, 2).errors).toEqual({})
  })

  it('take no list for an answer', () => {
    expect(readPlanAssumptions({ ratio: ['3', '4'] }, 0).assumptions.ratio).toBe(2)
  })
})
