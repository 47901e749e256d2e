/**
 * Where to go after signing in, if it is a page of this site; otherwise the fallback.
 *
 * The typed text is judged as a browser would resolve it, and again after each decoding, because whatever
 * stands in front of us may decode once more than we do.
 */
export function safePath(typed: unknown, fallback = '/'): string {
  if (typeof typed !== 'string' || typed.length > 2000) return fallback
  const reading = decodings(typed)
  if (!reading || !reading.every(staysHere)) return fallback
  const { pathname, search } = new URL(typed, somewhere)
  // Signing in leads to a page: never back to signing in or out, and never to a handler.
  return /^\/(?:sign-in|sign-out|api|_next)(?:\/|$)/i.test(pathname) ? fallback : pathname + search
}

const somewhere = 'https://here.invalid'

/** The text as typed and decoded up to three times over; null when it is still encoded after that, or badly so. */
function decodings(typed: string): string[] | null {
  const path = (text: string) => text.split(/[?#]/, 1)[0] ?? ''
  const readings = [typed]
  for (let depth = 0; depth < 3; depth += 1) {
    const last = path(readings.at(-1) ?? '')
    try {
      const next = decodeURIComponent(last)
      if (next === last) return readings
      readings.push(next)
    } catch {
      return null
    }
  }
  return null
}

function staysHere(text: string): boolean {
  // Browsers drop tabs and line ends from an address and read "\" as "/".
  if (!text.startsWith('/') || /[\\\u0000-\u001f\u007f]/.test(text)) return false
  if (text.startsWith('//') || !URL.canParse(text, somewhere)) return false
  const url = new URL(text, somewhere)
  // "/.//elsewhere" resolves to a path that would itself be read as another host.
  return url.origin === somewhere && !url.pathname.startsWith('//')
}
