import { ZodError } from 'zod'
import { NotFound, Refusal, SignInNeeded } from '@/lib/domain/errors'
import { ForeignRequest } from './foreign-request-error'

export interface PublicError {
  readonly status: number
  readonly code: string
  readonly message: string
  readonly field?: string
}

/** Refusals whose status says more to a program than "the request could not be followed". */
const refusalStatus: Record<string, number> = {
  'too-many': 429,
  'too-large': 413,
  'wrong-type': 415,
  'wrong-state': 409,
  conflict: 409,
  'stale-draft': 409,
}

/** What may be said about an error outside, or null for a defect, of which nothing may. */
export function publicError(error: unknown): PublicError | null {
  if (error instanceof Refusal) {
    const status = refusalStatus[error.code] ?? 422
    return {
      status,
      code: error.code,
      message: error.publicMessage,
      ...(error.field ? { field: error.field } : {}),
    }
  }
  if (error instanceof NotFound)
    return { status: 404, code: 'not-found', message: 'There is nothing here for you.' }
  if (error instanceof SignInNeeded) return { status: 401, code: 'sign-in-needed', message: 'Sign in first.' }
  if (error instanceof ForeignRequest)
    return {
      status: 403,
      code: 'foreign-request',
      message: 'This request did not come from a page of this site.',
    }
  if (error instanceof ZodError) return { status: 400, code: 'bad-request', message: sayFirstFault(error) }
  return null
}

function sayFirstFault(error: ZodError): string {
  const issue = error.issues[0]
  const place = issue?.path.map(String).join('.')
  return place
    ? `The field “${place.slice(0, 60)}” cannot be read as it is.`
    : 'The request cannot be read as it is.'
}
