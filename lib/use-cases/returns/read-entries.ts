import { readReportedValue, type DecimalMark } from '@/lib/domain/reported-value'
import { listPlaces, placeKey, type Place, type ReturnLayout } from '@/lib/spreadsheet/layout'

export interface EntryProblem {
  readonly key: string
  readonly found: string
  readonly message: string
  /** For a value that can be read in two ways. */
  readonly readings?: readonly [string, string]
}

export interface ReadEntry {
  readonly place: Place
  readonly value: string
  readonly censored: '<' | '>' | null
  readonly text: string
}

export interface ReadEntries {
  readonly results: readonly ReadEntry[]
  readonly missing: readonly Place[]
  readonly problems: readonly EntryProblem[]
  /** Results with fewer decimals than the study asks for: accepted, and said. */
  readonly coarse: readonly Place[]
}

/** Reads every place of a return at once, by the one reader for reported values; places it does not know are ignored. */
export function readEntries(
  layout: ReturnLayout,
  entries: Readonly<Record<string, string>>,
  decimalMark?: DecimalMark,
): ReadEntries {
  const results: ReadEntry[] = []
  const missing: Place[] = []
  const problems: EntryProblem[] = []
  const coarse: Place[] = []
  for (const place of listPlaces(layout)) {
    const key = placeKey(place)
    const text = Object.hasOwn(entries, key) ? (entries[key] ?? '') : ''
    const read = readReportedValue(text, decimalMark ? { decimalMark } : undefined)
    if (read.kind === 'missing') missing.push(place)
    else if (read.kind === 'fault') problems.push({ key, found: text, message: read.message })
    else if (read.kind === 'ambiguous')
      problems.push({ key, found: text, message: read.message, readings: read.readings })
    else {
      const measurand = layout.measurands.find(({ id }) => id === place.measurandId)
      const decimals = read.decimal.split('.')[1]?.length ?? 0
      if (measurand && read.kind === 'number' && decimals < measurand.decimals) coarse.push(place)
      results.push({
        place,
        value: read.decimal,
        censored: read.kind === 'censored' ? read.mark : null,
        text: text.trim(),
      })
    }
  }
  return { results, missing, problems, coarse }
}
