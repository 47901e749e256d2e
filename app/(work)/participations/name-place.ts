import { measurandTitle, type Place, type ReturnLayout } from '@/lib/spreadsheet/layout'

/** A row in words: "hemp, day 1, replicate 2". */
export function nameRow(
  layout: ReturnLayout,
  { materialId, groups }: Pick<Place, 'materialId' | 'groups'>,
): string {
  const material = layout.materials.find(({ id }) => id === materialId)?.name ?? ''
  return [material, nameLevels(layout, groups)].filter(Boolean).join(', ')
}

/** The levels of a row in words; one that there is only one of is not worth a word. */
export function nameLevels({ levels }: ReturnLayout, groups: readonly number[]): string {
  return levels
    .flatMap(({ name, count }, index) =>
      count > 1 ? [`${name.toLocaleLowerCase('en-GB')} ${groups[index]}`] : [],
    )
    .join(', ')
}

export function namePlace(layout: ReturnLayout, place: Place): string {
  const measurand = layout.measurands.find(({ id }) => id === place.measurandId)
  const row = nameRow(layout, place)
  return measurand && layout.measurands.length > 1 ? `${row}, ${measurandTitle(measurand)}` : row
}
