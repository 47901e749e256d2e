import type { ProposalKind } from '@/lib/statistics/analysis-document'
import { decimalToNumber, parseDecimal, subtractDecimals } from '@/lib/statistics/decimal'
import { oneResultChanged } from '@/lib/statistics/one-result-changed'
import { type CellFigures, type Others, surprise } from '@/lib/statistics/surprise'

/**
 * What might have gone wrong in a laboratory: simple explanations, each of which
 * changes numbers, tried and scored. A person decides; nothing is changed here.
 *
 * An explanation earns the surprise it takes away from the cells it changes and
 * pays a price for the choice it makes among others of its kind.
 */
export type LaboratoryCell = {
  material: string
  measurand: string | null
  /** As deviations from the material's offset. */
  values: readonly number[]
  /** The offset itself, for what multiplies or carries over whole results. */
  offset: number
  /** The number that a text writes less the exact offset, as the values are made: rounded once, at any size of both. */
  deviationOf: (text: string) => number
  /** As reported, for what befalls digits. */
  texts: readonly string[]
  /** The innermost group of each result; results of one group differ by the replicate alone. */
  groups: readonly string[]
  others: Others
}

/** Another unit in which results of the measurand are often given; multiplied by `factor` they are in the study's. */
export type OtherUnit = { name: string; factor: number }

export type Explanation = {
  kind: ProposalKind
  detail: string
  /** Materials whose cells it changes. */
  materials: readonly string[]
  price: number
  score: number
  /** Summed over the cells it changes. */
  surpriseBefore: number
  surpriseAfter: number
  /** The flagged cell as it would be. */
  changed: CellFigures
}

const LEAST_SCORE = 2
const MOST_SHOWN = 3
const PLAUSIBLE = 0.05
const POWERS = [-3, -2, -1, 1, 2, 3]

/**
 * The explanations of one flagged cell worth showing, best first and three at most; none is an answer.
 *
 * `cells` are all those of the laboratory for one measurand, each with its own material's others; `flagged` names the
 * material, and `inOtherMeasurands` are the laboratory's cells of that material for other measurands. Values in the
 * study's unit, scores and prices in powers of ten of a probability. Shown are those of a score of 2 or more after
 * which every changed cell is plausible among the others.
 *
 * @throws {RangeError} where the laboratory has no cell of that material, or a result's text is no decimal number.
 *
 * Source: our own.
 */
export function explanationsOf({
  flagged,
  cells,
  inOtherMeasurands = [],
  units = [],
}: {
  flagged: string
  cells: readonly LaboratoryCell[]
  inOtherMeasurands?: readonly LaboratoryCell[]
  units?: readonly OtherUnit[]
}): Explanation[] {
  const own = cells.find(({ material }) => material === flagged)
  if (own === undefined) throw new RangeError(`the laboratory has no cell of ${flagged}`)
  return [
    ...wholeCellFactors(own),
    ...promising(own, singleResultFactors(own)),
    ...otherUnits(own, cells, units),
    ...exchangedMaterials(own, cells),
    ...exchangedMeasurands(own, inOtherMeasurands),
    ...promising(own, exchangedDigits(own)),
    ...commonShift(cells),
    ...promising(own, oneApart(own)),
  ]
    .map((candidate) => scored(candidate, own))
    .filter((candidate) => candidate !== null)
    .sort((one, other) => other.score - one.score)
    .slice(0, MOST_SHOWN)
}

/**
 * Number, mean and pooled innermost standard deviation of a cell that holds a result, in the unit of its values;
 * `groups` has one entry for each of them.
 */
export function cellFigures(values: readonly number[], groups: readonly string[]): CellFigures {
  const n = values.length
  const byGroup = new Map<string, number[]>()
  values.forEach((value, index) => {
    const known = byGroup.get(groups[index]!)
    if (known === undefined) byGroup.set(groups[index]!, [value])
    else known.push(value)
  })
  let squares = 0
  for (const members of byGroup.values()) {
    const first = members[0]!
    const middle = members.reduce((sum, value) => sum + (value - first), 0) / members.length
    for (const value of members) squares += (value - first - middle) ** 2
  }
  const df = n - byGroup.size
  const mean = values.reduce((sum, value) => sum + value, 0) / n
  return { n, mean, sd: df >= 1 ? Math.sqrt(squares / df) : undefined, df }
}

/**
 * Two cells of one laboratory, each with the results of the other: a text stays as it was reported and is centred
 * exactly on the offset of the cell it comes to. Done twice it gives the cells as they were.
 *
 * @throws {RangeError} where a text is no decimal number.
 */
export function exchangedCells(one: LaboratoryCell, other: LaboratoryCell): [LaboratoryCell, LaboratoryCell] {
  return [withResultsOf(one, other), withResultsOf(other, one)]
}

type Change = { cell: LaboratoryCell; values: readonly number[]; groups: readonly string[] }
type Candidate = { kind: ProposalKind; detail: string; price: number; changes: readonly Change[] }

function scored(candidate: Candidate, flagged: LaboratoryCell): Explanation | null {
  let before = 0
  let after = 0
  let changed: CellFigures | undefined
  for (const { cell, values, groups } of candidate.changes) {
    // A result moved or multiplied may be too large for a double, and then it explains nothing.
    if (!values.every(Number.isFinite)) return null
    const figures = cellFigures(values, groups)
    const now = surprise(figures, cell.others)
    const least = PLAUSIBLE / candidate.changes.length
    if (now.pMean < least || now.pScatter < least) return null
    before += surprise(cellFigures(cell.values, cell.groups), cell.others).total
    after += now.total
    if (cell === flagged) changed = figures
  }
  const score = before - after - candidate.price
  if (changed === undefined || !(score >= LEAST_SCORE)) return null
  return {
    kind: candidate.kind,
    detail: candidate.detail,
    materials: [...new Set(candidate.changes.map(({ cell }) => cell.material))],
    price: candidate.price,
    score,
    surpriseBefore: before,
    surpriseAfter: after,
    changed,
  }
}

function wholeCellFactors(cell: LaboratoryCell): Candidate[] {
  return POWERS.map((power) => ({
    kind: 'factor',
    detail: String(Number(`1e${power}`)),
    price: Math.log10(6),
    changes: [multiplied(cell, Number(`1e${power}`))],
  }))
}

/** A result that is replaced, or left out (`null`). */
type OneResult = Pick<Candidate, 'kind' | 'detail' | 'price'> & { index: number; to: number | null }

/** Figures from sums lie this near to those from results, relative to them; what is passed over is passed over for sure. */
const NEAR = 1e-4

/**
 * The changes of one result that may explain the cell. In a cell of thousands of results nearly all can be told from
 * sums to explain nothing, and no list of the results as they would be is made for them.
 */
function promising(cell: LaboratoryCell, tried: Iterable<OneResult>): Candidate[] {
  const before = surprise(cellFigures(cell.values, cell.groups), cell.others).total
  const figuresAfter = oneResultChanged(cell.values, cell.groups)
  const isPromising = ({ index, to, price }: OneResult): boolean => {
    if (!(before - price >= LEAST_SCORE - NEAR)) return false
    const figures = figuresAfter(index, to)
    if (figures === null) return true
    const { pMean, pScatter, total } = surprise(figures, cell.others)
    const least = PLAUSIBLE * (1 - NEAR)
    return pMean >= least && pScatter >= least && before - total - price >= LEAST_SCORE - NEAR
  }
  const found: Candidate[] = []
  for (const one of tried) {
    if (!isPromising(one)) continue
    const { kind, detail, price, index, to } = one
    const changes = [to === null ? leftOut(cell, index) : replaced(cell, index, to)]
    found.push({ kind, detail, price, changes })
  }
  return found
}

function* singleResultFactors(cell: LaboratoryCell): Generator<OneResult> {
  if (cell.values.length < 2) return
  const price = Math.log10(6 * cell.values.length)
  for (const [index, value] of cell.values.entries()) {
    for (const power of POWERS) {
      const factor = Number(`1e${power}`)
      const to = value + (factor - 1) * (cell.offset + value)
      yield { kind: 'factorOneResult', detail: `${factor} × ${cell.texts[index]}`, price, index, to }
    }
  }
}

function otherUnits(
  cell: LaboratoryCell,
  cells: readonly LaboratoryCell[],
  units: readonly OtherUnit[],
): Candidate[] {
  const price = Math.log10(units.length)
  return units.flatMap(({ name, factor }): Candidate[] => [
    { kind: 'unit', detail: name, price, changes: [multiplied(cell, factor)] },
    { kind: 'unitAllMaterials', detail: name, price, changes: cells.map((one) => multiplied(one, factor)) },
  ])
}

function exchangedMaterials(cell: LaboratoryCell, cells: readonly LaboratoryCell[]): Candidate[] {
  return cells
    .filter((other) => other !== cell)
    .map((other) => ({
      kind: 'exchange',
      detail: `${cell.material} ↔ ${other.material}`,
      price: Math.log10(cells.length - 1),
      changes: [carried(other, cell), carried(cell, other)],
    }))
}

/**
 * The two cells of one material for two measurands. Scales and units of two measurands need have nothing in common, so
 * the results are centred anew from their texts.
 */
function exchangedMeasurands(
  cell: LaboratoryCell,
  inOtherMeasurands: readonly LaboratoryCell[],
): Candidate[] {
  const price = Math.log10(inOtherMeasurands.length)
  return inOtherMeasurands.map((other) => {
    const [own, its] = exchangedCells(cell, other)
    return {
      kind: 'exchange',
      detail: `${cell.measurand} ↔ ${other.measurand}`,
      price,
      changes: [
        { cell, values: own.values, groups: own.groups },
        { cell: other, values: its.values, groups: its.groups },
      ],
    }
  })
}

function withResultsOf(cell: LaboratoryCell, { texts, groups }: LaboratoryCell): LaboratoryCell {
  return { ...cell, values: texts.map((text) => cell.deviationOf(text)), texts, groups }
}

function* exchangedDigits(cell: LaboratoryCell): Generator<OneResult> {
  const ways = cell.texts.flatMap((text, index) =>
    digitExchanges(text).map((other) => ({ index, text, other })),
  )
  const price = Math.log10(ways.length)
  for (const { index, text, other } of ways) {
    const to = cell.values[index]! + differenceAsNumber(other, text)
    yield { kind: 'digits', detail: `${text} → ${other}`, price, index, to }
  }
}

/** Every number that comes of exchanging two neighbouring, different digits; a decimal point between them stays. */
function digitExchanges(text: string): string[] {
  const places = [...text].flatMap((character, place) => (/\d/.test(character) ? [place] : []))
  return places.slice(1).flatMap((place, index) => {
    const before = places[index]!
    if (/e/i.test(text.slice(0, place)) || text[before] === text[place]) return []
    const characters = [...text]
    ;[characters[before], characters[place]] = [characters[place]!, characters[before]!]
    return [characters.join('')]
  })
}

/** Exact, and for every way of writing a number that the analysis reads. */
function differenceAsNumber(one: string, other: string): number {
  return decimalToNumber(subtractDecimals(parseDecimal(one), parseDecimal(other)))
}

/** One amount or one factor for all the laboratory's cells, fitted with weights 1/s_ȳ². */
function commonShift(cells: readonly LaboratoryCell[]): Candidate[] {
  if (cells.length < 3 || cells.some(({ others }) => !(others.sdOfMeans > 0))) return []
  let weights = 0
  let distances = 0
  let products = 0
  let squares = 0
  for (const { values, groups, offset, others } of cells) {
    const weight = 1 / others.sdOfMeans ** 2
    const { mean } = cellFigures(values, groups)
    weights += weight
    distances += weight * (mean - others.mean)
    products += weight * (offset + mean) * (offset + others.mean)
    squares += weight * (offset + others.mean) ** 2
  }
  const price = 1 + Math.log10(cells.length) / 2
  const amount = distances / weights
  const shifted: Candidate = {
    kind: 'offset',
    detail: threeDigits(amount),
    price,
    changes: cells.map((cell) => ({ ...change(cell), values: cell.values.map((value) => value - amount) })),
  }
  if (!(products > 0 && squares > 0)) return [shifted]
  const factor = products / squares
  return [
    shifted,
    {
      kind: 'proportion',
      detail: threeDigits(factor),
      price,
      changes: cells.map((cell) => multiplied(cell, 1 / factor)),
    },
  ]
}

function* oneApart(cell: LaboratoryCell): Generator<OneResult> {
  const n = cell.values.length
  if (n < 3) return
  const price = 1 + Math.log10(n)
  for (let index = 0; index < n; index += 1)
    yield { kind: 'oneApart', detail: cell.texts[index]!, price, index, to: null }
}

function change(cell: LaboratoryCell): Change {
  return { cell, values: cell.values, groups: cell.groups }
}

function multiplied(cell: LaboratoryCell, factor: number): Change {
  // Only the added part goes through the offset, so a factor near 1 costs no digits.
  const values = cell.values.map((value) => value + (factor - 1) * (cell.offset + value))
  return { ...change(cell), values }
}

function replaced(cell: LaboratoryCell, index: number, value: number): Change {
  return { ...change(cell), values: cell.values.map((own, place) => (place === index ? value : own)) }
}

function leftOut(cell: LaboratoryCell, index: number): Change {
  return {
    cell,
    values: cell.values.filter((_, place) => place !== index),
    groups: cell.groups.filter((_, place) => place !== index),
  }
}

/** The results of one material put in the place of another's. */
function carried(from: LaboratoryCell, to: LaboratoryCell): Change {
  const between = from.offset - to.offset
  return { cell: to, values: from.values.map((value) => value + between), groups: from.groups }
}

function threeDigits(value: number): string {
  return String(Number(value.toPrecision(3)))
}
