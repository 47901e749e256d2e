import { algorithmA } from '@/lib/statistics/algorithm-a'
import { nestedAnova } from '@/lib/statistics/nested-anova'
import type { MaterialAnalysis, Reasons } from '@/lib/statistics/analysis-document'
import type { AnalysisResult, AnalysisSettings } from '@/lib/statistics/analysis-input'
import { type CellSummary, codesOfCells, summariseCells } from '@/lib/statistics/cells'
import { censoredMedian } from '@/lib/statistics/censored-median'
import { decimalToNumber, parseDecimal } from '@/lib/statistics/decimal'
import { anovaBlock } from '@/lib/statistics/document/anova-block'
import { notComputable, once, OUT_OF_RANGE, required, withReasons } from '@/lib/statistics/document/attempt'
import { cellBlocks } from '@/lib/statistics/document/cell-blocks'
import {
  assignedBlock,
  equalityBlock,
  scoresBlock,
  truenessBlock,
  varianceOfMean,
  variancesOfLaboratoryMeans,
} from '@/lib/statistics/document/comparison-blocks'
import { cochranBlock, criticalBlock, nestingLevelBlocks } from '@/lib/statistics/document/consistency-blocks'
import { grubbsBlock } from '@/lib/statistics/document/grubbs-block'
import {
  type MaterialCells,
  type MaterialData,
  NO_CELLS,
  resultsOfCell,
} from '@/lib/statistics/document/material-data'
import { precisionBlocks } from '@/lib/statistics/document/precision-blocks'
import { remlBlock } from '@/lib/statistics/document/reml-block'
import { robustBlock } from '@/lib/statistics/document/robust-block'
import { levelSummaries } from '@/lib/statistics/laboratory-summaries'
import { buildNestedLayout, codeLabels, requireReplicate } from '@/lib/statistics/nested-layout'
import { generalMeans } from '@/lib/statistics/one-way-precision'
import { ownSetting } from '@/lib/statistics/own-setting'
import type { IntegerCells } from '@/lib/statistics/pairwise-differences'
import { roundedPrecision } from '@/lib/statistics/rounding'

/** Above this share of lost cells no figure of the material is given. */
const MOST_CENSORED = 0.1

const CENSORED = 'More than 10 % of the cells hold a result below or above a limit.'

/** One material with the summaries that plots and explanations go on from. */
export type AnalysedMaterial = {
  data: MaterialData
  summaries: readonly CellSummary[]
  analysis: MaterialAnalysis
}

/**
 * Everything the analysis says of one material. Proposals and observations are left to the caller, because
 * they look at several materials at once.
 *
 * Variances are in the square of the results' unit, all other figures in that unit or pure. Nothing is refused:
 * what does not exist is `null` with its reason. Where the results cannot be squared, or censored results took
 * more than 10 % of the cells, every figure is `null` for that one reason. Two have no function of their own: n̄
 * (`too-few-laboratories` below 2) and n_h (`no-results`).
 *
 * Source: each figure's own function, and the table of `README.md`.
 */
export function analyseMaterial(
  data: MaterialData,
  nesting: readonly string[],
  settings: AnalysisSettings,
): AnalysedMaterial {
  if (data.isOutOfRange) {
    const emptied = analyseCells({
      data: { ...data, cells: NO_CELLS, bounds: [] },
      cells: NO_CELLS,
      nesting,
      settings,
    })
    return { data, summaries: [], analysis: withOneReason(emptied.analysis, OUT_OF_RANGE, ['trueness']) }
  }
  if (data.censoredShare > MOST_CENSORED) {
    const emptied = analyseCells({ data, cells: NO_CELLS, nesting, settings })
    return {
      data,
      summaries: [],
      analysis: withOneReason(emptied.analysis, CENSORED, ['median', 'trueness']),
    }
  }
  return { data, ...analyseCells({ data, cells: data.cells, nesting, settings }) }
}

function analyseCells(one: {
  data: MaterialData
  cells: MaterialCells
  nesting: readonly string[]
  settings: AnalysisSettings
}): { summaries: CellSummary[]; analysis: MaterialAnalysis } {
  const { data, cells, nesting, settings } = one
  const { restore } = data
  const layout = buildNestedLayout(['laboratory', ...nesting], {
    codes: [codesOfCells(cells), ...nesting.map((_, inner) => codesOfLevel(cells, inner))],
    deviations: cells.deviations,
  })
  const isNested = nesting.length > 0
  const wholes = summariseCells(cells)
  const levels = isNested ? levelSummaries(layout, cells) : []
  const summaries = isNested ? innermost(wholes, levels) : wholes
  const anova = once(() => nestedAnova(layout))
  const means = once(() => generalMeans(summaries))
  const uncertaintyOfMean = (): number => varianceOfMean(layout, anova())
  const harmonic = (): number => harmonicCellSize(summaries)

  const mean = summaries.length === 0 ? null : finiteOrNull(restore(means().weighted))
  const precision = precisionBlocks({
    summaries,
    layout,
    anova,
    mean,
    limitFactor: settings.limitFactor,
    trueZero: settings.trueZero ?? true,
  })
  const cellMeans = summaries.map((summary) => summary.mean)
  const robustMean = once(() => algorithmA(cellMeans))
  const robust = robustBlock({
    cellMeans,
    algorithmA: robustMean,
    cellSpreads: summaries.map(({ sd, df }) => ({ sd: sd ?? 0, df })),
    integers: cells,
    replicates: isNested ? innermostGroups(cells) : cells,
    isNested,
    requireReplicate: () => requireReplicate(layout),
    step: data.step,
    harmonicCellSize: summaries.length === 0 ? 1 : harmonic(),
    restore,
  })

  const given = ownSetting(settings.references, data.material)
  const reference =
    given === null
      ? null
      : {
          deviation: data.deviationOf(given.value),
          value: decimalToNumber(parseDecimal(given.value)),
          uncertainty: given.uncertainty,
        }
  const sigma = ownSetting(settings.sigmas, data.material)
  const variancesOfCellMeans = once((): number[] => {
    const between = required(precision.betweenLaboratory.variance, 'There is no laboratory component.')
    const sizes = summaries.map(({ n }) => n)
    if (isNested) return variancesOfLaboratoryMeans(layout, anova(), sizes)
    const within = required(precision.repeatability.variance, 'There is no repeatability.')
    return sizes.map((n) => between + within / n)
  })
  const assigned = assignedBlock({
    reference,
    robust: robust.algorithmA,
    mean,
    varianceOfMean: uncertaintyOfMean,
    sigma,
    variancesOfCellMeans,
    summaries,
  })
  const assignedDeviation = (): number =>
    assigned.source === 'reference'
      ? reference!.deviation
      : assigned.source === 'algorithmA'
        ? robustMean().mean
        : means().weighted

  const analysis = withReasons((attempt): Omit<MaterialAnalysis, 'reasons'> => ({
    material: data.material,
    measurand: attempt('measurand', () => required(data.measurand, 'No measurand is named.')),
    laboratories: summaries.length,
    results: layout.deviations.length,
    mean: attempt('mean', () => restore(means().weighted)),
    meanOfCellMeans: attempt('meanOfCellMeans', () => restore(means().unweighted)),
    median: attempt('median', () => restore(censoredMedian(meansOfCells(data.cells), data.bounds))),
    nBar: attempt('nBar', () => effectiveCellSize(summaries)),
    nHarmonic: attempt('nHarmonic', harmonic),
    ...precision,
    cells: cellBlocks({
      summaries,
      requireReplicate: () => requireReplicate(layout),
      restore,
      reference: () => reference?.deviation ?? notAskedFor(),
      scoresOf: (summary, index) =>
        scoresBlock({
          summary,
          assigned,
          assignedDeviation,
          laboratories: summaries.length,
          sigma: () => sigma ?? Math.sqrt(variancesOfCellMeans()[index]!),
          uncertainty: statedUncertainty(resultsOfCell(cells, index)),
        }),
    }),
    critical: criticalBlock(summaries, isNested),
    cochran: cochranBlock(summaries, layout),
    grubbs: grubbsBlock(summaries),
    anova: anovaBlock(anova, layout.confounded),
    reml: remlBlock({ layout, anova, restore }),
    robust,
    censored: data.censored,
    levels: nestingLevelBlocks(levels),
    trueness: attempt('trueness', () =>
      reference === null
        ? notAskedFor()
        : truenessBlock({
            reference,
            mean: () => means().weighted,
            laboratories: summaries.length,
            varianceOfMean: uncertaintyOfMean,
          }),
    ),
    equality: equalityBlock({ summaries, layout, anova, harmonicCellSize: harmonic }),
    assigned,
    proposals: [],
    noticed: [],
    rounded: roundedBlock(mean, precision),
  }))
  return { summaries, analysis }
}

/**
 * For a block that the settings do not ask for.
 *
 * @throws {NotComputable} `not-asked-for`, always.
 */
export function notAskedFor(): never {
  notComputable('not-asked-for', 'not asked for')
}

function innermost(wholes: readonly CellSummary[], levels: ReturnType<typeof levelSummaries>): CellSummary[] {
  const replicate = levels.find(({ isReplicate }) => isReplicate)
  return wholes.map((whole, index) => ({
    ...whole,
    sd: replicate?.laboratories[index]!.sd,
    df: replicate?.laboratories[index]!.df ?? 0,
  }))
}

/** The codes of an inner level's labels, result by result. */
function codesOfLevel({ results }: MaterialCells, inner: number): Int32Array {
  return codeLabels(results.map(({ groups }) => groups[inner]!)).codes
}

/** The results that differ by the replicate alone, group by group. */
function innermostGroups(cells: MaterialCells): IntegerCells {
  const { starts, units, results } = cells
  const order: number[] = []
  const ends = [0]
  for (let cell = 0; cell < cells.laboratories.length; cell += 1) {
    const groups = new Map<string, number[]>()
    for (let at = starts[cell]!; at < starts[cell + 1]!; at += 1) {
      const key = JSON.stringify(results[at]!.groups)
      const known = groups.get(key)
      if (known === undefined) groups.set(key, [at])
      else known.push(at)
    }
    for (const members of groups.values()) {
      for (const at of members) order.push(at)
      ends.push(order.length)
    }
  }
  return {
    units:
      units instanceof Float64Array
        ? Float64Array.from(order, (at) => units[at]!)
        : order.map((at) => units[at]!),
    starts: Int32Array.from(ends),
  }
}

/** A mean beyond every double is none, though the deviations from it may well be in range. */
function finiteOrNull(value: number): number | null {
  return Number.isFinite(value) ? value : null
}

function meansOfCells({ laboratories, starts, deviations }: MaterialCells): number[] {
  return laboratories.map((_, cell) => {
    let sum = 0
    for (let at = starts[cell]!; at < starts[cell + 1]!; at += 1) sum += deviations[at]!
    return sum / (starts[cell + 1]! - starts[cell]!)
  })
}

function harmonicCellSize(summaries: readonly CellSummary[]): number {
  if (summaries.length === 0) notComputable('no-results', 'There is no result.')
  return summaries.length / summaries.reduce((sum, { n }) => sum + 1 / n, 0)
}

function effectiveCellSize(summaries: readonly CellSummary[]): number {
  if (summaries.length < 2) notComputable('too-few-laboratories', '2 laboratories are needed.')
  const results = summaries.reduce((sum, { n }) => sum + n, 0)
  const squares = summaries.reduce((sum, { n }) => sum + n ** 2, 0)
  return (results - squares / results) / (summaries.length - 1)
}

/** A laboratory's standard uncertainty counts if it stands beside each of its results; several are joined as squares. */
function statedUncertainty(results: readonly AnalysisResult[]): number | null {
  const stated = results.map(({ uncertainty }) => uncertainty ?? null)
  if (stated.some((one) => one === null)) return null
  // Two by two: a call takes no hundred thousand arguments.
  return stated.reduce((sum: number, one) => Math.hypot(sum, one!), 0) / Math.sqrt(stated.length)
}

function roundedBlock(
  mean: number | null,
  precision: ReturnType<typeof precisionBlocks>,
): MaterialAnalysis['rounded'] {
  const texts = roundedPrecision({
    mean,
    repeatabilitySd: precision.repeatability.sd,
    betweenLaboratorySd: precision.betweenLaboratory.sd,
    intermediateSds: precision.intermediate.map(({ sd }) => sd),
    reproducibilitySd: precision.reproducibility.sd,
    repeatabilityLimit: precision.repeatability.limit,
    reproducibilityLimit: precision.reproducibility.limit,
  })
  return withReasons((attempt) => ({
    mean: attempt('mean', texts.mean),
    repeatability: attempt('repeatability', texts.repeatability),
    betweenLaboratory: attempt('betweenLaboratory', texts.betweenLaboratory),
    intermediate: texts.intermediate.map((text) => attempt('intermediate', text)),
    reproducibility: attempt('reproducibility', texts.reproducibility),
    repeatabilityLimit: attempt('repeatabilityLimit', texts.repeatabilityLimit),
    reproducibilityLimit: attempt('reproducibilityLimit', texts.reproducibilityLimit),
  }))
}

/** The same block with every reason replaced: what is missing is missing for one cause, not for want of data. */
function withOneReason(
  analysis: MaterialAnalysis,
  words: string,
  keeping: readonly string[],
): MaterialAnalysis {
  const replaced = replaceReasons(analysis, words) as MaterialAnalysis
  const own = Object.entries(analysis.reasons ?? {}).filter(([key]) =>
    ['measurand', ...keeping].includes(key),
  )
  return { ...replaced, reasons: { ...(replaced.reasons ?? {}), ...Object.fromEntries(own) } }
}

function replaceReasons(value: unknown, words: string): unknown {
  if (Array.isArray(value)) return value.map((one) => replaceReasons(one, words))
  if (value === null || typeof value !== 'object') return value
  return Object.fromEntries(
    Object.entries(value).map(([key, inner]) =>
      key === 'reasons'
        ? [
            key,
            Object.fromEntries(Object.keys((value as Required<Reasons>).reasons).map((one) => [one, words])),
          ]
        : [key, replaceReasons(inner, words)],
    ),
  )
}
