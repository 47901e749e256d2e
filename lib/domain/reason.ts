import { Refusal } from './errors'

/**
 * A decision is recorded with its reason; the database holds the same rule.
 * @throws {Refusal} `reason-needed`
 */
export function requireReason(reason: string, field = 'reason'): void {
  if (reason.trim().length < 10)
    throw new Refusal(
      'reason-needed',
      'Give the reason in a sentence of ten characters or more: it stands in the record.',
      field,
    )
  if (reason.length > 1000)
    throw new Refusal('reason-too-long', 'Keep the reason within 1000 characters.', field)
}
