import { findPersonByAddress } from '@/db/queries/people'
import { insertSignInRequest, replaceVerificationToken } from '@/db/queries/sign-in'
import type { AnonymousContext } from '@/lib/context'
import { queueMail } from '@/lib/mail/queue-mail'

interface Asked {
  readonly requestId: string
  readonly address: string
  readonly tokenHash: string
  readonly lifetimeSeconds: number
}

/**
 * Records a wish to sign in, its token and its mail, in one transaction.
 *
 * An address that belongs to nobody gets the same rows at the same cost, so that neither words nor time tell it
 * apart; the worker, which nobody outside can time, finds no person behind it and sends nothing.
 */
export async function recordSignInRequest(
  { db, jobs, secrets }: AnonymousContext,
  { requestId, address, tokenHash, lifetimeSeconds }: Asked,
): Promise<void> {
  await db.transaction().execute(async (trx) => {
    const person = await findPersonByAddress(trx, address)
    // The token first: its lock puts requests of one address in a line.
    await replaceVerificationToken(trx, { address, tokenHash, lifetimeSeconds })
    await insertSignInRequest(trx, {
      requestId,
      address,
      codeHash: hashCode(secrets, requestId),
      lifetimeSeconds,
    })
    // A stranger's address does not stay in the outbox; the request that holds it is forgotten.
    await queueMail(trx, jobs, { kind: 'sign-in', recipient: person?.address ?? '', ids: { requestId } })
  })
}

function hashCode(secrets: AnonymousContext['secrets'], requestId: string): string {
  return secrets.hash(`${requestId}.${secrets.code(requestId)}`)
}
