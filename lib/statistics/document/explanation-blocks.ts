import type { AnalysedMaterial } from '@/lib/statistics/analyse-material'
import type { MaterialAnalysis, Noticed, Proposal } from '@/lib/statistics/analysis-document'
import type { AnalysisResult, AnalysisSettings } from '@/lib/statistics/analysis-input'
import type { ReplicatedCell } from '@/lib/statistics/cells'
import { parseDecimal } from '@/lib/statistics/decimal'
import { required, withReasons } from '@/lib/statistics/document/attempt'
import { flaggedCells } from '@/lib/statistics/document/flagged-cells'
import { type MaterialCells, type MaterialData, resultsOfCell } from '@/lib/statistics/document/material-data'
import { type Explanation, explanationsOf, type LaboratoryCell } from '@/lib/statistics/explanations'
import { mandelH, mandelK } from '@/lib/statistics/mandel'
import { NotComputable } from '@/lib/statistics/not-computable'
import { ownSetting } from '@/lib/statistics/own-setting'
import { chanceOfIdentical, commonStep, trendPValue } from '@/lib/statistics/noticed'
import { type Others, summariseOthers } from '@/lib/statistics/surprise'

/**
 * Adds to each material what might have gone wrong in its flagged cells, and what is noticed beside: one list for all
 * measurands, materials in their order within each.
 *
 * Each measurand is judged apart; only where a laboratory may have exchanged two of them is its cell of the same
 * material looked at in another, those that are not reported (`unreportedOf` a material) included.
 *
 * Both are `null` with a reason below 4 laboratories; a figure that belongs to another kind of observation is `null`
 * (`other-kind`), k of a cell left with one result too (`no-replicates`).
 *
 * Source: our own; `explanations.ts`, `noticed.ts`.
 */
export function explained({
  measurands,
  unreportedOf,
  settings,
}: {
  measurands: readonly (readonly AnalysedMaterial[])[]
  unreportedOf: (material: string) => readonly AnalysedMaterial[]
  settings: AnalysisSettings
}): MaterialAnalysis[] {
  const judged = measurands.map((materials) => materials.map(judgedMaterial))
  const inOthers = otherMeasurandsOf(judged.flat(), unreportedOf)
  return judged.flatMap((materials) => {
    const counted = materials.reduce((sum, { data }) => sum + cellsOfTwoOrMore(data.cells), 0)
    const steps = commonSteps(materials)
    // A trend is one of all materials and is told once.
    const firstJudged = materials.find(({ cells }) => cells.size > 0)
    return materials.map((one) => {
      if (one.summaries.length === 0) return withoutProposals(one, 'There is no result.')
      if (one.cells.size === 0) return withoutProposals(one, '4 laboratories are needed.')
      const identical = identicalCells(one, counted)
      const flagged = [...new Set([...flaggedCells(one.analysis), ...identical.keys()])]
      return {
        ...one.analysis,
        proposals: flagged.flatMap((laboratory) =>
          explanationsOf({
            flagged: one.data.material,
            cells: cellsOfLaboratory(laboratory, materials),
            inOtherMeasurands: cellsOfLaboratory(laboratory, inOthers(one)),
            units: settings.units ?? [],
          }).map((found) => proposalBlock(one, laboratory, found)),
        ),
        noticed: [
          ...[...identical].map(([laboratory, probability]) =>
            noticedBlock({ laboratory, kind: 'identical', probability }),
          ),
          ...coarseSteps(one, steps, settings),
          ...(one === firstJudged ? trends(materials) : []),
        ],
      }
    })
  })
}

/** A cell with what the other laboratories say of its material. */
type JudgedCell = {
  others: Others
  /** Its place among the material's cells, summaries and blocks. */
  index: number
}

/** By laboratory, in the order of the cells; none where there are fewer than 4, too few to judge by. */
type JudgedMaterial = AnalysedMaterial & { cells: ReadonlyMap<string, JudgedCell> }

function judgedMaterial(one: AnalysedMaterial): JudgedMaterial {
  const cells = new Map<string, JudgedCell>()
  if (one.summaries.length < 4) return { ...one, cells }
  const others = summariseOthers(one.summaries)
  one.data.cells.laboratories.forEach((laboratory, index) =>
    cells.set(laboratory, { others: others[index]!, index }),
  )
  return { ...one, cells }
}

/** The same material in the other measurands; what is not reported is judged at the first need. */
function otherMeasurandsOf(
  reported: readonly JudgedMaterial[],
  unreportedOf: (material: string) => readonly AnalysedMaterial[],
): (one: JudgedMaterial) => readonly JudgedMaterial[] {
  const known = new Map<string, readonly JudgedMaterial[]>()
  return ({ data: { material, measurand } }) => {
    if (measurand === null) return []
    const all = known.get(material) ?? [
      ...reported.filter(({ data }) => data.material === material),
      ...unreportedOf(material).map(judgedMaterial),
    ]
    known.set(material, all)
    return all.filter(({ data }) => data.measurand !== null && data.measurand !== measurand)
  }
}

function withoutProposals({ analysis }: AnalysedMaterial, words: string): MaterialAnalysis {
  const reason = analysis.reasons?.['mean'] ?? words
  return {
    ...analysis,
    proposals: null,
    noticed: null,
    reasons: { ...analysis.reasons, proposals: reason, noticed: reason },
  }
}

/** Its cells that have enough others beside them to be judged, in the order of the materials. */
function cellsOfLaboratory(laboratory: string, materials: readonly JudgedMaterial[]): LaboratoryCell[] {
  return materials.flatMap(({ data, cells }) => {
    const judged = cells.get(laboratory)
    return judged === undefined ? [] : [laboratoryCell(data, judged)]
  })
}

function laboratoryCell(data: MaterialData, { others, index }: JudgedCell): LaboratoryCell {
  const { starts, deviations } = data.cells
  const results = resultsOfCell(data.cells, index)
  return {
    material: data.material,
    measurand: data.measurand,
    values: [...deviations.subarray(starts[index], starts[index + 1])],
    offset: data.restore(0),
    deviationOf: data.deviationOf,
    texts: results.map(({ text }) => text),
    groups: results.map(({ groups }) => JSON.stringify(groups)),
    others,
  }
}

function cellsOfTwoOrMore({ laboratories, starts }: MaterialCells): number {
  return laboratories.filter((_, cell) => starts[cell + 1]! - starts[cell]! >= 2).length
}

/** Cells whose results agree in every digit although the others' scatter makes that unlikely. */
function identicalCells({ data, cells }: JudgedMaterial, counted: number): Map<string, number> {
  const found = new Map<string, number>()
  for (const [laboratory, { others, index }] of cells) {
    if (!areIdentical(data.cells, index)) continue
    const results = resultsOfCell(data.cells, index)
    const probability = chanceOfIdentical({
      results: results.length,
      step: lastStep(results),
      sd: Math.sqrt(others.repeatabilityVariance),
      cells: counted,
    })
    if (probability < 0.05) found.set(laboratory, probability)
  }
  return found
}

function areIdentical({ units, starts }: MaterialCells, cell: number): boolean {
  const start = starts[cell]!
  const end = starts[cell + 1]!
  if (end - start < 2) return false
  for (let at = start + 1; at < end; at += 1) if (units[at] !== units[start]) return false
  return true
}

function lastStep(results: readonly AnalysisResult[]): number {
  const scale = results.reduce((finest, { text }) => Math.max(finest, parseDecimal(text).scale), -Infinity)
  return Number(`1e${-scale}`)
}

/** A laboratory needs this many results before a common step is no accident. */
const FEWEST_FOR_STEP = 4

/** The step of which all results of a laboratory, over all materials, are multiples. */
function commonSteps(materials: readonly AnalysedMaterial[]): Map<string, number> {
  const finest = Math.max(...materials.map(({ data }) => data.scale))
  const found = new Map<string, { results: number; step: bigint }>()
  for (const { data } of materials) {
    const factor = 10n ** BigInt(finest - data.scale)
    const { laboratories, starts, units } = data.cells
    laboratories.forEach((laboratory, cell) => {
      const own = found.get(laboratory) ?? { results: 0, step: 0n }
      found.set(laboratory, own)
      own.results += starts[cell + 1]! - starts[cell]!
      // Most have come down to 1 after a few results, and there is nothing further to find.
      for (let at = starts[cell]!; at < starts[cell + 1]! && own.step !== 1n; at += 1)
        own.step = commonStep([own.step, BigInt(units[at]!) * factor])
    })
  }
  const steps = [...found].filter(([, { results }]) => results >= FEWEST_FOR_STEP)
  return new Map(steps.map(([laboratory, { step }]) => [laboratory, Number(`${step}e${-finest}`)]))
}

function coarseSteps(
  { data, cells }: JudgedMaterial,
  steps: ReadonlyMap<string, number>,
  { decimals }: AnalysisSettings,
): Noticed[] {
  const asked = Number(`1e${-(ownSetting(decimals, data.material) ?? data.scale)}`)
  return [...cells].flatMap(([laboratory, { others }]): Noticed[] => {
    const step = steps.get(laboratory) ?? 0
    const sd = Math.sqrt(others.repeatabilityVariance)
    if (!(step > asked * 1.5) || !(sd > 0) || !(step > sd / 2)) return []
    return [noticedBlock({ laboratory, kind: 'coarse', step, share: step ** 2 / (12 * sd ** 2) })]
  })
}

function trends(materials: readonly JudgedMaterial[]): Noticed[] {
  const laboratories = new Set(materials.flatMap(({ cells }) => [...cells.keys()]))
  return [...laboratories].flatMap((laboratory) => {
    const runs = materials.flatMap(({ data, cells }) => {
      const judged = cells.get(laboratory)
      const sd = Math.sqrt(judged?.others.repeatabilityVariance ?? 0)
      return judged === undefined || sd === 0 ? [] : [runsOf(data.cells, judged.index, sd)]
    })
    const probability = trendPValue(runs.filter(({ length }) => length > 0))
    return probability !== null && probability < 0.01
      ? [noticedBlock({ laboratory, kind: 'trend', probability })]
      : []
  })
}

/** The results of a cell whose place in the order of runs is known, in units of `sd`. */
function runsOf(cells: MaterialCells, index: number, sd: number): { order: number; value: number }[] {
  const start = cells.starts[index]!
  return resultsOfCell(cells, index).flatMap(({ order }, place) =>
    order == null ? [] : [{ order, value: cells.deviations[start + place]! / sd }],
  )
}

function noticedBlock(one: {
  laboratory: string
  kind: Noticed['kind']
  probability?: number
  step?: number
  share?: number
}): Noticed {
  return withReasons((attempt) => ({
    laboratory: one.laboratory,
    kind: one.kind,
    probability: attempt('probability', () => given(one.probability)),
    step: attempt('step', () => given(one.step)),
    share: attempt('share', () => given(one.share)),
  }))
}

function given(value: number | undefined): number {
  if (value === undefined) throw new NotComputable('other-kind', 'No figure of this kind of observation.')
  return value
}

function proposalBlock(one: JudgedMaterial, laboratory: string, found: Explanation): Proposal {
  const { index } = one.cells.get(laboratory)!
  const own = one.analysis.cells[index]!
  const after = one.summaries.with(index, { ...one.summaries[index]!, ...found.changed })
  return {
    laboratory,
    kind: found.kind,
    detail: found.detail,
    cells: [...found.materials],
    before: withReasons((attempt) => ({
      h: attempt('h', () => required(own.h, own.reasons?.['h'] ?? 'h could not be computed.')),
      k: attempt('k', () => required(own.k, own.reasons?.['k'] ?? 'k could not be computed.')),
      surprise: found.surpriseBefore,
    })),
    after: withReasons((attempt) => ({
      h: attempt('h', () => mandelH(after)[index]!),
      k: attempt('k', () => {
        const { cells, k } = mandelK(after)
        const place = cells.indexOf(after[index] as ReplicatedCell)
        if (place === -1) throw new NotComputable('no-replicates', 'The laboratory has no second result.')
        return k[place]!
      }),
      surprise: found.surpriseAfter,
    })),
    price: found.price,
    score: found.score,
  }
}
