import { describe, expect, it } from 'vitest'
import { formatFigure } from '@/app/ui/primitives/format-figure'

describe('formatFigure', () => {
  it.each([
    ['-0.50', '\u22120.50'],
    ['412', '412'],
    ['1234.5', '1\u202f234.5'],
    ['-12345678.00', '\u221212\u202f345\u202f678.00'],
    ['0.0001234', '0.0001234'],
    ['+3.10', '+3.10'],
    ['\u22124', '\u22124'],
    ['<0.05', '<\u202f0.05'],
    ['< 1200', '<\u202f1\u202f200'],
    ['1.5e-7', '1.5e\u22127'],
  ])('prints %s as %s', (reported, printed) => {
    expect(formatFigure(reported)).toBe(printed)
  })

  it.each(['', 'not tested', '4,10', '1-2', '12 N', 'Infinity'])(
    'leaves %j, which is no decimal number, as it was',
    (text) => {
      expect(formatFigure(text)).toBe(text)
    },
  )
})
