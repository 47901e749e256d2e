import { Auth, skipCSRFCheck } from '@auth/core'
import type { Parts } from '@/lib/wiring'
import { authConfig } from './auth-config'
import { mailedLinkId } from './mailed-link'
import { sessionCookieName } from './session-cookie'

/** Has the library write down a request for a link. Throws when it could not. */
export async function askLibraryForLink(parts: Parts, address: string): Promise<void> {
  const body = new URLSearchParams({ email: address })
  const response = await callLibrary(parts, `signin/${mailedLinkId}`, { method: 'POST', body })
  if (readError(response)) throw new Error('the request to sign in could not be recorded')
}

/**
 * Has the library redeem a token. Its own callback is never reached from outside, where a GET would consume.
 * @returns the session's Set-Cookie header, or null when the token does not serve
 */
export async function redeemWithLibrary(
  parts: Parts,
  { address, token }: { address: string; token: string },
): Promise<string | null> {
  const query = new URLSearchParams({ email: address, token })
  const response = await callLibrary(parts, `callback/${mailedLinkId}?${query}`, { method: 'GET' })
  if (readError(response)) return null
  const name = sessionCookieName(parts.config.baseUrl)
  return response.headers.getSetCookie().find((cookie) => cookie.startsWith(`${name}=`)) ?? null
}

async function callLibrary(parts: Parts, action: string, init: RequestInit): Promise<Response> {
  // No cookie is passed on: the session that a browser brings is none of the library's business, and is ended by
  // us. The origin was checked by the handler that calls.
  const request = new Request(`${parts.config.baseUrl}/api/auth/${action}`, init)
  return (await Auth(request, { ...authConfig(parts), skipCSRFCheck })) as Response
}

function readError(response: Response): string | null {
  const location = response.headers.get('location')
  if (!location) return `status ${response.status}`
  return new URL(location).searchParams.get('error')
}
