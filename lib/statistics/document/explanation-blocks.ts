import type { AnalysedMaterial } from '@/lib/statistics/analyse-material'
import type { MaterialAnalysis, Noticed, Proposal } from '@/lib/statistics/analysis-document'
import type { AnalysisSettings } from '@/lib/statistics/analysis-input'
import { parseDecimal } from '@/lib/statistics/decimal'
import { required, withReasons } from '@/lib/statistics/document/attempt'
import { flaggedCells } from '@/lib/statistics/document/flagged-cells'
import type { MaterialCell } from '@/lib/statistics/document/material-data'
import { type Explanation, explanationsOf, type LaboratoryCell } from '@/lib/statistics/explanations'
import { mandelH, mandelK } from '@/lib/statistics/mandel'
import { NotComputable } from '@/lib/statistics/not-computable'
import { chanceOfIdentical, commonStep, trendPValue } from '@/lib/statistics/noticed'
import { summariseOthers } from '@/lib/statistics/surprise'

/**
 * Adds to each material of one measurand what might have gone wrong in its flagged cells, and what is noticed beside.
 * The order of materials stays.
 *
 * Both are `null` with a reason below 4 laboratories; a figure that belongs to another kind of observation is `null`
 * (`other-kind`), k of a cell left with one result too (`no-replicates`).
 *
 * Source: our own; `explanations.ts`, `noticed.ts`.
 */
export function explained(
  materials: readonly AnalysedMaterial[],
  settings: AnalysisSettings,
): MaterialAnalysis[] {
  const counted = materials
    .flatMap(({ data }) => data.cells)
    .filter(({ results }) => results.length >= 2).length
  const cellsOf = cellsByLaboratory(materials)
  const steps = commonSteps(materials)
  // A trend is one of all materials and is told once.
  const firstJudged = materials.find(({ summaries }) => summaries.length >= 4)
  return materials.map((one) => {
    if (one.summaries.length === 0) return withoutProposals(one, 'There is no result.')
    if (one.summaries.length < 4) return withoutProposals(one, '4 laboratories are needed.')
    const identical = identicalCells(one, cellsOf, counted)
    const flagged = [...new Set([...flaggedCells(one.analysis), ...identical.keys()])]
    return {
      ...one.analysis,
      proposals: flagged.flatMap((laboratory) =>
        explanationsOf(one.data.material, [...cellsOf.get(laboratory)!.values()], settings.units ?? []).map(
          (found) => proposalBlock(one, laboratory, found),
        ),
      ),
      noticed: [
        ...[...identical].map(([laboratory, probability]) =>
          noticedBlock({ laboratory, kind: 'identical', probability }),
        ),
        ...coarseSteps(one, steps, cellsOf, settings),
        ...(one === firstJudged ? trends(materials, cellsOf) : []),
      ],
    }
  })
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

/** By laboratory, then by material. */
type CellsByLaboratory = ReadonlyMap<string, ReadonlyMap<string, LaboratoryCell>>

/** All cells of each laboratory that have enough others beside them to be judged. */
function cellsByLaboratory(materials: readonly AnalysedMaterial[]): CellsByLaboratory {
  const all = new Map<string, Map<string, LaboratoryCell>>()
  for (const { data, summaries } of materials) {
    if (summaries.length < 4) continue
    const others = summariseOthers(summaries)
    data.cells.forEach((cell, index) => {
      const own = all.get(cell.laboratory) ?? new Map<string, LaboratoryCell>()
      all.set(cell.laboratory, own)
      own.set(data.material, {
        material: data.material,
        values: [...cell.deviations],
        offset: data.restore(0),
        texts: cell.results.map(({ text }) => text),
        groups: cell.results.map(({ groups }) => JSON.stringify(groups)),
        others: others[index]!,
      })
    })
  }
  return all
}

/** Cells whose results agree in every digit although the others' scatter makes that unlikely. */
function identicalCells(
  { data }: AnalysedMaterial,
  cellsOf: CellsByLaboratory,
  counted: number,
): Map<string, number> {
  const found = new Map<string, number>()
  for (const cell of data.cells) {
    const [first, ...more] = cell.integers
    if (more.length === 0 || more.some((one) => one !== first)) continue
    const { others } = judged(cellsOf, cell.laboratory, data.material)
    const probability = chanceOfIdentical({
      results: cell.integers.length,
      step: lastStep(cell),
      sd: Math.sqrt(others.repeatabilityVariance),
      cells: counted,
    })
    if (probability < 0.05) found.set(cell.laboratory, probability)
  }
  return found
}

function lastStep({ results }: MaterialCell): number {
  const scales = results.map(({ text }) => parseDecimal(text).scale)
  return Number(`1e${-Math.max(...scales)}`)
}

/** A laboratory needs this many results before a common step is no accident. */
const FEWEST_FOR_STEP = 4

/** The step of which all results of a laboratory, over all materials, are multiples. */
function commonSteps(materials: readonly AnalysedMaterial[]): Map<string, number> {
  const finest = Math.max(...materials.map(({ data }) => data.scale))
  const numbers = new Map<string, bigint[]>()
  for (const { data } of materials) {
    const factor = 10n ** BigInt(finest - data.scale)
    for (const { laboratory, integers } of data.cells) {
      const own = numbers.get(laboratory) ?? []
      numbers.set(laboratory, own)
      own.push(...integers.map((integer) => integer * factor))
    }
  }
  const steps = [...numbers].filter(([, own]) => own.length >= FEWEST_FOR_STEP)
  return new Map(steps.map(([laboratory, own]) => [laboratory, Number(`${commonStep(own)}e${-finest}`)]))
}

function coarseSteps(
  { data }: AnalysedMaterial,
  steps: ReadonlyMap<string, number>,
  cellsOf: CellsByLaboratory,
  { decimals }: AnalysisSettings,
): Noticed[] {
  const asked = Number(`1e${-(decimals?.[data.material] ?? data.scale)}`)
  return data.cells.flatMap(({ laboratory }): Noticed[] => {
    const step = steps.get(laboratory) ?? 0
    const sd = Math.sqrt(judged(cellsOf, laboratory, data.material).others.repeatabilityVariance)
    if (!(step > asked * 1.5) || !(sd > 0) || !(step > sd / 2)) return []
    return [noticedBlock({ laboratory, kind: 'coarse', step, share: step ** 2 / (12 * sd ** 2) })]
  })
}

function trends(materials: readonly AnalysedMaterial[], cellsOf: CellsByLaboratory): Noticed[] {
  return [...cellsOf.keys()].flatMap((laboratory) => {
    const cells = materials.flatMap(({ data }) => {
      const cell = data.cells.find((one) => one.laboratory === laboratory)
      const others = cellsOf.get(laboratory)?.get(data.material)?.others
      const sd = Math.sqrt(others?.repeatabilityVariance ?? 0)
      if (cell === undefined || sd === 0) return []
      return [
        cell.results.flatMap(({ order }, index) =>
          order == null ? [] : [{ order, value: cell.deviations[index]! / sd }],
        ),
      ]
    })
    const probability = trendPValue(cells.filter(({ length }) => length > 0))
    return probability !== null && probability < 0.01
      ? [noticedBlock({ laboratory, kind: 'trend', probability })]
      : []
  })
}

function judged(cellsOf: CellsByLaboratory, laboratory: string, material: string): LaboratoryCell {
  return cellsOf.get(laboratory)!.get(material)!
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

function proposalBlock(one: AnalysedMaterial, laboratory: string, found: Explanation): Proposal {
  const own = one.analysis.cells.find((cell) => cell.laboratory === laboratory)!
  const after = one.summaries.map((summary) =>
    summary.laboratory === laboratory ? { ...summary, ...found.changed } : summary,
  )
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
      h: attempt('h', () => mandelH(after).find((cell) => cell.laboratory === laboratory)!.h),
      k: attempt('k', () => {
        const k = mandelK(after).find((cell) => cell.laboratory === laboratory)?.k
        if (k === undefined) throw new NotComputable('no-replicates', 'The laboratory has no second result.')
        return k
      }),
      surprise: found.surpriseAfter,
    })),
    price: found.price,
    score: found.score,
  }
}
