/*
 * The name of a place's field is its position in the form. The key of a place holds signs that a form reader
 * takes for structure, and five thousand keys would fill a request by themselves.
 */

const pattern = /^entry-(\d{1,4})$/

export function entryName(position: number): string {
  return `entry-${position}`
}

/** What a form typed, by position; whatever is named otherwise is left out. */
export function readEntryFields(fields: Readonly<Record<string, unknown>>): Map<number, string> {
  return new Map(
    Object.entries(fields).flatMap(([name, value]) => {
      const position = pattern.exec(name)?.[1]
      return position !== undefined && typeof value === 'string'
        ? [[Number(position), value.slice(0, 200)] as const]
        : []
    }),
  )
}
