import { roundHalfEvenAtPlace } from '@/lib/statistics/decimal'
import { NotComputable } from '@/lib/statistics/not-computable'

/** Figures as a report prints them, each a function that gives plain text or refuses for itself. */
export type RoundedPrecision = {
  mean: () => string
  repeatability: () => string
  betweenLaboratory: () => string
  /** One for each figure given, in order. */
  intermediate: readonly (() => string)[]
  reproducibility: () => string
  repeatabilityLimit: () => string
  reproducibilityLimit: () => string
}

/**
 * The power of ten of the last digit printed: two significant digits for a standard deviation or limit, one more
 * where the unrounded figure begins with a 1. The place is chosen on the unrounded figure, so a carry keeps it:
 * 0.0996 is printed 0.100.
 *
 * @throws {RangeError} for a number that is not above 0.
 *
 * Source: ASTM E177; ISO 5725-6.
 */
export function lastPlace(x: number): number {
  if (!(x > 0)) throw new RangeError('lastPlace requires a number above 0')
  const [mantissa = '', exponent = ''] = x.toExponential().split('e')
  return Number(exponent) - (mantissa.startsWith('1') ? 2 : 1)
}

/**
 * The figures of one material to the places a report gives them, all in the unit of the results.
 *
 * The standard deviations and the mean share the finer place of s_r and s_R, the two limits the finer of theirs. A
 * figure that does not exist takes no part; one that is 0 has no place of its own. Halves go to the even digit, on
 * the shortest decimal that gives back the double.
 *
 * Each part of the result is a function: @throws {NotComputable} `nothing-to-round` where the figure does not exist;
 * `no-place` where no standard deviation above 0 sets the last digit.
 *
 * Source: ASTM E177; ISO 5725-6; ISO 80000-1 (half to even).
 */
export function roundedPrecision(figures: {
  mean: number | null
  repeatabilitySd: number | null
  betweenLaboratorySd: number | null
  intermediateSds: readonly (number | null)[]
  reproducibilitySd: number | null
  repeatabilityLimit: number | null
  reproducibilityLimit: number | null
}): RoundedPrecision {
  const ofSds = finerPlace(figures.repeatabilitySd, figures.reproducibilitySd)
  const ofLimits = finerPlace(figures.repeatabilityLimit, figures.reproducibilityLimit)
  return {
    mean: () => rounded(figures.mean, ofSds),
    repeatability: () => rounded(figures.repeatabilitySd, ofSds),
    betweenLaboratory: () => rounded(figures.betweenLaboratorySd, ofSds),
    intermediate: figures.intermediateSds.map((sd) => () => rounded(sd, ofSds)),
    reproducibility: () => rounded(figures.reproducibilitySd, ofSds),
    repeatabilityLimit: () => rounded(figures.repeatabilityLimit, ofLimits),
    reproducibilityLimit: () => rounded(figures.reproducibilityLimit, ofLimits),
  }
}

function finerPlace(...figures: readonly (number | null)[]): number | null {
  const places = figures.filter((figure) => figure !== null && figure > 0).map((figure) => lastPlace(figure!))
  return places.length === 0 ? null : Math.min(...places)
}

function rounded(figure: number | null, place: number | null): string {
  if (figure === null) throw new NotComputable('nothing-to-round', 'The figure itself could not be computed.')
  if (place === null)
    throw new NotComputable('no-place', 'No standard deviation above 0 sets the last digit.')
  return roundHalfEvenAtPlace(figure, place)
}
