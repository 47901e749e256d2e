import { describe, expect, it } from 'vitest'
import { readReportedValue, shortenText, type ReportedValue } from '@/lib/domain/reported-value'

/*
 * The expected readings are decided by hand from the house rules: a point is decimal unless the text or the
 * laboratory says otherwise, a comma is decimal unless it stands exactly where a thousands mark would, and
 * whatever has two readings is asked. Columns: text, read with no mark given, with a comma, with a point.
 * Notation: a plain number, `<` or `>` before it, '' for missing, `a ? b` for a question, `!code` for a fault.
 */
const corpus: [text: string, none: string, comma: string, point: string][] = [
  // Whole numbers and signs
  ['0', '0', '0', '0'],
  ['7', '7', '7', '7'],
  ['007', '7', '7', '7'],
  ['123456789', '123456789', '123456789', '123456789'],
  ['+5', '5', '5', '5'],
  ['-5', '-5', '-5', '-5'],
  ['\u22125', '-5', '-5', '-5'],
  ['\u20135', '-5', '-5', '-5'],
  ['\uff0d5', '-5', '-5', '-5'],
  ['- 5', '-5', '-5', '-5'],
  ['-0', '0', '0', '0'],
  ['-0.00', '0.00', '!decimal-mark', '0.00'],
  // The digits reported stay
  ['1.10', '1.10', '!decimal-mark', '1.10'],
  ['1,10', '1.10', '1.10', '!decimal-mark'],
  ['25.000', '25.000', '25000', '25.000'],
  ['.5', '0.5', '!decimal-mark', '0.5'],
  [',5', '0.5', '0.5', '!decimal-mark'],
  ['  12.3  ', '12.3', '!decimal-mark', '12.3'],
  ['\u00a012.3\u202f', '12.3', '!decimal-mark', '12.3'],
  ['\ufeff12,30\u200b', '12.30', '12.30', '!decimal-mark'],
  ['-12,345', '-12.345 ? -12345', '-12.345', '-12345'],
  // One comma
  ['1,5', '1.5', '1.5', '!decimal-mark'],
  ['1,23', '1.23', '1.23', '!decimal-mark'],
  ['1,234', '1.234 ? 1234', '1.234', '1234'],
  ['12,345', '12.345 ? 12345', '12.345', '12345'],
  ['123,456', '123.456 ? 123456', '123.456', '123456'],
  ['1,000', '1.000 ? 1000', '1.000', '1000'],
  ['1234,567', '1234.567', '1234.567', '!decimal-mark'],
  ['1,2345', '1.2345', '1.2345', '!decimal-mark'],
  ['0,123', '0.123', '0.123', '!decimal-mark'],
  [',234', '0.234', '0.234', '!decimal-mark'],
  // One point
  ['1.234', '1.234', '1234', '1.234'],
  ['1.2345', '1.2345', '!decimal-mark', '1.2345'],
  ['0.123', '0.123', '!decimal-mark', '0.123'],
  // Thousands
  ['1,234,567', '1234567', '!grouping', '1234567'],
  ['1.234.567', '1234567', '1234567', '!grouping'],
  ['1,234.5', '1234.5', '!decimal-mark', '1234.5'],
  ['1.234,5', '1234.5', '1234.5', '!decimal-mark'],
  ['1.234.567,8', '1234567.8', '1234567.8', '!decimal-mark'],
  ['1,234,567.80', '1234567.80', '!decimal-mark', '1234567.80'],
  ['1.234,567', '1234.567', '1234.567', '!decimal-mark'],
  ['1,234.567', '1234.567', '!decimal-mark', '1234.567'],
  ['1 234', '1234', '1234', '1234'],
  ['1\u2009234,5', '1234.5', '1234.5', '!decimal-mark'],
  ['1\u202f234\u202f567.25', '1234567.25', '!decimal-mark', '1234567.25'],
  ['1\u00a0234,567', '1234.567', '1234.567', '!decimal-mark'],
  ["12'345.6", '12345.6', '!decimal-mark', '12345.6'],
  ['12\u2019345', '12345', '12345', '12345'],
  ['12,34,567', '!grouping', '!grouping', '!decimal-mark'],
  ['1,23,4', '!grouping', '!grouping', '!decimal-mark'],
  ['12 34', '!grouping', '!grouping', '!grouping'],
  ['1234,567,890', '!grouping', '!grouping', '!decimal-mark'],
  ["1 234'567", '!grouping', '!grouping', '!grouping'],
  ['0 123', '!grouping', '!grouping', '!grouping'],
  ['1.2.3', '!grouping', '!decimal-mark', '!grouping'],
  // Exponents
  ['1.5e3', '1500', '!decimal-mark', '1500'],
  ['1,50E-3', '0.00150', '0.00150', '!decimal-mark'],
  ['1.2345e2', '123.45', '!decimal-mark', '123.45'],
  ['1.5\u00d710^-2', '0.015', '!decimal-mark', '0.015'],
  ['2 x 10^3', '2000', '2000', '2000'],
  ['1,234e3', '1234 ? 1234000', '1234', '1234000'],
  ['1e300', '!too-many-digits', '!too-many-digits', '!too-many-digits'],
  ['1e-300', '!too-many-digits', '!too-many-digits', '!too-many-digits'],
  ['1e39', `1${'0'.repeat(39)}`, `1${'0'.repeat(39)}`, `1${'0'.repeat(39)}`],
  ['1e40', '!too-many-digits', '!too-many-digits', '!too-many-digits'],
  ['1e9999999999', '!unit', '!unit', '!unit'],
  // Censored
  ['<0.5', '<0.5', '!decimal-mark', '<0.5'],
  ['< 0,50', '<0.50', '<0.50', '!decimal-mark'],
  ['> 99', '>99', '>99', '>99'],
  ['<1,234', '<1.234 ? <1234', '<1.234', '<1234'],
  ['\u22640.5', '!comparison', '!comparison', '!comparison'],
  ['>=3', '!comparison', '!comparison', '!comparison'],
  ['<<3', '!comparison', '!comparison', '!comparison'],
  ['~3', '!comparison', '!comparison', '!comparison'],
  ['<', '!mark-without-number', '!mark-without-number', '!mark-without-number'],
  ['<LOD', '!word', '!word', '!word'],
  // Nothing
  ['', '', '', ''],
  [' \t\u00a0\u2003 ', '', '', ''],
  ['\u200b', '', '', ''],
  // Not a value
  ['-', '!dash', '!dash', '!dash'],
  ['\u2014', '!dash', '!dash', '!dash'],
  ['--', '!dash', '!dash', '!dash'],
  ['n/a', '!word', '!word', '!word'],
  ['n.d.', '!word', '!word', '!word'],
  ['nd', '!word', '!word', '!word'],
  ['NaN', '!word', '!word', '!word'],
  ['Infinity', '!word', '!word', '!word'],
  ['twelve', '!word', '!word', '!word'],
  ['?', '!not-a-number', '!not-a-number', '!not-a-number'],
  ['(5)', '!not-a-number', '!not-a-number', '!not-a-number'],
  ['5.', '!unfinished', '!decimal-mark', '!unfinished'],
  ['5,', '!unfinished', '!unfinished', '!decimal-mark'],
  ['12.3 N', '!unit', '!unit', '!unit'],
  ['12%', '!unit', '!unit', '!unit'],
  ['5 \u00b0C', '!unit', '!unit', '!unit'],
  ['3 N/mm2', '!unit', '!unit', '!unit'],
  ['0x10', '!unit', '!unit', '!unit'],
  ['5 \u00b1 0.2', '!uncertainty', '!uncertainty', '!uncertainty'],
  ['1-2', '!not-a-number', '!not-a-number', '!not-a-number'],
  ['5 or 6', '!not-a-number', '!not-a-number', '!not-a-number'],
  ['5-', '!not-a-number', '!not-a-number', '!not-a-number'],
  ['2026-12-01', '!not-a-number', '!not-a-number', '!not-a-number'],
  ['1;2', '!several-values', '!several-values', '!several-values'],
  ['1\t2', '!several-values', '!several-values', '!several-values'],
  ['1\n2', '!several-values', '!several-values', '!several-values'],
  ['=1+1', '!formula', '!formula', '!formula'],
  ['\u0665', '!not-a-number', '!not-a-number', '!not-a-number'],
  ['1\u202e2', '!not-a-number', '!not-a-number', '!not-a-number'],
  ['$&', '!not-a-number', '!not-a-number', '!not-a-number'],
]

function inShort(value: ReportedValue): string {
  switch (value.kind) {
    case 'number':
      return value.decimal
    case 'censored':
      return value.mark + value.decimal
    case 'missing':
      return ''
    case 'ambiguous':
      return value.readings.join(' ? ')
    case 'fault':
      return `!${value.code}`
  }
}

describe('readReportedValue', () => {
  it('reads each text of the corpus as the house rules say, with and without a decimal mark', () => {
    const read = corpus.map(([text]) => [
      text,
      inShort(readReportedValue(text)),
      inShort(readReportedValue(text, { decimalMark: 'comma' })),
      inShort(readReportedValue(text, { decimalMark: 'point' })),
    ])
    expect(read).toEqual(corpus)
  })

  it('reads back its own answers and the readings it offers as what they are', () => {
    for (const [, none] of corpus) {
      if (none === '' || none.startsWith('!')) continue
      for (const answer of none.split(' ? ')) expect(inShort(readReportedValue(answer))).toBe(answer)
    }
  })

  it('keeps every digit of an exact decimal through an exponent, at 40 digits', () => {
    const digits = '1234567890123456789012345678901234567890'
    expect(readReportedValue(`0.${digits.slice(0, 39)}`)).toEqual({
      kind: 'number',
      decimal: `0.${digits.slice(0, 39)}`,
    })
    expect(readReportedValue(`${digits}e-20`)).toEqual({
      kind: 'number',
      decimal: '12345678901234567890.12345678901234567890',
    })
    expect(readReportedValue(`${digits}1`)).toMatchObject({ kind: 'fault', code: 'too-many-digits' })
  })

  it('names the unit that follows a number and shows what to write', () => {
    expect(readReportedValue('12,30 kN')).toEqual({
      kind: 'fault',
      code: 'unit',
      found: '12,30 kN',
      unit: 'kN',
      message: '“12,30 kN” ends in “kN”. Leave the unit out, it is already set: write 12,30.',
    })
  })

  it('asks about a comma before three digits, naming both readings', () => {
    expect(readReportedValue(' 1,234 ')).toEqual({
      kind: 'ambiguous',
      found: '1,234',
      readings: ['1.234', '1234'],
      message: '“1,234” can be read as 1.234 or as 1234. Say which is meant.',
    })
  })

  it('says < where ≤ was written, and > where ≥ was', () => {
    expect(readReportedValue('≤ 3')).toMatchObject({ message: expect.stringContaining('Use < alone') })
    expect(readReportedValue('>= 3')).toMatchObject({ message: expect.stringContaining('Use > alone') })
  })

  it('repeats what was typed letter for letter, replacement patterns too', () => {
    expect(readReportedValue("$& $1 $'")).toMatchObject({ message: expect.stringContaining("“$& $1 $'”") })
  })

  it('shortens what it repeats, so that a message stays a sentence', () => {
    const answer = readReportedValue('x'.repeat(90))
    expect(answer).toMatchObject({ kind: 'fault', code: 'word', found: `${'x'.repeat(39)}…` })
  })

  it('never cuts a character in two', () => {
    expect(shortenText('ab\u{1f9f5}cd', 4)).toBe('ab…')
    expect(shortenText('ab\u{1f9f5}cd', 5)).toBe('ab\u{1f9f5}…')
    expect(shortenText('ab\u{1f9f5}cd', 6)).toBe('ab\u{1f9f5}cd')
  })

  it.each([
    ['digits', '1'.repeat(50_000)],
    ['spaces inside', `1${' '.repeat(49_998)}x`],
    ['commas', '1,'.repeat(25_000)],
    ['groups', '1,234'.repeat(10_000)],
    ['groups without an end', `${'123 '.repeat(12_500)}!`],
    ['signs', '-'.repeat(50_000)],
    ['marks', '<'.repeat(50_000)],
    ['exponents', '1e'.repeat(25_000)],
    ['spaces around', ' '.repeat(50_000)],
    ['spaces and a letter', `${' '.repeat(49_999)}x`],
    ['letters', `${'N '.repeat(25_000)}1`],
    ['invisible characters', '\u200b'.repeat(50_000)],
  ])('answers 50 kB of %s within 50 ms', (_, text) => {
    const startedAt = performance.now()
    const answer = readReportedValue(text)
    expect(performance.now() - startedAt).toBeLessThan(50)
    expect(answer.kind).toMatch(/^(fault|missing)$/)
  })
})
