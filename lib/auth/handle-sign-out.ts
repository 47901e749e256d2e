import { deleteSession } from '@/db/queries/sessions'
import { answerRequest } from '@/lib/web/answer-request'
import { paths } from '@/lib/web/paths'
import type { Parts } from '@/lib/wiring'
import { readSessionCookie, sessionCookieName } from './session-cookie'
import { readSessionToken } from './session-token'

/** Ends the session in the database, so that a copy of the cookie is worth nothing, and has the browser forget. */
export function handleSignOut(request: Request, parts: Parts): Promise<Response> {
  const { baseUrl } = parts.config
  return answerRequest(request, {
    baseUrl,
    run: async () => {
      const session = readSessionToken(readSessionCookie(request.headers, baseUrl))
      if (session) await deleteSession(parts.db, session.hash)
      const secure = baseUrl.startsWith('https:') ? '; Secure' : ''
      return new Response(null, {
        status: 303,
        headers: {
          Location: `${paths.signIn()}?signed=out`,
          'Set-Cookie': `${sessionCookieName(baseUrl)}=; Path=/; Max-Age=0; HttpOnly; SameSite=Lax${secure}`,
          // Not "cookies": that would reach every other site under the same registered name.
          'Clear-Site-Data': '"cache", "storage"',
        },
      })
    },
  })
}
