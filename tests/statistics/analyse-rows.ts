import { analyse, type AnalysisDocument, type AnalysisResult, type AnalysisSettings } from '@/lib/statistics'

/** A row of a test's data: laboratory, value, and what else the test is about. */
export type TestRow = Partial<AnalysisResult> & { laboratory: string; text: string }

export function analyseRows(
  rows: readonly TestRow[],
  more: {
    nesting?: readonly string[]
    settings?: Partial<AnalysisSettings>
    otherMeasurands?: readonly TestRow[]
  } = {},
): AnalysisDocument {
  return analyse({
    results: rows.map(resultOf),
    otherMeasurands: more.otherMeasurands?.map(resultOf) ?? [],
    nesting: more.nesting ?? [],
    settings: { limitFactor: 2.8, ...more.settings },
    sha256: 'digest of the test',
    version: '0.0.0',
  })
}

function resultOf(row: TestRow): AnalysisResult {
  return { material: 'M', measurand: null, groups: [], censored: null, excluded: false, ...row }
}

/** One laboratory a line: its results, parted by spaces. */
export function rowsOf(cells: Readonly<Record<string, string>>, material = 'M'): TestRow[] {
  return Object.entries(cells).flatMap(([laboratory, texts]) =>
    texts.split(' ').map((text) => ({ laboratory, material, text })),
  )
}
