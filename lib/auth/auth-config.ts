import type { AuthConfig } from '@auth/core'
import { findPersonByAddress } from '@/db/queries/people'
import { logEvent } from '@/lib/log'
import { paths } from '@/lib/web/paths'
import { systemContext, type Parts } from '@/lib/wiring'
import { createAuthAdapter } from './adapter'
import { purposeKey } from './link-secrets'
import { mailedLink } from './mailed-link'
import { sessionCookieName, sessionCookieOptions } from './session-cookie'
import { absoluteDays } from './session-token'

/** The one configuration of the library, for its session handler and for our own handlers that call it. */
export function authConfig(parts: Parts): AuthConfig {
  const { baseUrl, authSecret } = parts.config
  const provider = mailedLink(
    systemContext(parts),
    purposeKey(authSecret, 'verification token').toString('base64url'),
  )
  return {
    adapter: createAuthAdapter(parts.db),
    providers: [provider],
    secret: purposeKey(authSecret, 'library').toString('base64url'),
    basePath: '/api/auth',
    // Requests are given our configured address by hand; nothing is made from the Host a client sends.
    trustHost: true,
    session: { strategy: 'database', maxAge: absoluteDays * 86_400 },
    pages: { signIn: paths.signIn(), error: paths.signIn(), verifyRequest: paths.signInCode() },
    useSecureCookies: baseUrl.startsWith('https:'),
    cookies: { sessionToken: { name: sessionCookieName(baseUrl), options: sessionCookieOptions(baseUrl) } },
    callbacks: {
      // A request is taken from any address, so that known and unknown ones look alike; a session needs a person.
      async signIn({ user, email }) {
        if (email?.verificationRequest) return true
        return Boolean(user.email && (await findPersonByAddress(parts.db, user.email)))
      },
      session: ({ session, user }) => ({ expires: session.expires, user: { name: user.name ?? null } }),
    },
    logger: {
      // The library's errors carry addresses and tokens in their causes; the kind alone is logged.
      error: (error) => logEvent('sign-in not completed', { kind: error.name }),
      warn: () => undefined,
      debug: () => undefined,
    },
  }
}
