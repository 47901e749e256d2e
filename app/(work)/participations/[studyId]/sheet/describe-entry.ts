import { formatFigure } from '@/app/ui/primitives/format-figure'
import { readReportedValue } from '@/lib/domain/reported-value'
import type { Measurand } from '@/lib/spreadsheet/layout'

export type EntryWords =
  | { kind: 'empty' }
  | { kind: 'fine'; words: string; isCoarse: boolean }
  | { kind: 'fault'; words: string }
  | { kind: 'question'; words: string; readings: readonly [string, string] }

/** What is said of a typed value, at once and beside it. Read by the very reader that decides later. */
export function describeEntry(text: string, { unit, decimals }: Measurand): EntryWords {
  const read = readReportedValue(text)
  switch (read.kind) {
    case 'missing':
      return { kind: 'empty' }
    case 'fault':
      return { kind: 'fault', words: read.message }
    case 'ambiguous':
      return {
        kind: 'question',
        words: `${read.readings[0]} or ${read.readings[1]}?`,
        readings: read.readings,
      }
    case 'censored':
      return {
        kind: 'fine',
        isCoarse: false,
        words: `Read as ${read.mark === '<' ? 'below' : 'above'} ${withUnit(read.decimal, unit)}.`,
      }
    case 'number': {
      const given = read.decimal.split('.')[1]?.length ?? 0
      const isCoarse = given < decimals
      return {
        kind: 'fine',
        isCoarse,
        words: `Read as ${withUnit(read.decimal, unit)}. ${sayDecimals(given, decimals)}`.trim(),
      }
    }
  }
}

function withUnit(decimal: string, unit: string): string {
  return unit === '' ? formatFigure(decimal) : `${formatFigure(decimal)}\u00a0${unit}`
}

function sayDecimals(given: number, asked: number): string {
  if (asked === 0) return ''
  if (given < asked) return `${count(given)}, where the method asks for ${asked}: add them if you have them.`
  return given === asked
    ? `${count(given)}, as the method asks.`
    : `${count(given)}, more than the method asks.`
}

function count(decimals: number): string {
  const words = ['No decimal', 'One decimal', 'Two decimals', 'Three decimals', 'Four decimals']
  return words[decimals] ?? `${decimals} decimals`
}
