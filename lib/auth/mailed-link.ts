import type { EmailConfig } from '@auth/core/providers'
import type { AnonymousContext } from '@/lib/context'
import { readMailAddress } from '@/lib/domain/mail-address'
import { recordSignInRequest } from '@/lib/use-cases/people/record-sign-in-request'
import { hashLikeLibrary, linkLifetimeSeconds, requestIdOf, signInToken } from './sign-in-token'

export const mailedLinkId = 'mailed-link'

/** Signing in by a mailed link, whose mail goes through the outbox like every other. */
export function mailedLink(context: AnonymousContext, providerSecret: string): EmailConfig {
  return {
    id: mailedLinkId,
    type: 'email',
    name: 'Mailed link',
    maxAge: linkLifetimeSeconds,
    secret: providerSecret,
    normalizeIdentifier: (address) => readMailAddress(address),
    generateVerificationToken: () => signInToken(context.random.uuid(), context.secrets),
    // The library writes the token and sends the mail side by side; here both are one transaction, or nothing.
    sendVerificationRequest: ({ identifier, token }) =>
      recordSignInRequest(context, {
        requestId: requestIdOf(token),
        address: identifier,
        tokenHash: hashLikeLibrary(token, providerSecret),
        lifetimeSeconds: linkLifetimeSeconds,
      }),
  }
}
