import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { builtInFormat, readNumberFormat, showDate, showNumber } from '@/lib/spreadsheet/number-format'

describe('readNumberFormat', () => {
  it.each([
    ['General', { kind: 'general' }],
    ['@', { kind: 'general' }],
    ['0', { kind: 'fixed', decimals: 0 }],
    ['0.00', { kind: 'fixed', decimals: 2 }],
    ['0.0##', { kind: 'fixed', decimals: 1 }],
    ['#,##0.000', { kind: 'fixed', decimals: 3 }],
    ['0.00" N/mm"', { kind: 'fixed', decimals: 2 }],
    ['0.0\\d', { kind: 'fixed', decimals: 1 }],
    ['[Red]0.00;[Blue]-0.000', { kind: 'fixed', decimals: 2 }],
    ['_-* #,##0.00_-;-* #,##0.00_-', { kind: 'fixed', decimals: 2 }],
    ['0.0%', { kind: 'percent', decimals: 1 }],
    ['0.00E+00', { kind: 'scientific', decimals: 2 }],
    ['# ?/?', { kind: 'general' }],
    ['yyyy-mm-dd', { kind: 'date' }],
    ['[$-409]d mmm yyyy', { kind: 'date' }],
    ['[h]:mm', { kind: 'date' }],
    ['h:mm AM/PM', { kind: 'date' }],
  ])('reads %s', (code, format) => {
    expect(readNumberFormat(code)).toEqual(format)
  })

  it('knows the formats that files name by number', () => {
    expect(builtInFormat(0)).toEqual({ kind: 'general' })
    expect(builtInFormat(2)).toEqual({ kind: 'fixed', decimals: 2 })
    expect(builtInFormat(10)).toEqual({ kind: 'percent', decimals: 2 })
    expect(builtInFormat(14)).toEqual({ kind: 'date' })
    expect(builtInFormat(49)).toEqual({ kind: 'general' })
  })

  it('stays quick on a code of 50 kB', () => {
    const startedAt = performance.now()
    for (const piece of ['[', '"', '0.', '\\', 'E+', '?']) readNumberFormat(piece.repeat(50_000))
    expect(performance.now() - startedAt).toBeLessThan(50)
  })
})

describe('showNumber', () => {
  const fixed = (decimals: number) => ({ kind: 'fixed' as const, decimals })

  it.each([
    ['1.1', fixed(2), '1.10'],
    ['1.1000000000000001', fixed(2), '1.10'],
    ['1.23456', fixed(2), '1.23456'],
    ['-0.5', fixed(3), '-0.500'],
    ['0', fixed(2), '0.00'],
    ['1200', fixed(1), '1200.0'],
    ['1200', { kind: 'general' as const }, '1200'],
    ['1E-3', { kind: 'general' as const }, '0.001'],
    ['1.5E+21', { kind: 'general' as const }, '1500000000000000000000'],
    ['0.123', { kind: 'percent' as const, decimals: 1 }, '12.3%'],
    ['0.1', { kind: 'percent' as const, decimals: 0 }, '10%'],
    ['0.0012', { kind: 'scientific' as const, decimals: 2 }, '1.20E-3'],
    ['1E+300', { kind: 'general' as const }, '1.0E300'],
  ])('shows %s as it stood in the cell', (raw, format, text) => {
    expect(showNumber(raw, format)).toBe(text)
  })

  it('gives back the same number, whatever the format adds', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), fc.nat(12), (value, decimals) => {
        const shown = showNumber(String(value), fixed(decimals))
        return Number(shown) === (value === 0 ? 0 : value)
      }),
      { seed: 27, numRuns: 500 },
    )
  })
})

describe('showDate', () => {
  // 44 197 is 1 January 2021 and 60 the day that never was; Office Open XML, part 1, 18.17.4 (from memory).
  it.each([
    ['44197', false, '2021-01-01'],
    ['44197.5', false, '2021-01-01 12:00:00'],
    ['61', false, '1900-03-01'],
    ['59', false, '1900-02-28'],
    ['0.25', false, '06:00:00'],
    ['0', true, '00:00:00'],
    ['42735', true, '2021-01-01'],
    ['-1', false, '-1'],
    ['99999999', false, '99999999'],
  ])('shows day %s (counted from 1904: %s)', (raw, from1904, text) => {
    expect(showDate(raw, from1904)).toBe(text)
  })
})
