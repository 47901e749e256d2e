/** The __Host- prefix makes a browser refuse a cookie of this name set from anywhere but this very host. */
export function sessionCookieName(baseUrl: string): string {
  return isSecure(baseUrl) ? '__Host-evenlot.session' : 'evenlot.session'
}

export function sessionCookieOptions(baseUrl: string) {
  return { httpOnly: true, sameSite: 'lax', path: '/', secure: isSecure(baseUrl) } as const
}

export function readSessionCookie(headers: Pick<Headers, 'get'>, baseUrl: string): string | undefined {
  return readCookie(headers, sessionCookieName(baseUrl))
}

export function readCookie(headers: Pick<Headers, 'get'>, name: string): string | undefined {
  for (const pair of (headers.get('cookie') ?? '').split(';')) {
    const at = pair.indexOf('=')
    if (at > 0 && pair.slice(0, at).trim() === name) return decode(pair.slice(at + 1).trim())
  }
  return undefined
}

/** A cookie is typed by whoever holds the browser; one that cannot be decoded is no cookie. */
function decode(value: string): string | undefined {
  try {
    return decodeURIComponent(value)
  } catch {
    return undefined
  }
}

function isSecure(baseUrl: string): boolean {
  return baseUrl.startsWith('https:')
}
