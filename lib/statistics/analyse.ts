import { type AnalysedMaterial, analyseMaterial, notAskedFor } from '@/lib/statistics/analyse-material'
import type {
  AnalysisDocument,
  HomogeneityCheck,
  LevelRelation,
  MeasurandAnalysis,
  TwoSamplePlot,
} from '@/lib/statistics/analysis-document'
import type { AnalysisInput, AnalysisResult, AnalysisSettings } from '@/lib/statistics/analysis-input'
import { notComputable, withReasons } from '@/lib/statistics/document/attempt'
import { explained } from '@/lib/statistics/document/explanation-blocks'
import { homogeneityBlock } from '@/lib/statistics/document/homogeneity-block'
import { levelRelationBlock } from '@/lib/statistics/document/level-relation-block'
import { materialData, type MaterialCells } from '@/lib/statistics/document/material-data'
import { planningBlock } from '@/lib/statistics/document/planning-block'
import { twoSampleBlock } from '@/lib/statistics/document/two-sample-blocks'
import { ownSetting } from '@/lib/statistics/own-setting'

/**
 * Analyses an interlaboratory study: the one function behind the server, the
 * command and every recomputation.
 *
 * Laboratories and materials keep the order in which they appear. The same input
 * gives the same document, byte for byte. What cannot be computed is `null` with
 * its reason; no number is ever NaN or infinite. With several measurands the level
 * relation and the pair plots stand under each (`by-measurand`).
 *
 * @throws {RangeError} for a text that is no decimal number, for inner levels that
 *   repeat or take a reserved name, for a result without a label for each, and for
 *   a plan that cannot be (below 2 laboratories, 1 replicate or a gamma of 1).
 */
export function analyse(input: AnalysisInput): AnalysisDocument {
  requireNesting(input)
  const groups = byMeasurandAndMaterial(input.results)
  const measurands = groups.map(({ measurand, materials }) => ({
    measurand,
    materials: materials.map(({ material, results }) =>
      analyseMaterial(materialData({ material, measurand, results }), input.nesting, input.settings),
    ),
  }))
  const only =
    measurands.length === 0 || measurands[0]!.measurand === null ? (measurands[0]?.materials ?? []) : null
  const all = measurands.flatMap(({ materials }) => materials)
  const explainedMaterials = explained({
    measurands: measurands.map(({ materials }) => materials),
    unreportedOf: unreportedMeasurands(input),
    settings: input.settings,
  })

  const analysed = withReasons((attempt): Omit<AnalysisDocument, 'reasons'> => ({
    engine: { name: 'evenlot', version: input.version },
    input: inputBlock(input, sum(all.map(({ data }) => data.cells.results.length))),
    settings: { limitFactor: input.settings.limitFactor },
    materials: explainedMaterials,
    levelRelation: attempt('levelRelation', () => levelRelationOf(only ?? byMeasurand())),
    youden: attempt('youden', () => youden(only ?? byMeasurand(), input.settings)),
    homogeneity: attempt('homogeneity', () => homogeneity(all, input.settings)),
    planning: attempt('planning', () =>
      input.settings.plan === undefined ? notAskedFor() : planningBlock(input.settings.plan),
    ),
    measurands:
      only !== null
        ? attempt('measurands', notAskedFor)
        : measurands.map(({ measurand, materials }): MeasurandAnalysis => ({
            measurand: measurand!,
            levelRelation: levelRelationOf(materials),
            youden: youden(materials, input.settings),
          })),
  }))
  assertFinite(analysed, 'document')
  return analysed
}

/** Names the analysis itself gives to the outermost and the innermost source of variation. */
const RESERVED = ['laboratory', 'residual']

function requireNesting({ nesting, results, otherMeasurands = [] }: AnalysisInput): void {
  if (new Set([...nesting, ...RESERVED]).size !== nesting.length + RESERVED.length) {
    throw new RangeError(
      `inner levels must differ from each other and from ${RESERVED.join(', ')}: ${nesting.join(', ')}`,
    )
  }
  const isOdd = ({ groups }: AnalysisResult): boolean => groups.length !== nesting.length
  const odd = results.find(isOdd) ?? otherMeasurands.find(isOdd)
  if (odd !== undefined) {
    throw new RangeError(
      `a result of ${odd.laboratory} has ${odd.groups.length} labels for ${nesting.length} inner levels`,
    )
  }
}

function byMeasurand(): never {
  notComputable('by-measurand', 'Given for each measurand.')
}

type MaterialGroup = { material: string; results: AnalysisResult[] }

function byMeasurandAndMaterial(
  results: readonly AnalysisResult[],
): { measurand: string | null; materials: MaterialGroup[] }[] {
  const measurands = new Map<string | null, Map<string, AnalysisResult[]>>()
  for (const result of results) {
    const materials = measurands.get(result.measurand) ?? new Map<string, AnalysisResult[]>()
    measurands.set(result.measurand, materials)
    const known = materials.get(result.material)
    if (known === undefined) materials.set(result.material, [result])
    else known.push(result)
  }
  return [...measurands].map(([measurand, materials]) => ({
    measurand,
    materials: [...materials].map(([material, own]) => ({ material, results: own })),
  }))
}

/** One material of each measurand that is not reported; analysed when asked for, which is seldom. */
function unreportedMeasurands(input: AnalysisInput): (material: string) => AnalysedMaterial[] {
  const groups = byMeasurandAndMaterial(input.otherMeasurands ?? [])
  const { limitFactor } = input.settings
  return (wanted) =>
    groups.flatMap(({ measurand, materials }) =>
      materials
        .filter(({ material }) => material === wanted)
        .map(({ material, results }) =>
          analyseMaterial(materialData({ material, measurand, results }), input.nesting, { limitFactor }),
        ),
    )
}

function inputBlock({ results, nesting, sha256 }: AnalysisInput, used: number): AnalysisDocument['input'] {
  const reported = results.filter(({ text }) => text !== '')
  const withData = reported.filter(({ excluded }) => !excluded)
  const quantified = withData.filter(({ censored }) => censored === null)
  return {
    sha256,
    results: used,
    besideCensored: quantified.length - used,
    excluded: reported.length - withData.length,
    censored: withData.length - quantified.length,
    missing: results.length - reported.length,
    laboratories: new Set(withData.map(({ laboratory }) => laboratory)).size,
    materials: new Set(results.map(({ material }) => material)).size,
    nesting: ['laboratory', ...nesting, 'replicate'],
  }
}

function levelRelationOf(materials: readonly AnalysedMaterial[]): LevelRelation {
  return levelRelationBlock(materials.map(({ analysis }) => analysis))
}

function youden(materials: readonly AnalysedMaterial[], settings: AnalysisSettings): TwoSamplePlot[] {
  const byName = new Map(
    materials.map(({ data, summaries }) => [
      data.material,
      { material: data.material, summaries, restore: data.restore },
    ]),
  )
  const names = [...byName.keys()]
  const neighbours = names.flatMap((name, index): [string, string][] =>
    index % 2 === 0 && index + 1 < names.length ? [[name, names[index + 1]!]] : [],
  )
  return (settings.pairs ?? neighbours).flatMap(([x, y]) => {
    const [onX, onY] = [byName.get(x), byName.get(y)]
    return onX === undefined || onY === undefined ? [] : [twoSampleBlock(onX, onY)]
  })
}

function homogeneity(materials: readonly AnalysedMaterial[], settings: AnalysisSettings): HomogeneityCheck[] {
  if (settings.homogeneity !== true) return notAskedFor()
  return materials.map(({ data, summaries }) =>
    homogeneityBlock({
      material: data.material,
      units: data.isOutOfRange ? [] : deviationsByCell(data.cells),
      summaries,
      target: ownSetting(settings.sigmas, data.material),
    }),
  )
}

function deviationsByCell({ laboratories, starts, deviations }: MaterialCells): number[][] {
  return laboratories.map((_, cell) => [...deviations.subarray(starts[cell], starts[cell + 1])])
}

function sum(counts: readonly number[]): number {
  return counts.reduce((total, count) => total + count, 0)
}

/** A last look: whatever slipped through is a defect of the program, not a property of the data. */
function assertFinite(value: unknown, path: string): void {
  if (isFiniteThroughout(value)) return
  if (typeof value === 'number') throw new Error(`${path} is ${value}`)
  for (const [key, inner] of Object.entries(value as object)) assertFinite(inner, `${path}.${key}`)
}

/** Tells no place, so that the whole of a large document is walked without making a name for each of its figures. */
function isFiniteThroughout(value: unknown): boolean {
  if (typeof value === 'number') return Number.isFinite(value)
  if (value === null || typeof value !== 'object') return true
  for (const key in value) if (!isFiniteThroughout(value[key as keyof typeof value])) return false
  return true
}
