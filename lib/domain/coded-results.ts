import { createHash } from 'node:crypto'

/** One measurand's results by code, in the order in which they are analysed and published. */
export interface CodedResult {
  readonly code: string
  readonly material: string
  readonly groups: readonly number[]
  /** Decimal text, as many decimals as reported. */
  readonly value: string
  readonly censored: '<' | '>' | null
  readonly excluded: boolean
}

/**
 * The coded results as the CSV that the `analyse` command reads: the same rows give the same bytes, and its
 * SHA-256 is the digest of an analysis's input.
 */
export function codedResultsCsv(
  levels: readonly { name: string }[],
  results: readonly CodedResult[],
): string {
  const header = [
    'laboratory',
    'material',
    ...levels.slice(0, -1).map(({ name }) => name),
    'replicate',
    'value',
    'excluded',
  ]
  const lines = results.map(({ code, material, groups, value, censored, excluded }) => [
    code,
    material,
    ...groups.map(String),
    `${censored ?? ''}${value}`,
    excluded ? 'set aside' : '',
  ])
  return [header, ...lines].map((line) => line.map(quoteField).join(',')).join('\n') + '\n'
}

export function digestText(text: string): string {
  return createHash('sha256').update(text).digest('hex')
}

/** Quotes where CSV asks for it, and keeps what a spreadsheet would take for a formula from being one. */
function quoteField(text: string): string {
  const isNumber = /^[<>]?-?\d+(\.\d+)?$/.test(text)
  const safe = !isNumber && /^[=+\-@\t\r]/.test(text) ? `'${text}` : text
  return /[",\n\r;]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe
}
