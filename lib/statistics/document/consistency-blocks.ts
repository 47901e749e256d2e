import type {
  CochranBlock,
  ConsistencyCriticalValues,
  CriticalBlock,
  GeneralisedCochranBlock,
  NestingLevelBlock,
  OutlierCriticalValues,
  OutlierLevel,
  Reasons,
} from '@/lib/statistics/analysis-document'
import { type CellSummary, replicatedCells } from '@/lib/statistics/cells'
import {
  cochran,
  cochranCritical,
  generalisedCochran,
  generalisedCochranCritical,
} from '@/lib/statistics/cochran'
import { notComputable, once, required, withReasons } from '@/lib/statistics/document/attempt'
import type { LevelSummaries } from '@/lib/statistics/laboratory-summaries'
import { type NestedLayout, requireReplicate } from '@/lib/statistics/nested-layout'
import {
  type KOf,
  mandelHCritical,
  mandelK,
  mandelKCritical,
  mandelKPValue,
  sharesOfOthers,
} from '@/lib/statistics/mandel'

const NO_SCATTER_HERE = 'This laboratory has no second result to compare at this level.'

type Critical = ConsistencyCriticalValues & Reasons

/**
 * Critical values of h for the laboratories at hand, and of k for each cell size that occurs; at 0.5, 1 and 5 %, pure
 * numbers. A nested layout has those of k by degrees of freedom alone.
 *
 * Source: `mandel.ts`.
 */
export function criticalBlock(summaries: readonly CellSummary[], isNested: boolean): CriticalBlock {
  const replicated = replicatedCells(summaries)
  const pooledDf = replicated.reduce((sum, { df }) => sum + df, 0)
  const dfs = [...new Set(replicated.map(({ df }) => df))].sort((one, other) => one - other)
  const kByDf = Object.fromEntries(dfs.map((df) => [String(df), kCriticalBlock(df, pooledDf)]))
  return {
    h: hCriticalBlock(summaries.length),
    k: isNested ? {} : Object.fromEntries(dfs.map((df) => [String(df + 1), kByDf[String(df)]!])),
    kByDf,
  }
}

/**
 * Critical values of k for one cell on `df` of all `pooledDf`, at 0.5, 1 and 5 %. `requireReplicate` fails where no two
 * results differ by the replicate alone. Source: `mandel.ts`.
 */
export function kCriticalBlock(df: number, pooledDf: number, requireReplicate = (): void => {}): Critical {
  const critical = (alpha: number): number => {
    requireReplicate()
    return mandelKCritical({ df, pooledDf, alpha })
  }
  return withReasons((attempt) => ({
    '0.005': attempt('0.005', () => critical(0.005)),
    '0.01': attempt('0.01', () => critical(0.01)),
    '0.05': attempt('0.05', () => critical(0.05)),
  }))
}

/** k of the cells in their order, `null` where one has none, computed when first asked for; fails as `mandelK` does. */
export function kOfCells(summaries: readonly CellSummary[]): () => readonly (JudgedK | null)[] {
  return once(() => {
    const { cells, k, pooledDf } = mandelK(summaries)
    const shares = sharesOfOthers(summaries)
    let place = 0
    return summaries.map((summary) => {
      if (summary !== cells[place]) return null
      const judged = { k: k[place]!, df: summary.df, pooledDf, shareOfOthers: shares[place]! }
      place += 1
      return judged
    })
  })
}

/** k with what its p-value needs besides. */
export type JudgedK = KOf & { readonly k: number; readonly shareOfOthers: number }

/**
 * Cochran's test of the cells' scatter, in both forms. With equal degrees of freedom the standard's C sets the level,
 * otherwise the generalised one does.
 *
 * `nUsed` is `null` (`nested`) where cells are judged by degrees of freedom. Source: `cochran.ts`.
 */
export function cochranBlock(summaries: readonly CellSummary[], layout: NestedLayout): CochranBlock {
  const isNested = layout.levels.length > 1
  const tested = once(() => {
    requireReplicate(layout)
    return cochran(summaries)
  })
  const generalised = generalisedCochranBlock(summaries, () => requireReplicate(layout))
  return withReasons((attempt) => {
    const test = attempt('statistic', tested)
    return {
      laboratory: test?.laboratory ?? null,
      statistic: test?.statistic ?? null,
      critical: criticalValues((alpha) => {
        const { cells, df } = tested()
        return cochranCritical({ cells, df, alpha })
      }),
      pValue: test?.pValue ?? null,
      // With unequal cells the standard's statistic is only approximate; the generalised one decides.
      level: test === null ? null : test.isBalanced ? outlierLevel(test.pValue) : generalised.level,
      nUsed: attempt('nUsed', () =>
        isNested
          ? notComputable('nested', 'In a nested layout dfUsed stands in its place.')
          : tested().df + 1,
      ),
      dfUsed: test?.df ?? null,
      laboratoriesUsed: test?.cells ?? null,
      generalised,
    }
  })
}

/**
 * The generalised test alone, for the cells of any level. `requireScatter` fails where no two results differ by the
 * replicate alone. Source: 't Lam 2010; `cochran.ts`.
 */
export function generalisedCochranBlock(
  summaries: readonly CellSummary[],
  requireScatter = (): void => {},
): GeneralisedCochranBlock {
  const tested = once(() => {
    requireScatter()
    return generalisedCochran(summaries)
  })
  return withReasons((attempt) => {
    const test = attempt('statistic', tested)
    return {
      laboratory: test?.laboratory ?? null,
      statistic: test?.statistic ?? null,
      critical: criticalValues((alpha) => {
        const { cells, df, pooledDf } = tested()
        return generalisedCochranCritical({ cells, df, pooledDf, alpha })
      }),
      pValue: test?.pValue ?? null,
      level: test === null ? null : outlierLevel(test.pValue),
    }
  })
}

/**
 * k and Cochran's generalised test at each level between laboratory and replicate, with that level's mean square of
 * each laboratory in u². Exact when the level is balanced. Source: `laboratory-summaries.ts`.
 */
export function nestingLevelBlocks(levels: readonly LevelSummaries[]): NestingLevelBlock[] {
  return levels
    .filter(({ isReplicate }) => !isReplicate)
    .map(({ source, laboratories }) => ({
      source,
      cells: levelCells(laboratories),
      cochran: generalisedCochranBlock(laboratories),
    }))
}

/**
 * The level of a test by its p-value: straggler below 5 %, outlier below 1 %. It proposes and removes nothing.
 *
 * Source: ISO 5725-2:1994, 7.3.
 */
export function outlierLevel(pValue: number): OutlierLevel {
  if (pValue < 0.01) return 'outlier'
  return pValue < 0.05 ? 'straggler' : 'none'
}

function levelCells(laboratories: readonly CellSummary[]): NestingLevelBlock['cells'] {
  const kStatistics = kOfCells(laboratories)
  return laboratories.map((summary, index) => levelCell(summary, () => kStatistics()[index]!))
}

function hCriticalBlock(laboratories: number): Critical {
  return withReasons((attempt) => ({
    '0.005': attempt('0.005', () => mandelHCritical(laboratories, 0.005)),
    '0.01': attempt('0.01', () => mandelHCritical(laboratories, 0.01)),
    '0.05': attempt('0.05', () => mandelHCritical(laboratories, 0.05)),
  }))
}

/** Critical values at the two levels; where there is no test, they are missing for the same reason. */
function criticalValues(atLevel: (alpha: number) => number): OutlierCriticalValues {
  return withReasons((attempt) => ({
    '0.05': attempt('0.05', () => atLevel(0.05)),
    '0.01': attempt('0.01', () => atLevel(0.01)),
  }))
}

function levelCell(summary: CellSummary, kOfCell: () => JudgedK | null): NestingLevelBlock['cells'][number] {
  return withReasons((attempt) => {
    const own = attempt('k', () => required(kOfCell(), NO_SCATTER_HERE))
    return {
      laboratory: summary.laboratory,
      df: summary.df,
      ms: attempt('ms', () => required(summary.sd ?? null, NO_SCATTER_HERE) ** 2),
      k: own?.k ?? null,
      kPValue: own === null ? null : attempt('kPValue', () => mandelKPValue(own, own.shareOfOthers)),
    }
  })
}
