import type { z } from 'zod'
import { readFormFields } from './form-fields'
import type { FormState } from './form-state'

export type ParsedForm<T> = { ok: true; input: T; state: FormState } | { ok: false; state: FormState }

/** Reads a form by its schema. What the schema does not name is dropped; faults come back beside their fields. */
export function parseForm<Schema extends z.ZodType>(
  schema: Schema,
  form: FormData,
): ParsedForm<z.output<Schema>> {
  const { fields, values, nameOf } = readFormFields(form)
  let parsed = schema.safeParse(fields, { error: sayFault })
  if (!parsed.success && listsWanted(fields, parsed.error.issues))
    parsed = schema.safeParse(fields, { error: sayFault })
  if (parsed.success) return { ok: true, input: parsed.data, state: { errors: {}, values } }

  const errors = new Map<string, string[]>()
  for (const issue of parsed.error.issues) {
    const name = nameOf(issue.path)
    errors.set(name, [...(errors.get(name) ?? []), issue.message])
  }
  const message = errors.get('')?.join(' ')
  errors.delete('')
  return { ok: false, state: { errors: Object.fromEntries(errors), values, ...(message ? { message } : {}) } }
}

/**
 * A form cannot say "a list of one" or "an empty list": one ticked box looks like a text, none like nothing. Where
 * the schema wants a list, it is made one. Returns whether anything changed.
 */
function listsWanted(fields: Record<string, unknown>, issues: readonly z.core.$ZodIssue[]): boolean {
  let changed = false
  for (const issue of issues) {
    if (issue.code !== 'invalid_type' || issue.expected !== 'array' || issue.path.length === 0) continue
    const parent = issue.path.slice(0, -1).reduce<unknown>(memberOf, fields)
    const key = String(issue.path.at(-1))
    if (parent === null || typeof parent !== 'object') continue
    const value = memberOf(parent, key)
    if (value !== undefined && typeof value !== 'string') continue
    Object.defineProperty(parent, key, { value: value === undefined ? [] : [value], enumerable: true })
    changed = true
  }
  return changed
}

function memberOf(value: unknown, key: PropertyKey): unknown {
  return value !== null && typeof value === 'object' && Object.hasOwn(value, key)
    ? Reflect.get(value, key)
    : undefined
}

/** Words for faults for which the schema has none of its own. */
function sayFault(issue: z.core.$ZodRawIssue): string {
  if (issue.input === undefined || issue.input === '') return 'Fill this in.'
  switch (issue.code) {
    case 'invalid_type':
      return issue.expected === 'number' || issue.expected === 'int' ? 'Give a number.' : 'Check this entry.'
    case 'too_small':
      return issue.origin === 'number' ? `Give ${issue.minimum} or more.` : `Give at least ${issue.minimum}.`
    case 'too_big':
      return issue.origin === 'string'
        ? `Use at most ${issue.maximum} characters.`
        : `Give at most ${issue.maximum}.`
    case 'invalid_value':
      return 'Choose one of the options.'
    default:
      return 'Check this entry.'
  }
}
