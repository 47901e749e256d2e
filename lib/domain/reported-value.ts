/*
 * One reader for every value a laboratory reports, whether it was typed on screen, sent by a program or
 * found in a file: the same text has the same meaning everywhere. It keeps the digits as reported, because
 * the resolution of a result is part of the result, and it asks rather than guesses where two readings are
 * open.
 */

export type DecimalMark = 'comma' | 'point'

export type ReportedValue =
  | { kind: 'number'; decimal: string }
  | { kind: 'censored'; mark: '<' | '>'; decimal: string }
  | { kind: 'missing' }
  /** The readings are texts that, read again without a decimal mark, are no longer ambiguous. */
  | { kind: 'ambiguous'; found: string; readings: readonly [string, string]; message: string }
  /** `unit` is the text that followed the number, so that a caller who knows the right unit can compare. */
  | { kind: 'fault'; code: ReportedValueFault; found: string; message: string; unit?: string }

export type ReportedValueFault =
  | 'too-long'
  | 'too-many-digits'
  | 'several-values'
  | 'formula'
  | 'comparison'
  | 'mark-without-number'
  | 'dash'
  | 'word'
  | 'unit'
  | 'uncertainty'
  | 'unfinished'
  | 'decimal-mark'
  | 'grouping'
  | 'not-a-number'

/** No measurement needs more; beyond this, padding an exponent would only invent digits. */
const mostDigits = 40

/** Checked before anything else looks at the text, so that no later pattern meets a long string. */
const longestText = 100

export function readReportedValue(text: string, options: { decimalMark?: DecimalMark } = {}): ReportedValue {
  const typed = text.trim()
  if (typed.length > longestText) {
    return fault('too-long', typed, 'This is too long to be one value. Give one number.')
  }
  const plain = normalise(typed)
  if (plain === '') return { kind: 'missing' }
  if (/[\t\n\r;|]/.test(plain)) {
    return fault(
      'several-values',
      typed,
      `${quote(typed)} holds more than one value. Give one number in each place.`,
    )
  }
  if (plain.startsWith('=')) {
    return fault('formula', typed, `${quote(typed)} is a formula. Give the number it comes to.`)
  }
  const mark = plain.startsWith('<') ? '<' : plain.startsWith('>') ? '>' : null
  const body = mark === null ? plain : plain.slice(1).trimStart()
  if (/^[<>=≤≥≦≧⩽⩾＜＞~≈≃]/.test(body)) return comparisonFault(typed, plain)
  if (mark !== null && body === '') {
    return fault('mark-without-number', typed, `A number must follow ${quote(mark)}, as in ${mark}0.5.`)
  }
  const outcome = readNumber(body, options.decimalMark)
  if (outcome.kind === 'fault') {
    const message = outcome.message.replace('{found}', () => quote(typed))
    return outcome.unit === undefined
      ? fault(outcome.code, typed, message)
      : { ...fault(outcome.code, typed, message), unit: outcome.unit }
  }
  const prefix = mark ?? ''
  if (outcome.kind === 'two') {
    const readings = [prefix + outcome.asDecimal, prefix + outcome.asThousands] as const
    const message = `${quote(typed)} can be read as ${readings[0]} or as ${readings[1]}. Say which is meant.`
    return { kind: 'ambiguous', found: shorten(typed), readings, message }
  }
  return mark === null
    ? { kind: 'number', decimal: outcome.decimal }
    : { kind: 'censored', mark, decimal: outcome.decimal }
}

/** Cuts a text for a message, never through the middle of a character, which no database would store. */
export function shortenText(text: string, most: number): string {
  if (text.length <= most) return text
  const cut = text.slice(0, most - 1)
  const isHalf = /[\ud800-\udbff]$/.test(cut)
  return `${isHalf ? cut.slice(0, -1) : cut}…`
}

type Outcome =
  | { kind: 'one'; decimal: string }
  | { kind: 'two'; asDecimal: string; asThousands: string }
  | { kind: 'fault'; code: ReportedValueFault; message: string; unit?: string }

type Digits = { integer: string; fraction: string }

function readNumber(body: string, decimalMark: DecimalMark | undefined): Outcome {
  const sign = body.startsWith('-') ? '-' : ''
  const unsigned = /^[+-]/.test(body) ? body.slice(1).trimStart() : body
  const digitsPart = /^[\d., ']*/.exec(unsigned)?.[0] ?? ''
  const rest = unsigned.slice(digitsPart.length)
  const marked = digitsPart.trim()
  if (!/\d/.test(marked)) return wordFault(body)
  const exponent = readExponent(rest)
  if (exponent === null) return trailingFault(rest, marked)

  const finish = (digits: Digits): string | null => expand(sign, digits, exponent)
  const placed = placeMarks(marked, decimalMark)
  if ('code' in placed) return { kind: 'fault', ...placed }
  if ('asDecimal' in placed) {
    const asDecimal = finish(placed.asDecimal)
    const asThousands = finish(placed.asThousands)
    if (asDecimal === null || asThousands === null) return tooManyDigits
    return { kind: 'two', asDecimal, asThousands }
  }
  const decimal = finish(placed)
  return decimal === null ? tooManyDigits : { kind: 'one', decimal }
}

const tooManyDigits: Outcome = {
  kind: 'fault',
  code: 'too-many-digits',
  message: `{found} needs more than ${mostDigits} digits when written out. Check the exponent and the digits.`,
}

/** 0 where there is no exponent; null where what follows the number is something else. */
function readExponent(rest: string): number | null {
  if (rest === '') return 0
  const found = /^(?:[eE]([+-]?\d{1,6})|[x×*·⋅] ?10 ?\^ ?([+-]?\d{1,6}))$/.exec(rest)
  if (found === null) return null
  return Number(found[1] ?? found[2])
}

/**
 * Says which marks are decimal and which group thousands. Without a decimal mark given, a single point is
 * decimal; a single comma is decimal too, unless it stands exactly where a thousands mark would.
 */
function placeMarks(
  marked: string,
  decimalMark: DecimalMark | undefined,
): Digits | { asDecimal: Digits; asThousands: Digits } | { code: ReportedValueFault; message: string } {
  if (decimalMark !== undefined) {
    const decimal = decimalMark === 'comma' ? ',' : '.'
    const other = decimal === ',' ? '.' : ','
    const digits = splitAt(marked, decimal)
    if (!('code' in digits) || !marked.includes(other)) return digits
    const words = `{found} has a ${other === ',' ? 'comma' : 'point'} where no thousands mark can stand, and the decimal mark was said to be a ${decimalMark}. Write the number with a ${decimalMark}.`
    return { code: 'decimal-mark', message: words }
  }
  const commas = marked.split(',').length - 1
  const points = marked.split('.').length - 1
  if (commas > 0 && points > 0)
    return splitAt(marked, marked.lastIndexOf(',') > marked.lastIndexOf('.') ? ',' : '.')
  if (points === 1) return splitAt(marked, '.')
  if (commas !== 1) return splitAt(marked, null)
  // A group of thousands never begins with a zero, so 0,123 has one reading only.
  const twoWays = /^([1-9]\d{0,2}),(\d{3})$/.exec(marked)
  if (twoWays === null) return splitAt(marked, ',')
  const [, head = '', tail = ''] = twoWays
  return { asDecimal: { integer: head, fraction: tail }, asThousands: { integer: head + tail, fraction: '' } }
}

function splitAt(
  marked: string,
  decimal: ',' | '.' | null,
): Digits | { code: ReportedValueFault; message: string } {
  const at = decimal === null ? -1 : marked.indexOf(decimal)
  const integer = at < 0 ? marked : marked.slice(0, at)
  const fraction = at < 0 ? '' : marked.slice(at + 1)
  if (at === marked.length - 1) {
    return {
      code: 'unfinished',
      message: '{found} ends in a mark. Write the digits that follow it, or leave it out.',
    }
  }
  if (!/^\d*$/.test(fraction)) {
    return { code: 'grouping', message: '{found} is not one number: check its spaces, commas and points.' }
  }
  const ungrouped = ungroup(integer, fraction !== '')
  if (ungrouped === null) {
    return {
      code: 'grouping',
      message: '{found} does not group its digits in threes. Write it without thousands marks.',
    }
  }
  return { integer: ungrouped, fraction }
}

function ungroup(integer: string, hasFraction: boolean): string | null {
  if (/^\d+$/.test(integer)) return integer
  if (integer === '') return hasFraction ? '0' : null
  const separator = /[^\d]/.exec(integer)?.[0] ?? ''
  const groups = integer.split(separator)
  const first = groups[0] ?? ''
  const rightFirst = /^[1-9]\d{0,2}$/.test(first)
  const rightOthers = groups.slice(1).every((group) => /^\d{3}$/.test(group))
  return rightFirst && rightOthers ? groups.join('') : null
}

/** Moves the point by the exponent in text, so that no digit is gained or lost on the way through a float. */
function expand(sign: string, { integer, fraction }: Digits, exponent: number): string | null {
  if (Math.abs(exponent) > mostDigits || integer.length + fraction.length > mostDigits) return null
  let whole = integer
  let part = fraction
  if (exponent > 0) {
    const moved = part.padEnd(exponent, '0')
    whole += moved.slice(0, exponent)
    part = moved.slice(exponent)
  } else if (exponent < 0) {
    const moved = whole.padStart(-exponent, '0')
    part = moved.slice(moved.length + exponent) + part
    whole = moved.slice(0, moved.length + exponent)
  }
  whole = whole.replace(/^0+(?=\d)/, '') || '0'
  if (whole.length + part.length > mostDigits) return null
  const magnitude = part === '' ? whole : `${whole}.${part}`
  return /[1-9]/.test(magnitude) ? sign + magnitude : magnitude
}

function wordFault(body: string): Outcome {
  if (/^[-—―_./ ]+$/.test(body)) {
    const message = 'A dash is not a value. Leave the place empty where there is no result.'
    return { kind: 'fault', code: 'dash', message }
  }
  if (/\p{L}/u.test(body)) {
    const message = '{found} is not a number. Give a number, < or > before one, or leave the place empty.'
    return { kind: 'fault', code: 'word', message }
  }
  return {
    kind: 'fault',
    code: 'not-a-number',
    message: '{found} is not a number. Give a number such as 12.3.',
  }
}

function trailingFault(rest: string, marked: string): Outcome {
  if (/^(?:±|\+\/?-)/.test(rest)) {
    const message = `{found} holds a value and a spread. Give the value alone: ${marked}.`
    return { kind: 'fault', code: 'uncertainty', message }
  }
  if (/^[\p{L}%‰°µ"/]/u.test(rest) && !/ \d/.test(rest) && rest.length <= 20) {
    const message = `{found} ends in ${quote(rest)}. Leave the unit out, it is already set: write ${marked}.`
    return { kind: 'fault', code: 'unit', message, unit: rest }
  }
  return {
    kind: 'fault',
    code: 'not-a-number',
    message: '{found} is not one number. Give a number such as 12.3.',
  }
}

function comparisonFault(typed: string, plain: string): ReportedValue {
  const wanted = /[>≥≧⩾＞]/.test(plain) && !/[<≤≦⩽＜]/.test(plain) ? '>' : '<'
  const advice = /^[~≈≃]/.test(plain)
    ? 'Give the number alone, or < or > before it.'
    : `Use ${wanted} alone before the number, as in ${wanted}0.5.`
  return fault('comparison', typed, `${quote(typed)} begins with a mark that is not used here. ${advice}`)
}

/**
 * Writes the many forms of space, apostrophe and minus as one each, and drops characters that nobody sees
 * but that come along when a value is copied from a page.
 */
function normalise(typed: string): string {
  return typed
    .replace(/[\u200b\u200e\u200f\u2060\ufeff]/g, '')
    .replace(/[\u00a0\u1680\u2000-\u200a\u202f\u205f\u3000]/g, ' ')
    .replace(/[\u2018\u2019\u02bc\u2032\u00b4`]/g, "'")
    .replace(/[\u2212\u2010\u2011\u2012\u2013\ufe63\uff0d]/g, '-')
    .trim()
}

function fault(code: ReportedValueFault, typed: string, message: string) {
  return { kind: 'fault' as const, code, found: shorten(typed), message }
}

function quote(text: string): string {
  return `“${shorten(text)}”`
}

function shorten(text: string): string {
  return shortenText(text, 40)
}
