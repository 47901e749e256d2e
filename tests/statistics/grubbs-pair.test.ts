import { describe, expect, it } from 'vitest'
import { grubbsPairLowerTail } from '@/lib/statistics/distributions/grubbs-pair-ratio'
import { grubbsPairCritical } from '@/lib/statistics/grubbs-pair'
import { NotComputable } from '@/lib/statistics/not-computable'

describe('the pair test', () => {
  it('is made for 1000 laboratories', () => {
    const critical = grubbsPairCritical(1000, 0.05)
    // Two values of 1000 take a few hundredths of the sum of squares with them, never a tenth.
    expect(critical).toBeGreaterThan(0.9)
    expect(critical).toBeLessThan(1)
    expect(2 * grubbsPairLowerTail(critical, 1000)).toBeCloseTo(0.05, 9)
  })

  it('says from how many laboratories on there is none, and how many there are', () => {
    const words =
      'The exact distribution behind the pair tests is made for up to 1000 laboratories; these are 1001.'
    expect(() => grubbsPairCritical(1001, 0.05)).toThrow(new NotComputable('too-many-laboratories', words))
    expect(() => grubbsPairLowerTail(0.5, 1001)).toThrow(RangeError)
  })
})
