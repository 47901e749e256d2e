import type { FormState } from './form-state'

/** What an error summary lists: what concerns the whole form first, then each field in the order of the answer. */
export function listFormErrors({ message, errors }: FormState): { field?: string; message: string }[] {
  const ofFields = Object.entries(errors).flatMap(([field, messages]) =>
    messages.map((each) => ({ field, message: each })),
  )
  return message ? [{ message }, ...ofFields] : ofFields
}
