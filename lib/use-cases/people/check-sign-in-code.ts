import { timingSafeEqual } from 'node:crypto'
import { findLiveSignInRequest, insertCodeAttempt } from '@/db/queries/sign-in'
import type { AnonymousContext } from '@/lib/context'
import { Refusal } from '@/lib/domain/errors'

/**
 * The id of the request that an address and a code belong to. The code consumes nothing: the caller redeems the
 * request's token, which serves once whichever way it comes.
 *
 * After five tries the code is dead and the link in the mail still works: someone who guesses cannot lock out the
 * person who reads the mail.
 * @throws {Refusal} `bad-code`, in the same words for a wrong code, an old one, and an address that is nobody's
 */
export async function checkSignInCode(
  { db, secrets }: AnonymousContext,
  { address, code }: { address: string; code: string },
): Promise<{ requestId: string }> {
  const request = await findLiveSignInRequest(db, address)
  if (!request || !(await insertCodeAttempt(db, request.requestId))) throw badCode()
  const given = Buffer.from(secrets.hash(`${request.requestId}.${code.replace(/[\s-]/g, '')}`))
  const kept = Buffer.from(request.codeHash)
  if (given.length !== kept.length || !timingSafeEqual(given, kept)) throw badCode()
  return { requestId: request.requestId }
}

function badCode(): Refusal {
  const words =
    'This code does not fit, or no longer serves. A code lasts 10 minutes and five tries; the link in the same mail may still work.'
  return new Refusal('bad-code', words, 'code')
}
