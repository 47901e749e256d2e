import { create, type Unit, unitDependencies } from 'mathjs'

/**
 * Other units in which results of a measurand are often given, with their factors from the tables of mathjs.
 *
 * Only the part of mathjs that knows units is made, never its evaluator: what reaches it has first been held to letters,
 * digits and the few signs of a unit.
 */
export type UnitOfResults = { name: string; factor: number }

const tables = create({ unitDependencies: unitDependencies! })

/** Units that laboratories mix up, kind by kind. Scales that differ by more than a factor (°C, °F) are left out. */
const COMMON = [
  ...['g/L', 'mg/L', 'ug/L', 'ng/L', 'g/dL', 'mg/dL', 'mg/mL', 'kg/m^3'],
  ...['mol/L', 'mmol/L', 'umol/L', 'nmol/L'],
  ...['g/kg', 'mg/kg', 'ug/kg', 'cg/g', 'g/g'],
  ...['m', 'cm', 'mm', 'um', 'in'],
  ...['kg', 'g', 'mg', 'ug', 'oz', 'lbm'],
  ...['L', 'mL', 'uL'],
  ...['Pa', 'kPa', 'MPa', 'bar', 'psi', 'atm', 'mmHg'],
  ...['N', 'kN', 'lbf'],
  ...['J', 'kJ', 'MJ', 'BTU', 'Wh', 'kWh'],
  ...['J/g', 'kJ/kg', 'MJ/kg', 'BTU/lbm'],
  ...['s', 'minute', 'hour'],
] as const

const SHAPE = /^[A-Za-z%]+(\^-?\d)?([*/ ][A-Za-z]+(\^-?\d)?)*$/
const LONGEST = 40

/**
 * The other common units of the same kind: a result given in one of them, multiplied by its factor, is in `own`. Of
 * several that are the same unit by another name only the first is given; none may be left.
 *
 * @throws {RangeError} where `own` is no unit that the tables hold.
 *
 * Source: the tables of mathjs.
 */
export function otherUnitsThan(own: string): UnitOfResults[] {
  const mine = knownUnit(own)
  return COMMON.filter((name) => one(name).equalBase(mine))
    .map((name) => ({ name, factor: factorBetween(name, own) }))
    .filter(
      ({ factor }, place, all) =>
        Math.abs(factor - 1) > 1e-12 && all.findIndex((earlier) => earlier.factor === factor) === place,
    )
}

/**
 * The number by which a result in `from` is multiplied to be in `to`, to 15 digits.
 *
 * @throws {RangeError} for a text that is no unit, and for two units of different kinds.
 *
 * Source: the tables of mathjs.
 */
export function unitFactor(from: string, to: string): number {
  if (!knownUnit(from).equalBase(knownUnit(to))) {
    throw new RangeError(`${from} and ${to} are units of different kinds`)
  }
  return factorBetween(from, to)
}

/** The tables multiply doubles; what they add in the sixteenth digit is not theirs to say. */
function factorBetween(from: string, to: string): number {
  const [numerator, denominator] = [one(from), one(to)].map((unit) => Number(unit.toSI().toNumeric()))
  return Number((numerator! / denominator!).toPrecision(15))
}

/** One of a unit; without a number it would have a kind and no size. */
function one(text: string): Unit {
  return tables.unit(1, text)
}

function knownUnit(text: string): Unit {
  const words = `not a unit: ${text.slice(0, LONGEST)}`
  if (text.length > LONGEST || !SHAPE.test(text)) throw new RangeError(words)
  try {
    return one(text)
  } catch {
    throw new RangeError(words)
  }
}
