/** What a form holds, as plain values, with the way back from a parsed place to the field that was typed. */
export interface FormFields {
  readonly fields: Record<string, unknown>
  /** As typed, by field name, to be shown again. */
  readonly values: Record<string, string | string[]>
  /** The typed name of a parsed place: `["rows", 1, "name"]` may be "rows.7.name" when rows were taken out. */
  nameOf(path: readonly PropertyKey[]): string
}

const mostFields = 5100
const mostSegments = 6
const forbidden = new Set(['__proto__', 'constructor', 'prototype'])

type Branch = Map<string, Branch | string | string[]>

/**
 * Reads the texts of a form: a name that repeats gives a list, and "rows.0.name" gives a list of objects.
 *
 * Files are left out; they take another way in. So are the framework's own fields and any name that could
 * reach behind an object.
 */
export function readFormFields(form: FormData): FormFields {
  const root: Branch = new Map()
  const values: [string, string | string[]][] = []
  for (const name of [...new Set(form.keys())].slice(0, mostFields)) {
    const path = name.split('.')
    if (name.startsWith('$') || path.length > mostSegments || path.some(isUnusable)) continue
    const texts = form.getAll(name).filter((value): value is string => typeof value === 'string')
    if (texts.length === 0) continue
    const value = texts.length === 1 ? (texts[0] ?? '') : texts
    if (plant(root, path, value)) values.push([name, value])
  }
  const renamed = new Map<string, string>()
  const fields = branchToObject(root, [], [], renamed)
  return {
    fields,
    values: Object.fromEntries(values),
    nameOf: (path) => typedName(path.map(String), renamed),
  }
}

function isUnusable(segment: string): boolean {
  return segment === '' || segment.length > 100 || forbidden.has(segment)
}

/** False when the name runs through a field that already holds a text. */
function plant(root: Branch, path: readonly string[], value: string | string[]): boolean {
  let branch = root
  for (const segment of path.slice(0, -1)) {
    const next = branch.get(segment) ?? new Map()
    if (!(next instanceof Map)) return false
    branch.set(segment, next)
    branch = next
  }
  const last = path.at(-1) ?? ''
  if (branch.has(last)) return false
  branch.set(last, value)
  return true
}

function branchToObject(branch: Branch, parsed: string[], typed: string[], renamed: Map<string, string>) {
  const members = [...branch].map(([key, value]) => {
    const place = [...parsed, key]
    return [
      key,
      value instanceof Map ? branchToValue(value, place, [...typed, key], renamed) : value,
    ] as const
  })
  return Object.fromEntries(members)
}

/** Rows keep their order by number; numbers that are missing close up, and the way back is noted. */
function branchToValue(
  branch: Branch,
  parsed: string[],
  typed: string[],
  renamed: Map<string, string>,
): unknown {
  const keys = [...branch.keys()]
  if (!keys.every((key) => /^\d{1,4}$/.test(key))) return branchToObject(branch, parsed, typed, renamed)
  return keys
    .sort((a, b) => Number(a) - Number(b))
    .map((key, index) => {
      const place = [...parsed, String(index)]
      const name = [...typed, key]
      renamed.set(place.join('.'), name.join('.'))
      const value = branch.get(key)
      return value instanceof Map ? branchToValue(value, place, name, renamed) : value
    })
}

function typedName(path: readonly string[], renamed: ReadonlyMap<string, string>): string {
  for (let length = path.length; length > 0; length -= 1) {
    const typed = renamed.get(path.slice(0, length).join('.'))
    if (typed) return [typed, ...path.slice(length)].join('.')
  }
  return path.join('.')
}
