import { z } from 'zod'

/** A tick box: sent when ticked, absent when not. */
export function checkboxField() {
  return z
    .string()
    .optional()
    .transform((value) => value !== undefined && value !== 'false')
}
