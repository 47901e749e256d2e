import type { AnalysisResult } from '@/lib/statistics/analysis-input'
import type { CensoredBlock } from '@/lib/statistics/analysis-document'
import {
  centreExactly,
  centreUnits,
  type Decimal,
  type ExactlyCentred,
  parseDecimal,
  subtractDecimals,
  toCommonScale,
} from '@/lib/statistics/decimal'
import { NotComputable } from '@/lib/statistics/not-computable'

/** The results of one laboratory for one material that carry a number and take part. */
export type MaterialCell = {
  laboratory: string
  results: readonly AnalysisResult[]
  /** Differences from the material's offset. */
  deviations: Float64Array
  /** The same results as whole numbers of the material's finest decimal. */
  integers: readonly bigint[]
}

export type MaterialData = {
  material: string
  measurand: string | null
  /** In the order in which laboratories appear in the input. */
  cells: readonly MaterialCell[]
  /** Decimals of the integers, whose unit is worth `step`. */
  scale: number
  step: number
  restore: (deviation: number) => number
  /** The difference of another value of this material, an accepted reference say, from the offset. */
  deviationOf: (text: string) => number
  censored: CensoredBlock
  /** Bounds of the cells that hold a censored result, as deviations: the mean lies below `below` or above `above`. */
  bounds: readonly { below: number | null; above: number | null }[]
  /** Share of the cells with data that a censored result took out. */
  censoredShare: number
  /** The results lie so far apart, or so close together, that their squares are no doubles. */
  isOutOfRange: boolean
}

/**
 * Sorts the results of one material into cells, in the order in which laboratories appear, and centres them exactly;
 * deviations in the unit of the results.
 *
 * A cell that holds a censored result takes no part: no number is put in the place of one that is not known. Results
 * whose squares are no doubles are not refused here but marked `isOutOfRange`.
 *
 * @throws {RangeError} for a text that is no decimal number.
 */
export function materialData(one: {
  material: string
  measurand: string | null
  results: readonly AnalysisResult[]
}): MaterialData {
  const taking = one.results.filter(({ excluded, text }) => !excluded && text !== '')
  const decimals = taking.map(({ text }) => parseDecimal(text))
  const { units, scale } = toCommonScale(decimals.length === 0 ? [parseDecimal('0')] : decimals)
  const centred = centreWithinRange(taking.length === 0 ? { units: [], scale } : { units, scale })

  const positions = new Map<string, number[]>()
  taking.forEach(({ laboratory }, position) => {
    const known = positions.get(laboratory)
    if (known === undefined) positions.set(laboratory, [position])
    else known.push(position)
  })

  const cells: MaterialCell[] = []
  const censoredCells: CensoredBlock['cells'] = []
  const bounds: { below: number | null; above: number | null }[] = []
  for (const [laboratory, members] of positions) {
    const results = members.map((position) => taking[position]!)
    const deviations = new Float64Array(members.length)
    members.forEach((position, place) => (deviations[place] = centred.deviations[position]!))
    const below = results.filter(({ censored }) => censored === '<').length
    const above = results.filter(({ censored }) => censored === '>').length
    if (below + above === 0) {
      cells.push({ laboratory, results, deviations, integers: members.map((position) => units[position]!) })
      continue
    }
    censoredCells.push({ laboratory, below, above, quantified: results.length - below - above })
    const limit = deviations.reduce((sum, value) => sum + value, 0) / deviations.length
    bounds.push({ below: above === 0 ? limit : null, above: below === 0 ? limit : null })
  }

  return {
    material: one.material,
    measurand: one.measurand,
    cells,
    scale,
    step: Number(`1e${-scale}`),
    restore: centred.restore,
    deviationOf: (text) => differenceAsNumber(parseDecimal(text), centred.offset),
    censored: {
      results: taking.filter(({ censored }) => censored !== null).length,
      cells: censoredCells,
    },
    bounds,
    isOutOfRange: centred.isOutOfRange,
    censoredShare: positions.size === 0 ? 0 : censoredCells.length / positions.size,
  }
}

/** Squares, and sums and ratios of squares, stay within a double. */
const LARGEST_DEVIATION = 1e140
const SMALLEST_DEVIATION = 1e-140

function centreWithinRange(values: {
  units: readonly bigint[]
  scale: number
}): ExactlyCentred & { isOutOfRange: boolean } {
  const nothing = centreExactly(['0'])
  if (values.units.length === 0) return { ...nothing, isOutOfRange: false }
  try {
    const centred = centreUnits(values)
    let reach = 0
    for (const deviation of centred.deviations) reach = Math.max(reach, Math.abs(deviation))
    const isOutOfRange = reach !== 0 && !(reach >= SMALLEST_DEVIATION && reach <= LARGEST_DEVIATION)
    return { ...centred, isOutOfRange }
  } catch (error) {
    if (!(error instanceof NotComputable)) throw error
    return { ...nothing, deviations: new Float64Array(values.units.length), isOutOfRange: true }
  }
}

function differenceAsNumber(value: Decimal, offset: Decimal): number {
  const { units, scale } = subtractDecimals(value, offset)
  return Number(`${units}e${-scale}`)
}
