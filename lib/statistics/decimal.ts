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
  const plain = plainUnits(text)
  if (!Number.isNaN(plain)) return { units: BigInt(plain), scale: plainScale(text) }
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

/**
 * The units of a text of digits with at most one point among them and a minus before, too few for them not to be a
 * double; NaN for any other text.
 */
function plainUnits(text: string): number {
  if (text.length > 15) return NaN
  let number = 0
  let digits = 0
  let hasPoint = false
  const isNegative = text.charCodeAt(0) === 45
  for (let place = isNegative ? 1 : 0; place < text.length; place += 1) {
    const code = text.charCodeAt(place)
    if (code >= 48 && code <= 57) {
      number = number * 10 + (code - 48)
      digits += 1
    } else if (code === 46 && !hasPoint) hasPoint = true
    else return NaN
  }
  if (digits === 0) return NaN
  return isNegative ? 0 - number : number
}

/** Places behind the point of a text that {@link plainUnits} can read. */
function plainScale(text: string): number {
  const point = text.indexOf('.')
  return point === -1 ? 0 : text.length - 1 - point
}

/**
 * Whole numbers of one unit: doubles while all of them stay clear of 2^53, so that a difference of two is exact as well,
 * and bigints where one does not.
 */
export type WholeNumbers = Float64Array | readonly bigint[]

/** Values at a common scale: the numbers `units` × 10^-`scale`, in their order. */
export interface ScaledDecimals {
  readonly units: WholeNumbers
  readonly scale: number
}

/**
 * Reads decimal texts as whole numbers of one unit, 10^-`scale`, in their order. The scale is the finest among them; of no
 * text it is 0.
 *
 * @throws {RangeError} as {@link parseDecimal}.
 */
export function parseDecimals(texts: readonly string[]): ScaledDecimals {
  return parsePlainDecimals(texts) ?? toCommonScale(texts.map(parseDecimal))
}

/** The same where every text is short and plain, as nearly all are, without an object for each. */
function parsePlainDecimals(texts: readonly string[]): ScaledDecimals | null {
  const units = new Float64Array(texts.length)
  const scales = new Uint8Array(texts.length)
  let scale = 0
  let isAtOneScale = true
  for (let at = 0; at < texts.length; at += 1) {
    const text = texts[at] as string
    units[at] = plainUnits(text)
    if (Number.isNaN(units[at])) return null
    const own = plainScale(text)
    if (at > 0 && own !== scale) isAtOneScale = false
    if (own > scale) scale = own
    scales[at] = own
  }
  if (isAtOneScale) return { units, scale }
  for (let at = 0; at < units.length; at += 1) {
    const common = units[at]! * powerOfTen(scale - scales[at]!)
    if (!(Math.abs(common) < HALF)) return null
    units[at] = common
  }
  return { units, scale }
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
  return centreUnits(parseDecimals(texts))
}

/**
 * {@link centreExactly} for values that stand at a common scale already.
 *
 * @throws {NotComputable} `no-results`; `out-of-range` when a difference is larger than any double.
 */
export function centreUnits({ units, scale }: ScaledDecimals): ExactlyCentred {
  if (units.length === 0) throw new NotComputable('no-results', 'There is no result.')
  const offset = { units: medianOf(units), scale }
  const deviations = differences(units, offset)
  if (!deviations.every(Number.isFinite)) {
    throw new NotComputable('out-of-range', 'The results lie further apart than a double can hold.')
  }
  return { offset, deviations, restore: restoring(offset) }
}

/**
 * The same values as whole numbers of one unit, 10^-`scale`, in their order. The scale is the finest among them; of no
 * value it is 0.
 */
export function toCommonScale(decimals: readonly Decimal[]): ScaledDecimals {
  let scale = -Infinity
  for (const decimal of decimals) if (decimal.scale > scale) scale = decimal.scale
  if (scale === -Infinity) scale = 0
  const units = decimals.map((decimal) => unitsAt(decimal, scale))
  return { units: areSmall(units) ? Float64Array.from(units, Number) : units, scale }
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

function medianOf(units: WholeNumbers): bigint {
  const middle = (units.length - 1) >> 1
  if (units instanceof Float64Array) return BigInt(units.slice().sort()[middle]!)
  return [...units].sort((a, b) => (a < b ? -1 : a > b ? 1 : 0))[middle]!
}

function differences(units: WholeNumbers, offset: Decimal): Float64Array {
  const { scale } = offset
  if (!(units instanceof Float64Array)) {
    return Float64Array.from(units, (unit) => decimalToNumber({ units: unit - offset.units, scale }))
  }
  const middle = Number(offset.units)
  const differences = units.map((unit) => unit - middle)
  if (Math.abs(scale) > 22) return differences.map((difference) => Number(`${difference}e${-scale}`))
  // 10^22 is the largest power of ten that is a double, so one correctly rounded operation is left.
  const ten = powerOfTen(Math.abs(scale))
  for (let at = 0; at < differences.length; at += 1)
    differences[at] = scale > 0 ? differences[at]! / ten : differences[at]! * ten
  return differences
}

/** Clear of 2^53 by enough for a difference of two of them. */
function areSmall(units: readonly bigint[]): boolean {
  return units.every((unit) => unit < HALF && unit > -HALF)
}

const HALF = 2 ** 52

/** Read from its text: whether ** is exact is left to the engine. */
function powerOfTen(power: number): number {
  return Number(`1e${power}`)
}

/**
 * The way back from a deviation: the double nearest to the exact sum.
 *
 * The offset is taken as the sum of two doubles, which leaves an error of some 1e-32 of it. Where the rounded sum is the
 * same at both ends of that error it is the nearest double; the rare other cases are reckoned in exact decimals.
 */
function restoring(offset: Decimal): (deviation: number) => number {
  const exactly = (deviation: number): number => decimalToNumber(addNumber(offset, deviation))
  const high = decimalToNumber(offset)
  if (!(Math.abs(high) < LARGEST_PLAIN)) return exactly
  const low = decimalToNumber(subtractDecimals(offset, exactDecimal(high)))
  return (deviation) => {
    const sum = high + deviation
    const size = Math.abs(sum)
    if (!(size > SMALLEST_PLAIN && size < LARGEST_PLAIN)) return exactly(deviation)
    // Knuth: what the rounding of a sum of two doubles has lost is a double itself.
    const ofDeviation = sum - high
    const rest = high - (sum - ofDeviation) + (deviation - ofDeviation) + low
    const doubt = 2 ** -50 * Math.abs(rest) + 2 ** -104 * Math.abs(high)
    const up = sum + (rest + doubt)
    return up === sum + (rest - doubt) ? up : exactly(deviation)
  }
}

/** Between these neither a sum overflows nor its error falls below every double. */
const LARGEST_PLAIN = 1e300
const SMALLEST_PLAIN = 1e-200

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
