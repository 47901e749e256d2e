import { NotComputable } from '@/lib/statistics/not-computable'

/**
 * Exact decimals, so that a result is never bent before the first difference is taken.
 *
 * Results reported as 1000000000000.4 and 1000000000000.3 differ by 0.1; as doubles they differ by 0.0999755859375. A common
 * offset is therefore taken off in whole numbers and only the small remainder becomes a double.
 */

/** The number `units` × 10^-`scale`. Trailing zeros are kept: they are the resolution of what was reported. */
export interface Decimal {
  readonly units: bigint
  readonly scale: number
}

export interface ExactlyCentred {
  /** One of the given values, a median of them. */
  readonly offset: Decimal
  /** value - offset for each text in order: the double nearest to the exact difference. */
  readonly deviations: Float64Array
  /** offset + deviation, the double nearest to the exact sum. */
  readonly restore: (deviation: number) => number
}

// Far beyond what a double holds; keeps a text such as 1e999999999 from filling the memory.
const longestScale = 2000
const shape = /^([+\-\u2212]?)(\d*)(?:\.(\d*))?(?:[eE]([+\-\u2212]?\d{1,9}))?$/

/**
 * The number that a decimal text writes, exactly: `12.30` is 1230 × 10^-2. A sign, a point and an exponent are read.
 *
 * @throws {RangeError} when the text is no decimal number, or one of more than 2,000 places.
 */
export function parseDecimal(text: string): Decimal {
  const short = text.length <= 15 ? plainDecimal(text) : null
  if (short !== null) return short
  const match = shape.exec(text)
  const [, sign = '', whole = '', fraction = '', exponent = '0'] = match ?? []
  const digits = whole + fraction
  if (!match || digits === '') throw new RangeError(`not a decimal number: ${text.slice(0, 60)}`)

  const scale = fraction.length - Number(exponent.replace('\u2212', '-'))
  if (Math.abs(scale) > longestScale || digits.length > longestScale) {
    throw new RangeError(`a decimal number beyond ${longestScale} places: ${text.slice(0, 60)}`)
  }
  const units = BigInt(digits)
  return { units: sign === '' || sign === '+' ? units : -units, scale: scale === 0 ? 0 : scale }
}

/** Digits with at most one point among them and a minus before: few enough for their number to be a double. */
function plainDecimal(text: string): Decimal | null {
  let number = 0
  let point = -1
  const isNegative = text.charCodeAt(0) === 45
  const start = isNegative ? 1 : 0
  for (let place = start; place < text.length; place += 1) {
    const code = text.charCodeAt(place)
    if (code >= 48 && code <= 57) number = number * 10 + (code - 48)
    else if (code === 46 && point === -1) point = place
    else return null
  }
  if (text.length - start - (point === -1 ? 0 : 1) === 0) return null
  return { units: BigInt(isNegative ? -number : number), scale: point === -1 ? 0 : text.length - 1 - point }
}

/**
 * Takes a common offset off all values exactly, and gives the way back. Offset and deviations are in the texts'
 * own unit, in their order; the offset is one of the values, a median.
 *
 * Where the whole numbers at the common scale stay clear of 2^53 ordinary numbers do the same exactly, and faster.
 *
 * @throws {NotComputable} `no-results`; `out-of-range` when a difference is larger than any double.
 * @throws {RangeError} as {@link parseDecimal}.
 */
export function centreExactly(texts: readonly string[]): ExactlyCentred {
  return centreUnits(toCommonScale(texts.map(parseDecimal)))
}

/**
 * {@link centreExactly} for values that stand at a common scale already.
 *
 * @throws {NotComputable} `no-results`; `out-of-range` when a difference is larger than any double.
 */
export function centreUnits({ units, scale }: { units: readonly bigint[]; scale: number }): ExactlyCentred {
  if (units.length === 0) throw new NotComputable('no-results', 'There is no result.')
  const offset = { units: medianOf(units), scale }
  const deviations = differences(units, offset)
  if (!deviations.every(Number.isFinite)) {
    throw new NotComputable('out-of-range', 'The results lie further apart than a double can hold.')
  }
  return { offset, deviations, restore: (deviation) => decimalToNumber(addNumber(offset, deviation)) }
}

/**
 * The same values as whole numbers of one unit, 10^-`scale`, in their order. The scale is the finest among them; it
 * needs one value at least.
 */
export function toCommonScale(decimals: readonly Decimal[]): { units: bigint[]; scale: number } {
  let scale = -Infinity
  for (const decimal of decimals) if (decimal.scale > scale) scale = decimal.scale
  return { units: decimals.map((decimal) => unitsAt(decimal, scale)), scale }
}

/**
 * The double nearest to the decimal; reading a decimal text is correctly rounded, a division would not be.
 *
 * A decimal beyond every double gives Infinity: a caller that can meet one must look.
 */
export function decimalToNumber({ units, scale }: Decimal): number {
  return Number(`${units}e${-scale}`)
}

/** Negative when a < b, 0 when they are the same number (of whatever scale), positive when a > b. */
export function compareDecimals(a: Decimal, b: Decimal): number {
  const { units } = subtractDecimals(a, b)
  return units < 0n ? -1 : units > 0n ? 1 : 0
}

/** a - b, exactly, at the finer of the two scales. */
export function subtractDecimals(a: Decimal, b: Decimal): Decimal {
  const scale = Math.max(a.scale, b.scale)
  return { units: unitsAt(a, scale) - unitsAt(b, scale), scale }
}

/** Plain digits with an ASCII minus, as many decimals as the scale says. */
export function decimalToText({ units, scale }: Decimal): string {
  if (scale <= 0) return String(units * 10n ** BigInt(-scale))
  const digits = String(units < 0n ? -units : units).padStart(scale + 1, '0')
  return `${units < 0n ? '-' : ''}${digits.slice(0, -scale)}.${digits.slice(-scale)}`
}

/**
 * x rounded so that its last digit stands for 10^`place`, as plain text: (12.345, -2) gives 12.34.
 *
 * What is rounded is the shortest decimal that gives back the double (2.675 is taken as 2.675 and not as the
 * 2.67499999999999982236431605997495353221893310546875 it is stored as), halves to the even digit. A negative number that
 * rounds to nothing carries no sign.
 *
 * @throws {RangeError} when x is not finite; for a place that is no whole number or beyond 2,000.
 *
 * Source: ISO 80000-1 (half to even).
 */
export function roundHalfEvenAtPlace(x: number, place: number): string {
  if (!Number.isFinite(x) || !Number.isInteger(place) || Math.abs(place) > longestScale) {
    throw new RangeError(`cannot round ${x} at 10^${place}`)
  }
  const decimal = parseDecimal(String(x))
  const scale = -place
  if (scale >= decimal.scale) return decimalToText({ units: unitsAt(decimal, scale), scale })
  const unit = 10n ** BigInt(decimal.scale - scale)
  return decimalToText({ units: divideHalfEven(decimal.units, unit), scale })
}

function unitsAt(decimal: Decimal, scale: number): bigint {
  return decimal.scale === scale ? decimal.units : decimal.units * 10n ** BigInt(scale - decimal.scale)
}

function medianOf(units: readonly bigint[]): bigint {
  // As doubles they are sorted in a fraction of the time, and those of up to 15 digits are exact.
  if (areSmall(units)) {
    const numbers = new Float64Array(units.length)
    for (let at = 0; at < units.length; at += 1) numbers[at] = Number(units[at])
    numbers.sort()
    return BigInt(numbers[(numbers.length - 1) >> 1]!)
  }
  const sorted = [...units].sort((a, b) => (a < b ? -1 : a > b ? 1 : 0))
  return sorted[(sorted.length - 1) >> 1] as bigint
}

function differences(units: readonly bigint[], offset: Decimal): Float64Array {
  const power = Math.abs(offset.scale)
  if (power > 22 || !areSmall(units)) {
    const { scale } = offset
    return Float64Array.from(units, (unit) => decimalToNumber({ units: unit - offset.units, scale }))
  }
  // 10^22 is the largest power of ten that is a double, so one correctly rounded operation is left. The power is
  // read from its text: whether ** is exact is left to the engine.
  const ten = Number(`1e${power}`)
  const middle = Number(offset.units)
  const differences = new Float64Array(units.length)
  for (let at = 0; at < units.length; at += 1) {
    const difference = Number(units[at]) - middle
    differences[at] = offset.scale > 0 ? difference / ten : difference * ten
  }
  return differences
}

/** Clear of 2^53 by enough for a difference of two of them. */
function areSmall(units: readonly bigint[]): boolean {
  for (const unit of units) if (unit >= HALF || unit <= -HALF) return false
  return true
}

const HALF = 2n ** 52n

function addNumber(a: Decimal, x: number): Decimal {
  return subtractDecimals(a, exactDecimal(-x))
}

/** Every double is a finite decimal: mantissa × 2^-k is mantissa × 5^k × 10^-k. */
function exactDecimal(x: number): Decimal {
  if (!Number.isFinite(x)) throw new RangeError(`not a finite number: ${x}`)
  let mantissa = x
  let halvings = 0
  // Doubling is exact, and at most 1074 of them make any double whole.
  while (!Number.isInteger(mantissa)) {
    mantissa *= 2
    halvings += 1
  }
  return { units: BigInt(mantissa) * 5n ** BigInt(halvings), scale: halvings }
}

function divideHalfEven(numerator: bigint, denominator: bigint): bigint {
  const isNegative = numerator < 0n
  const size = isNegative ? -numerator : numerator
  const quotient = size / denominator
  const twice = 2n * (size % denominator)
  const isUp = twice > denominator || (twice === denominator && quotient % 2n === 1n)
  const rounded = isUp ? quotient + 1n : quotient
  return isNegative ? -rounded : rounded
}
