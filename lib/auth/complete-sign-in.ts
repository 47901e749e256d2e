import { deleteSession } from '@/db/queries/sessions'
import { Refusal } from '@/lib/domain/errors'
import { readMailAddress } from '@/lib/domain/mail-address'
import { checkSignInCode } from '@/lib/use-cases/people/check-sign-in-code'
import { systemContext, type Parts } from '@/lib/wiring'
import { redeemWithLibrary } from './call-library'
import { readSessionToken } from './session-token'
import { createSignInLimits } from './sign-in-limits'
import { signInToken } from './sign-in-token'

interface Presented {
  readonly address: string
  /** From the link in the mail; or the code from the same mail. */
  readonly proof: { readonly token: string } | { readonly code: string }
  /** The session the browser came with, if any. It ends here: a session never outlives a sign-in. */
  readonly earlierSession: string | undefined
  readonly peer: string | null
}

/**
 * Signs a person in by what was mailed, once.
 * @returns the Set-Cookie header of the new session
 * @throws {Refusal} `bad-link` or `bad-code`
 */
export async function completeSignIn(
  parts: Parts,
  { address: typed, proof, earlierSession, peer }: Presented,
): Promise<{ setCookie: string }> {
  const address = readMailAddress(typed)
  const token = 'token' in proof ? proof.token : await tokenForCode(parts, { address, code: proof.code })
  const setCookie = await redeemWithLibrary(parts, { address, token })
  if (!setCookie) throw badLink()
  const earlier = readSessionToken(earlierSession)
  if (earlier) await deleteSession(parts.db, earlier.hash)
  await createSignInLimits(parts.db, parts.secrets).giveBack({ address, peer })
  return { setCookie }
}

async function tokenForCode(parts: Parts, given: { address: string; code: string }): Promise<string> {
  const { requestId } = await checkSignInCode(systemContext(parts), given)
  return signInToken(requestId, parts.secrets)
}

function badLink(): Refusal {
  const words =
    'This link was used already, or a later one took its place, or its 10 minutes are over. Ask for a new one.'
  return new Refusal('bad-link', words)
}
