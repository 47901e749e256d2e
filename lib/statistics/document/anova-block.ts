import type { AnovaBlock, AnovaRowBlock } from '@/lib/statistics/analysis-document'
import { withReasons } from '@/lib/statistics/document/attempt'
import { type AnovaRow, type NestedAnova, nestedTest } from '@/lib/statistics/nested-anova'

/**
 * The table of the analysis of variance, sums of squares and components in u², standard deviations in u; empty where
 * nothing can be compared, with the reason. Source: `nested-anova.ts`.
 */
export function anovaBlock(anova: () => NestedAnova, confounded: string | null): AnovaBlock {
  return withReasons((attempt) => {
    const found = attempt('rows', anova)
    return {
      rows: (found?.rows ?? []).map((row) => rowBlock(row, found!.rows)),
      components: (found?.components ?? []).map(({ source, raw, variance }) => ({
        source,
        varianceRaw: raw,
        variance,
        sd: Math.sqrt(variance),
      })),
      confounded,
    }
  })
}

function rowBlock(row: AnovaRow, rows: readonly AnovaRow[]): AnovaRowBlock {
  return withReasons((attempt) => {
    const test = attempt('f', () => nestedTest(rows, row.source))
    return {
      source: row.source,
      df: row.df,
      ss: row.ss,
      ms: row.ms,
      f: test?.f ?? null,
      pValue: test?.pValue ?? null,
      ems: row.ems,
      denominator: test?.denominator ?? null,
    }
  })
}
