/*
 * What a laboratory is asked to fill in, and the name of each place in it. Screens, the workbook written
 * for a laboratory and the reading of what comes back all take the layout from here, so that one place has
 * one key on every way in.
 */

export type ReturnLayout = {
  studyShortName: string
  measurands: readonly Measurand[]
  materials: readonly { id: string; name: string }[]
  /** The levels within a material, outermost first, the replicate last. */
  levels: readonly { name: string; count: number }[]
}

export type Measurand = { id: string; name: string; unit: string; decimals: number }

/** The sheets of the workbook that the product writes for a return. */
export const resultsSheetName = 'Results'
export const guideSheetName = 'How to fill in'

/** One row of the form: a material, and the number (from 1) of each level within it. */
export type LayoutRow = { materialId: string; groups: readonly number[] }

/** One value: a row and a measurand. */
export type Place = LayoutRow & { measurandId: string }

/** Row by row as they stand in the form; within a row, one place a measurand. */
export function listPlaces(layout: ReturnLayout): Place[] {
  return listRows(layout).flatMap((row) =>
    layout.measurands.map(({ id }) => ({ measurandId: id, materialId: row.materialId, groups: row.groups })),
  )
}

export function listRows(layout: ReturnLayout): LayoutRow[] {
  const combinations = layout.levels.reduce<number[][]>(
    (outer, { count }) =>
      outer.flatMap((groups) => Array.from({ length: count }, (_, index) => [...groups, index + 1])),
    [[]],
  )
  return layout.materials.flatMap(({ id }) => combinations.map((groups) => ({ materialId: id, groups })))
}

export function placeKey({ measurandId, materialId, groups }: Place): string {
  if (measurandId.includes('|') || materialId.includes('|'))
    throw new RangeError('An id in a place key holds no "|".')
  return `${measurandId}|${materialId}|${groups.join('.')}`
}

export function parsePlaceKey(key: string): Place {
  const found = /^([^|]+)\|([^|]+)\|(\d+(?:\.\d+)*)?$/.exec(key)
  if (found === null) throw new RangeError(`Not the key of a place: ${key.slice(0, 80)}`)
  const [, measurandId = '', materialId = '', groups = ''] = found
  return { measurandId, materialId, groups: groups === '' ? [] : groups.split('.').map(Number) }
}

/** How a measurand is headed in a table: `Breaking force (N)`, or its name alone where it has no unit. */
export function measurandTitle({ name, unit }: Measurand): string {
  return unit === '' ? name : `${name} (${unit})`
}
