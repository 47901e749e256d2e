import type { AnalysisResult } from '@/lib/statistics/analysis-input'
import type { CensoredBlock } from '@/lib/statistics/analysis-document'
import type { CellTable } from '@/lib/statistics/cells'
import {
  centreExactly,
  centreUnits,
  type Decimal,
  type ExactlyCentred,
  parseDecimal,
  parseDecimals,
  type ScaledDecimals,
  subtractDecimals,
  type WholeNumbers,
} from '@/lib/statistics/decimal'
import { codeLabels } from '@/lib/statistics/nested-layout'
import { NotComputable } from '@/lib/statistics/not-computable'

/**
 * The results of one material that carry a number and take part, cell by cell: those of laboratory i from `starts[i]` up
 * to, and without, `starts[i + 1]` in each of the arrays. Laboratories stand in the order in which they appear in the input.
 */
export type MaterialCells = CellTable & {
  results: readonly AnalysisResult[]
  /** The same results as whole numbers of the material's finest decimal. */
  units: WholeNumbers
}

export type MaterialData = {
  material: string
  measurand: string | null
  cells: MaterialCells
  /** Decimals of the whole numbers, whose unit is worth `step`. */
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

/** No laboratory and no result. */
export const NO_CELLS: MaterialCells = {
  laboratories: [],
  starts: new Int32Array(1),
  deviations: new Float64Array(0),
  results: [],
  units: new Float64Array(0),
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
  const { units, scale } = parseDecimals(taking.map(({ text }) => text))
  const centred = centreWithinRange({ units, scale })
  const sorted = byLaboratory({
    results: taking,
    units,
    deviations: centred.deviations,
    laboratories: taking.map(({ laboratory }) => laboratory),
  })
  const isCensored = ({ censored }: AnalysisResult): boolean => censored !== null
  const { kept, taken } = sorted.results.some(isCensored)
    ? withoutCensored(sorted)
    : { kept: sorted, taken: [] }

  return {
    material: one.material,
    measurand: one.measurand,
    cells: kept,
    scale,
    step: Number(`1e${-scale}`),
    restore: centred.restore,
    deviationOf: (text) => differenceAsNumber(parseDecimal(text), centred.offset),
    censored: {
      results: taking.filter(isCensored).length,
      cells: taken.map(({ laboratory, below, above, quantified }) => ({
        laboratory,
        below,
        above,
        quantified,
      })),
    },
    bounds: taken.map(({ limit, below, above }) => ({
      below: above === 0 ? limit : null,
      above: below === 0 ? limit : null,
    })),
    isOutOfRange: centred.isOutOfRange,
    censoredShare: taken.length === 0 ? 0 : taken.length / sorted.laboratories.length,
  }
}

/** The results of the cell at this place. */
export function resultsOfCell({ results, starts }: MaterialCells, cell: number): readonly AnalysisResult[] {
  return results.slice(starts[cell], starts[cell + 1])
}

/** Results in their order, each with its laboratory: they are brought together cell by cell. */
function byLaboratory(one: {
  laboratories: readonly string[]
  results: readonly AnalysisResult[]
  units: WholeNumbers
  deviations: Float64Array
}): MaterialCells {
  const { codes, labels: laboratories } = codeLabels(one.laboratories)
  const starts = new Int32Array(laboratories.length + 1)
  let isInOrder = true
  for (let at = 0; at < codes.length; at += 1) {
    starts[codes[at]! + 1]! += 1
    if (at > 0 && codes[at]! < codes[at - 1]!) isInOrder = false
  }
  for (let cell = 0; cell < laboratories.length; cell += 1) starts[cell + 1]! += starts[cell]!
  const { results, units, deviations } = one
  if (isInOrder) return { laboratories, starts, results, units, deviations }

  const order = new Int32Array(codes.length)
  const next = starts.slice()
  for (let at = 0; at < codes.length; at += 1) {
    const cell = codes[at]!
    order[next[cell]!] = at
    next[cell]! += 1
  }
  return { laboratories, starts, ...picked({ results, units, deviations }, order) }
}

function picked(
  { results, units, deviations }: Pick<MaterialCells, 'results' | 'units' | 'deviations'>,
  places: Int32Array,
): Pick<MaterialCells, 'results' | 'units' | 'deviations'> {
  return {
    results: Array.from(places, (at) => results[at]!),
    units:
      units instanceof Float64Array
        ? Float64Array.from(places, (at) => units[at]!)
        : Array.from(places, (at) => units[at]!),
    deviations: Float64Array.from(places, (at) => deviations[at]!),
  }
}

type TakenCell = CensoredBlock['cells'][number] & { limit: number }

function withoutCensored(all: MaterialCells): { kept: MaterialCells; taken: TakenCell[] } {
  const laboratories: string[] = []
  const starts = [0]
  const places: number[] = []
  const taken: TakenCell[] = []
  all.laboratories.forEach((laboratory, cell) => {
    const results = resultsOfCell(all, cell)
    const below = results.filter(({ censored }) => censored === '<').length
    const above = results.filter(({ censored }) => censored === '>').length
    if (below + above === 0) {
      laboratories.push(laboratory)
      for (let at = all.starts[cell]!; at < all.starts[cell + 1]!; at += 1) places.push(at)
      starts.push(places.length)
      return
    }
    const own = all.deviations.subarray(all.starts[cell], all.starts[cell + 1])
    const limit = own.reduce((sum, value) => sum + value, 0) / own.length
    taken.push({ laboratory, below, above, quantified: results.length - below - above, limit })
  })
  const kept = { laboratories, starts: Int32Array.from(starts), ...picked(all, Int32Array.from(places)) }
  return { kept, taken }
}

/** Squares, and sums and ratios of squares, stay within a double. */
const LARGEST_DEVIATION = 1e140
const SMALLEST_DEVIATION = 1e-140

function centreWithinRange(values: ScaledDecimals): ExactlyCentred & { isOutOfRange: boolean } {
  const nothing = centreExactly(['0'])
  if (values.units.length === 0) return { ...nothing, deviations: new Float64Array(0), isOutOfRange: false }
  try {
    const centred = centreUnits(values)
    let reach = 0
    for (const deviation of centred.deviations) reach = Math.max(reach, Math.abs(deviation))
    // A difference below every double has become 0, but the results are not equal.
    const areEqual = reach === 0 && values.units.every((unit: number | bigint) => unit === values.units[0])
    const isOutOfRange = !areEqual && !(reach >= SMALLEST_DEVIATION && reach <= LARGEST_DEVIATION)
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
