import { readFileSync } from 'node:fs'
import { readAnalysisFile } from '@/lib/commands/read-analysis-file'
import { analyse, type AnalysisResult } from '@/lib/statistics'
import { algorithmA } from '@/lib/statistics/algorithm-a'
import { algorithmS } from '@/lib/statistics/algorithm-s'
import { type CellSummary, codesOfCells, summariseCells } from '@/lib/statistics/cells'
import {
  cochran,
  cochranCritical,
  generalisedCochran,
  generalisedCochranCritical,
} from '@/lib/statistics/cochran'
import { type MaterialData, materialData } from '@/lib/statistics/document/material-data'
import { grubbsPair, grubbsPairCritical } from '@/lib/statistics/grubbs-pair'
import { grubbsSingle, grubbsSingleCritical } from '@/lib/statistics/grubbs-single'
import { mandelH, mandelHCritical, mandelK, mandelKCritical } from '@/lib/statistics/mandel'
import { nestedAnova } from '@/lib/statistics/nested-anova'
import { buildNestedLayout, codeLabels } from '@/lib/statistics/nested-layout'
import { fTestFrom, oneWayPrecision } from '@/lib/statistics/one-way-precision'
import { oneWayTerms, sdInterval } from '@/lib/statistics/precision-intervals'
import { qOfCellMeans, qRepeatability, qReproducibility } from '@/lib/statistics/q-method'
import { fitReml } from '@/lib/statistics/reml'
import { spreadOfMeans } from '@/lib/statistics/spread-of-means'

/*
 * One file through the core, timed part by part. Usage: measure-core.ts FILE LEVEL|- PART,PART,… TURNS; prints one line of
 * JSON: the seconds of every turn by part, peak memory in MiB, the sum of the REML deviances, and a sum that R prints too,
 * so that both are known to have computed the same. All turns run in one process: the first meets code that the engine has
 * not yet compiled and quantiles that nobody has asked for, the later ones what a server meets.
 */
const [path, level, asked, turns] = process.argv.slice(2) as [string, string, string, string]
const parts = asked.split(',')
const nesting = level === '-' ? [] : [level]

const laps = new Map<string, number[]>()
let deviance = 0
let check = 0
for (let turn = 0; turn < Number(turns); turn += 1) await once()

const peak = process.resourceUsage().maxRSS / 1024
process.stdout.write(`${JSON.stringify({ seconds: Object.fromEntries(laps), peak, deviance, check })}\n`)

async function once(): Promise<void> {
  const bytes = readFileSync(path)
  const results = await lapAsync('parsing', async () => {
    const read = await readAnalysisFile(bytes, {
      nesting,
      columns: new Map(),
      keepExcluded: false,
      measurand: null,
    })
    if (read.problems.length > 0) throw new Error(JSON.stringify(read.problems[0]))
    return read.results
  })
  const materials = lap('decimals', () => decimalsOf(results))
  const summaries = lap('tests', () => materials.map(testsOf))
  if (parts.includes('robust')) lap('robust', () => summaries.forEach(robustOf))
  if (parts.includes('reml'))
    lap('reml', () => (deviance = materials.reduce((sum, one) => sum + devianceOf(one), 0)))
  if (parts.includes('pairs')) lap('pairs', () => summaries.forEach(pairsOf))
  if (parts.includes('q')) lap('q', () => materials.forEach(qOf))
  if (parts.includes('document')) {
    lap('document', () =>
      analyse({ results, nesting, settings: { limitFactor: 2.8 }, sha256: '', version: '' }),
    )
  }
}

function decimalsOf(results: readonly AnalysisResult[]): MaterialData[] {
  const byMaterial = new Map<string, AnalysisResult[]>()
  for (const result of results) {
    const own = byMaterial.get(result.material)
    if (own === undefined) byMaterial.set(result.material, [result])
    else own.push(result)
  }
  return [...byMaterial].map(([material, own]) => materialData({ material, measurand: null, results: own }))
}

/** What the R script computes in its part of this name, and the generalised test and two intervals more that it does not. */
function testsOf({ cells }: MaterialData, index: number): CellSummary[] {
  if (index === 0) check = 0
  const summaries = summariseCells(cells)
  const p = summaries.length
  const { repeatability, betweenLaboratories, reproducibility } = oneWayPrecision(summaries)
  const terms = oneWayTerms({
    laboratories: p,
    varianceOfCellMeans: betweenLaboratories.meanSquareOfMeans / betweenLaboratories.harmonicReplicates,
    harmonicCellSize: betweenLaboratories.harmonicReplicates,
    repeatabilityVariance: repeatability.variance,
    repeatabilityDf: repeatability.df,
  })
  sdInterval([{ weight: 1, ms: repeatability.variance, df: repeatability.df }], repeatability.variance)
  sdInterval(terms.betweenLaboratory, betweenLaboratories.variance)
  sdInterval(terms.reproducibility, reproducibility.variance)
  const spread = spreadOfMeans(summaries)
  mandelH(summaries, spread)
  const { cells: replicated, pooledDf } = mandelK(summaries)
  const dfs = new Set<number>()
  for (const { df } of replicated) dfs.add(df)
  for (const df of dfs) for (const alpha of [0.005, 0.01, 0.05]) mandelKCritical({ df, pooledDf, alpha })
  for (const alpha of [0.005, 0.01, 0.05]) mandelHCritical(p, alpha)
  const largest = cochran(summaries)
  const general = generalisedCochran(summaries)
  const ends = (['high', 'low'] as const).map((end) => grubbsSingle(summaries, end, spread))
  for (const alpha of [0.05, 0.01]) {
    cochranCritical({ cells: largest.cells, df: largest.df, alpha })
    generalisedCochranCritical({ cells: general.cells, df: general.df, pooledDf, alpha })
    grubbsSingleCritical(p, alpha)
  }
  fTestFrom(betweenLaboratories, repeatability)
  check += reproducibility.variance + largest.statistic + ends[0]!.statistic + ends[1]!.statistic
  return summaries
}

function robustOf(summaries: readonly CellSummary[]): void {
  algorithmA(summaries.map(({ mean }) => mean))
  algorithmS(summaries.map(({ sd, df }) => ({ sd: sd ?? 0, df })))
}

function devianceOf({ cells }: MaterialData): number {
  const layout = buildNestedLayout(['laboratory', ...nesting], {
    codes: [
      codesOfCells(cells),
      ...nesting.map((_, inner) => codeLabels(cells.results.map(({ groups }) => groups[inner]!)).codes),
    ],
    deviations: cells.deviations,
  })
  const { components } = nestedAnova(layout)
  const residual = components.at(-1)!.variance
  return fitReml(
    layout,
    components.slice(0, -1).map(({ variance }) => variance / residual),
  ).deviance
}

function pairsOf(summaries: readonly CellSummary[]): void {
  grubbsPair(summaries, 'high')
  grubbsPair(summaries, 'low')
  for (const alpha of [0.05, 0.01]) grubbsPairCritical(summaries.length, alpha)
}

function qOf({ cells, step }: MaterialData): void {
  qOfCellMeans(cells, step)
  qReproducibility(cells, step)
  qRepeatability(cells, step)
}

function lap<Value>(name: string, run: () => Value): Value {
  const began = performance.now()
  const value = run()
  record(name, began)
  return value
}

async function lapAsync<Value>(name: string, run: () => Promise<Value>): Promise<Value> {
  const began = performance.now()
  const value = await run()
  record(name, began)
  return value
}

function record(name: string, began: number): void {
  laps.set(name, [...(laps.get(name) ?? []), (performance.now() - began) / 1000])
}
