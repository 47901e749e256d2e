import { describe, expect, it } from 'vitest'
import { otherUnitsThan, unitFactor } from '@/lib/statistics/units'

describe('the factor between two units', () => {
  it.each([
    ['g/L', 'mg/dL', 100],
    ['mg/L', 'mg/dL', 0.1],
    ['umol/L', 'mmol/L', 0.001],
    ['cg/g', 'mg/kg', 10_000],
    // The atmosphere and the inch are defined by these numbers.
    ['atm', 'kPa', 101.325],
    ['in', 'mm', 25.4],
  ])('takes %s to %s exactly', (from, to, factor) => {
    expect(unitFactor(from, to)).toBe(factor)
  })

  it('does not exist between kinds', () => {
    expect(() => unitFactor('mg/L', 'mmol/L')).toThrow('units of different kinds')
  })
})

describe('the other units', () => {
  it('are of the same kind, the own one and other names for one left out', () => {
    expect(otherUnitsThan('mmol/L')).toEqual([
      { name: 'mol/L', factor: 1000 },
      { name: 'umol/L', factor: 0.001 },
      { name: 'nmol/L', factor: 1e-6 },
    ])
    expect(otherUnitsThan('g/L').map(({ name }) => name)).not.toContain('kg/m^3')
  })

  it.each(['', 'x', '2 kg', 'zeros(3)', 'kg;1', 'import', 'm'.repeat(50)])(
    'do not exist for "%s"',
    (text) => {
      expect(() => otherUnitsThan(text)).toThrow(RangeError)
    },
  )
})
