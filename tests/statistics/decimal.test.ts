import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  centreExactly,
  compareDecimals,
  decimalToNumber,
  decimalToText,
  parseDecimal,
  parseDecimals,
  roundHalfEvenAtPlace,
  subtractDecimals,
  toCommonScale,
} from '@/lib/statistics/decimal'
import { NotComputable } from '@/lib/statistics/not-computable'

const seed = 20261201

/** All the digits of a double, which are finitely many. */
function decimalOfDouble(x: number): string {
  let [mantissa, halvings] = [x, 0]
  while (!Number.isInteger(mantissa)) {
    mantissa *= 2
    halvings += 1
  }
  return decimalToText({ units: BigInt(mantissa) * 5n ** BigInt(halvings), scale: halvings })
}

describe('parseDecimal', () => {
  it.each([
    ['0', 0n, 0],
    ['12.50', 1250n, 2],
    ['+.5', 5n, 1],
    ['5.', 5n, 0],
    ['-0.010', -10n, 3],
    ['\u22127.25', -725n, 2],
    ['1e-300', 1n, 300],
    ['1.5E+3', 15n, -2],
    ['2e\u22123', 2n, 3],
    ['1000000000000.4', 10000000000004n, 1],
  ])('reads %s with its resolution', (text, units, scale) => {
    expect(parseDecimal(text)).toEqual({ units, scale })
  })

  it.each([
    '',
    '.',
    '-',
    '1,5',
    '1.2.3',
    ' 1',
    '1 ',
    '0x10',
    '1e',
    'e5',
    'NaN',
    'Infinity',
    '1_0',
    '--1',
    '<0.5',
  ])('refuses "%s"', (text) => {
    expect(() => parseDecimal(text)).toThrow(RangeError)
  })

  it('refuses a number whose digits would fill the memory', () => {
    expect(() => parseDecimal('1e999999999')).toThrow(RangeError)
    expect(() => parseDecimal('1e-2001')).toThrow(RangeError)
    expect(() => parseDecimal('1'.repeat(2001))).toThrow(RangeError)
  })

  it('gives back any finite double from its shortest text', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (x) => {
        expect(decimalToNumber(parseDecimal(String(x)))).toBe(x === 0 ? 0 : x)
      }),
      { seed },
    )
  })
})

describe('differences and order of decimals', () => {
  it('subtracts exactly where doubles do not', () => {
    expect(subtractDecimals(parseDecimal('0.3'), parseDecimal('0.10'))).toEqual({ units: 20n, scale: 2 })
  })

  it('finds 1.50 and 1.5 equal and orders by value', () => {
    expect(compareDecimals(parseDecimal('1.50'), parseDecimal('1.5'))).toBe(0)
    expect(compareDecimals(parseDecimal('-2'), parseDecimal('1e-9'))).toBe(-1)
    expect(compareDecimals(parseDecimal('1e3'), parseDecimal('999.9'))).toBe(1)
  })

  it('brings values to the finest of their units', () => {
    const decimals = ['1e2', '0.05', '-3.0'].map(parseDecimal)
    expect(toCommonScale(decimals)).toEqual({ units: Float64Array.of(10000, 5, -300), scale: 2 })
  })

  it('writes plain digits', () => {
    expect(decimalToText({ units: -5n, scale: 3 })).toBe('-0.005')
    expect(decimalToText({ units: 12n, scale: -2 })).toBe('1200')
  })
})

describe('centreExactly', () => {
  it('leaves no trace of an offset of a million million', () => {
    const { offset, deviations, restore } = centreExactly([
      '1000000000000.4',
      '1000000000000.3',
      '1000000000000.5',
    ])
    expect([...deviations]).toEqual([0, -0.1, 0.1])
    expect(decimalToText(offset)).toBe('1000000000000.4')
    expect(restore(0.1)).toBe(1000000000000.5)
  })

  it('is exact beyond the range of whole doubles, where the quick way ends', () => {
    const { deviations } = centreExactly(['9007199254740993.125', '9007199254740992', '9007199254740994.5'])
    expect([...deviations]).toEqual([0, -1.125, 1.375])
  })

  it('keeps 1e-300 and 1e300 apart', () => {
    expect([...centreExactly(['1e-300', '3e-300', '2e-300']).deviations]).toEqual([-1e-300, 1e-300, 0])
    expect([...centreExactly(['1e300', '3e300', '2e300']).deviations]).toEqual([-1e300, 1e300, 0])
    const far = centreExactly(['1e300', '1e-300', '0'])
    expect([...far.deviations]).toEqual([1e300, 0, -1e-300])
    expect(far.restore(1e300)).toBe(1e300)
  })

  it('gives the double nearest to the exact difference, by the quick way and the slow', () => {
    const decimal = fc.tuple(
      fc.bigInt({ min: -(10n ** 17n), max: 10n ** 17n }),
      fc.integer({ min: -3, max: 24 }),
    )
    fc.assert(
      fc.property(fc.array(decimal, { minLength: 1, maxLength: 12 }), (values) => {
        const texts = values.map(([units, scale]) => decimalToText({ units, scale }))
        const { offset, deviations, restore } = centreExactly(texts)
        texts.forEach((text, index) => {
          // The naive twin: the difference written out in digits and read as a double.
          const exact = Number(decimalToText(subtractDecimals(parseDecimal(text), offset)))
          expect(deviations[index]).toBe(exact)
        })
        expect(restore(0)).toBe(decimalToNumber(offset))
      }),
      { seed },
    )
  })

  it('restores offset and deviation with a single rounding', () => {
    // 1 + 2^-53 lies half way and goes to the even 1; a further 2^-80 must tip it over.
    const { restore } = centreExactly(['1'])
    expect(restore(2 ** -53)).toBe(1)
    expect(restore(2 ** -53 + 2 ** -80)).toBe(1 + 2 ** -52)
    // 0.1 (exact) + 0.2 (the double, a little above) is nearest to 0.3, where 0.1 + 0.2 in doubles is 0.30000000000000004.
    expect(centreExactly(['0.1']).restore(0.2)).toBe(0.3)
  })

  it('restores any sum as exact decimals would, by the quick way and the slow', () => {
    const offset = fc.tuple(
      fc.bigInt({ min: -(10n ** 17n), max: 10n ** 17n }),
      fc.integer({ min: -3, max: 24 }),
    )
    // Half a last place of a number about as large as the offset, give or take a little: ties and all but ties.
    const deviation = fc.oneof(
      fc.double({ noNaN: true, noDefaultInfinity: true }),
      fc
        .tuple(
          fc.integer({ min: -3, max: 3 }),
          fc.integer({ min: -60, max: 60 }),
          fc.double({ min: -1, max: 1, noNaN: true }),
        )
        .map(([halves, power, rest]) => halves * 2 ** power + rest * 2 ** (power - 50)),
    )
    fc.assert(
      fc.property(offset, deviation, ([units, scale], x) => {
        const { restore } = centreExactly([decimalToText({ units, scale })])
        const exact = subtractDecimals({ units, scale }, parseDecimal(decimalOfDouble(-x)))
        expect(restore(x)).toBe(decimalToNumber(exact))
      }),
      { seed, numRuns: 2000 },
    )
  })

  it('refuses no results, and differences that no double holds', () => {
    expect(() => centreExactly([])).toThrow(NotComputable)
    expect(() => centreExactly(['1.7e308', '-1.7e308'])).toThrow(NotComputable)
  })
})

describe('parseDecimals', () => {
  it('reads many texts as one by one, the short and plain ones as any others', () => {
    const plain = fc
      .tuple(fc.integer({ min: -99999, max: 99999 }), fc.integer({ min: 0, max: 9 }))
      .map(([units, scale]) => decimalToText({ units: BigInt(units), scale }))
    const wild = fc.constantFrom(
      '+.5',
      '5.',
      '-0.0',
      '-0',
      '1e3',
      '\u22121.25',
      '123456789012345678',
      '1e-30',
      '007.10',
    )
    fc.assert(
      fc.property(fc.array(fc.oneof({ weight: 9, arbitrary: plain }, wild), { maxLength: 8 }), (texts) => {
        const { units, scale } = parseDecimals(texts)
        const one = toCommonScale(texts.map(parseDecimal))
        expect(scale).toBe(one.scale)
        expect(Array.from(units, String)).toEqual(Array.from(one.units, String))
        expect([...units].some((unit) => Object.is(unit, -0))).toBe(false)
      }),
      { seed, numRuns: 500 },
    )
  })

  it.each(['', '1,5', '.', '-', '1.2.3', '--1'])('refuses "%s" among others', (text) => {
    expect(() => parseDecimals(['1.5', text])).toThrow(RangeError)
  })
})

describe('roundHalfEvenAtPlace', () => {
  it.each([
    [2.675, -2, '2.68'],
    [2.665, -2, '2.66'],
    [0.0996, -3, '0.100'],
    [9.96, -1, '10.0'],
    [1.996, -2, '2.00'],
    [-0.125, -2, '-0.12'],
    [-0.004, -2, '0.00'],
    [1250, 2, '1200'],
    [1350, 2, '1400'],
    [0.5, 0, '0'],
    [1.5, 0, '2'],
    [4, -3, '4.000'],
    [1e21, 0, '1000000000000000000000'],
    [1.5e-7, -8, '0.00000015'],
    [4, 2, '0'],
  ])('writes %d at 10^%d as %s', (x, place, text) => {
    expect(roundHalfEvenAtPlace(x, place)).toBe(text)
  })

  it('lies within half a unit of what it rounds', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -1e6, max: 1e6, noNaN: true }),
        fc.integer({ min: -6, max: 3 }),
        (x, place) => {
          const rounded = Number(roundHalfEvenAtPlace(x, place))
          expect(Math.abs(rounded - x)).toBeLessThanOrEqual(0.5 * 10 ** place * (1 + 1e-9))
        },
      ),
      { seed },
    )
  })

  it('refuses what is no number', () => {
    expect(() => roundHalfEvenAtPlace(NaN, 0)).toThrow(RangeError)
    expect(() => roundHalfEvenAtPlace(1, 0.5)).toThrow(RangeError)
  })
})
