import { createHash } from 'node:crypto'
import type { LinkSecrets } from '@/lib/context'

/** A mailed link and its code serve this long, by the database's clock. */
export const linkLifetimeSeconds = 600

/** What a sign-in link carries: the id of its request, and the secret that only the server can derive from it. */
export function signInToken(requestId: string, secrets: LinkSecrets): string {
  return `${requestId}.${secrets.token('sign-in', requestId)}`
}

export function requestIdOf(token: string): string {
  return token.split('.', 1)[0] ?? ''
}

/** The hash by which the library looks a token up: SHA-256 of the token followed by the provider's secret. */
export function hashLikeLibrary(token: string, providerSecret: string): string {
  return createHash('sha256').update(`${token}${providerSecret}`).digest('hex')
}
