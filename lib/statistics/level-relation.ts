import { NotComputable } from '@/lib/statistics/not-computable'

/** One material: general mean m and a standard deviation s, both in the unit of the measurand. */
export type LevelPoint = { material: string; mean: number; sd: number }

export type FormName = 'proportional' | 'linear' | 'power'

/**
 * s = b m: b is the mean of s/m, a pure number. Materials with m ≤ 0 are left out.
 *
 * @throws {NotComputable} `too-few-materials` below 2 with m > 0.
 *
 * Source: ISO 5725-2, 7.5, form I.
 */
export function proportionalRelation(points: readonly LevelPoint[]): { b: number } {
  const usable = points.filter(({ mean }) => mean > 0)
  requireMaterials(usable, 2)
  return { b: usable.reduce((sum, { mean, sd }) => sum + sd / mean, 0) / usable.length }
}

/**
 * s = a + b m, weighted by 1/s² at first and then by 1/ŝ² of the fit before: the standard's third fit. a is in the
 * unit of s, b a pure number. Materials with s = 0 are left out.
 *
 * @throws {NotComputable} `too-few-materials` below 3 with s > 0; `one-level` when all means are equal;
 *   `negative-fit` when a line on the way is not above 0 at some material.
 *
 * Source: ISO 5725-2, 7.5, form II.
 */
export function linearRelation(points: readonly LevelPoint[]): { a: number; b: number } {
  return weightedFits(points, (fit) => fit === 3)
}

/**
 * s = a + b m as {@link linearRelation}, but weighted on until the line moves by less than 1e-13 of itself. Given
 * beside the third fit; the standard stops there.
 *
 * @throws {NotComputable} as the third fit, and `no-convergence`.
 *
 * Source: ISO 5725-2, 7.5, form II; carried on by us.
 */
export function convergedLinearRelation(points: readonly LevelPoint[]): { a: number; b: number } {
  return weightedFits(points, (fit, moved) => fit >= 3 && moved < FIT_TOLERANCE)
}

/** The first fit of the series that `isWanted`, by its number and how far it moved, in parts of the fit before. */
function weightedFits(
  points: readonly LevelPoint[],
  isWanted: (fit: number, moved: number) => boolean,
): { a: number; b: number } {
  const usable = points.filter(({ sd }) => sd > 0)
  requireMaterials(usable, 3)
  let line = weightedLine(
    usable,
    usable.map(({ sd }) => sd),
  )
  for (let fit = 2; fit <= MOST_FITS; fit += 1) {
    const { a, b } = line
    const fitted = usable.map(({ mean }) => a + b * mean)
    if (fitted.some((value) => value <= 0)) {
      throw new NotComputable(
        'negative-fit',
        'The straight line gives a standard deviation that is not above 0.',
      )
    }
    const next = weightedLine(usable, fitted)
    const moved = usable.map(
      ({ mean }, index) => Math.abs(next.a + next.b * mean - fitted[index]!) / fitted[index]!,
    )
    line = next
    if (isWanted(fit, Math.max(...moved))) return line
  }
  throw new NotComputable('no-convergence', 'The weighted fits did not settle.')
}

/**
 * log s = c + d log m, logarithms to base 10, unweighted; c depends on the unit, d is a pure number. Materials with
 * s = 0 or m ≤ 0 are left out.
 *
 * @throws {NotComputable} `too-few-materials` below 3 with s > 0 and m > 0; `one-level` when all means are equal.
 *
 * Source: ISO 5725-2, 7.5, form III.
 */
export function powerRelation(points: readonly LevelPoint[]): { c: number; d: number } {
  const usable = points.filter(({ mean, sd }) => sd > 0 && mean > 0)
  requireMaterials(usable, 3)
  const logarithms = usable.map(({ material, mean, sd }) => ({
    material,
    mean: Math.log10(mean),
    sd: Math.log10(sd),
  }))
  const { a, b } = weightedLine(
    logarithms,
    logarithms.map(() => 1),
  )
  return { c: a, d: b }
}

/**
 * How well a form fits, comparable between forms: Q = Σ (ln s − ln ŝ)²/(q − coefficients) over the q materials
 * with s > 0. A pure number, small when good.
 *
 * @throws {NotComputable} `too-few-materials` without a degree of freedom; `negative-fit` when some ŝ is not above
 *   0, which disqualifies the form.
 *
 * Source: our own.
 */
export function relationQuality(
  points: readonly LevelPoint[],
  fitted: (mean: number) => number,
  coefficients: number,
): number {
  const usable = points.filter(({ sd }) => sd > 0)
  requireMaterials(usable, coefficients + 1)
  let sum = 0
  for (const { mean, sd } of usable) {
    const value = fitted(mean)
    if (!(value > 0)) {
      throw new NotComputable('negative-fit', 'The form gives a standard deviation that is not above 0.')
    }
    sum += Math.log(sd / value) ** 2
  }
  return sum / (usable.length - coefficients)
}

/**
 * The form with the smallest Q; of those within a tenth of it, the simplest; `null` where none could be judged.
 * A person chooses; this only proposes.
 *
 * Source: our own.
 */
export function proposedForm(qualities: Readonly<Record<FormName, number | null>>): FormName | null {
  const known = SIMPLEST_FIRST.filter((form) => qualities[form] !== null)
  if (known.length === 0) return null
  const smallest = Math.min(...known.map((form) => qualities[form]!))
  return known.find((form) => qualities[form]! <= smallest * 1.1)!
}

/** The materials that some form had to do without: those with m ≤ 0 or s = 0. */
export function materialsLeftOut(points: readonly LevelPoint[]): string[] {
  return points.filter(({ mean, sd }) => !(mean > 0) || !(sd > 0)).map(({ material }) => material)
}

const MOST_FITS = 10_000
const FIT_TOLERANCE = 1e-13
const SIMPLEST_FIRST: readonly FormName[] = ['proportional', 'linear', 'power']

function requireMaterials(points: readonly LevelPoint[], least: number): void {
  if (points.length < least) {
    throw new NotComputable('too-few-materials', `This form needs ${least} materials it can use.`)
  }
}

/** Least squares of s on m with weights 1/spread²; centred, so that no digits are lost at high levels. */
function weightedLine(points: readonly LevelPoint[], spreads: readonly number[]): { a: number; b: number } {
  const weights = spreads.map((spread) => 1 / spread ** 2)
  const total = weights.reduce((sum, weight) => sum + weight, 0)
  const centre = points.reduce((sum, { mean }, index) => sum + weights[index]! * mean, 0) / total
  const height = points.reduce((sum, { sd }, index) => sum + weights[index]! * sd, 0) / total
  let products = 0
  let squares = 0
  points.forEach(({ mean, sd }, index) => {
    products += weights[index]! * (mean - centre) * (sd - height)
    squares += weights[index]! * (mean - centre) ** 2
  })
  if (!(squares > 0)) throw new NotComputable('one-level', 'All materials lie at one level.')
  const b = products / squares
  return { a: height - b * centre, b }
}
