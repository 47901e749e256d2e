import { readMailAddress } from '@/lib/domain/mail-address'
import { Refusal } from '@/lib/domain/errors'
import type { Parts } from '@/lib/wiring'
import { askLibraryForLink } from './call-library'
import { createSignInLimits } from './sign-in-limits'

/**
 * Mails a link and a code to the address if a person has it; whether one has cannot be told from here.
 *
 * Over its limit an address gets no further mail, in the same words: the latest link keeps working, so that
 * someone who asks in another's name cannot keep that person out.
 * @throws {Refusal} `bad-address`, or `too-many` when a crowd asks at once
 */
export async function requestSignInLink(
  parts: Parts,
  { address: typed, peer }: { address: string; peer: string | null },
): Promise<{ address: string }> {
  const address = readMailAddress(typed)
  const verdict = await createSignInLimits(parts.db, parts.secrets).take({ address, peer })
  if (verdict === 'crowd')
    throw new Refusal(
      'too-many',
      'Too many links were asked for from here. Wait an hour, or use the link you have.',
    )
  if (verdict === 'free') await askLibraryForLink(parts, address)
  return { address }
}
