/**
 * The id of the control called `name`, so that an error summary can link to a field it has never seen.
 * Names such as `materials.0.name` hold signs that would need escaping in a selector.
 */
export function fieldId(name: string): string {
  return `field-${name.replace(/[^A-Za-z0-9_-]+/g, '-')}`
}
