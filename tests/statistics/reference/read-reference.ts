import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import type { Cell } from '@/lib/statistics/cells'
import { centreExactly, type ExactlyCentred } from '@/lib/statistics/decimal'

export interface ReferenceRow {
  readonly lab: string
  readonly material: string
  readonly replicate: string
  readonly value: string
  readonly [level: string]: string
}

export interface ReferenceMaterial {
  readonly material: string
  readonly rows: readonly ReferenceRow[]
  readonly centred: ExactlyCentred
  /** All results of a laboratory as one cell, laboratories in the order of the file. */
  readonly cells: readonly Cell[]
  /** The material's entry of the expected file, as it stands. */
  // eslint-disable-next-line @typescript-eslint/no-explicit-any -- a hundred keys, read once each by the tests
  readonly expected: any
}

/** Data and expected values of one reference set, material by material. */
export function readReference(set: string): ReferenceMaterial[] {
  const rows = readRows(set)
  const expected = readJson(`expected/${set}.json`) as { materials: { material: string }[] }
  return expected.materials.map((entry) => {
    const own = rows.filter((row) => row.material === entry.material)
    return { material: entry.material, rows: own, expected: entry, ...cellsOf(own) }
  })
}

export function cellsOf(rows: readonly { lab: string; value: string }[]): {
  centred: ExactlyCentred
  cells: Cell[]
} {
  const centred = centreExactly(rows.map((row) => row.value))
  const cells = new Map<string, number[]>()
  rows.forEach((row, index) => {
    const cell = cells.get(row.lab) ?? []
    cell.push(centred.deviations[index] as number)
    cells.set(row.lab, cell)
  })
  return { centred, cells: [...cells].map(([laboratory, deviations]) => ({ laboratory, deviations })) }
}

export function readRows(set: string): ReferenceRow[] {
  const [header, ...lines] = readFileSync(join(import.meta.dirname, `data/${set}.csv`), 'utf8')
    .trim()
    .split(/\r?\n/)
  const names = (header as string).split(',')
  return lines.map((line) => {
    const fields = line.split(',')
    return Object.fromEntries(
      names.map((name, index) => [name, fields[index] ?? '']),
    ) as unknown as ReferenceRow
  })
}

export function readJson(path: string): unknown {
  return JSON.parse(readFileSync(join(import.meta.dirname, path), 'utf8'))
}
