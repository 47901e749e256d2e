/**
 * Headers for everything that is not a static file. Private pages are kept by no cache; no other site can frame,
 * open or read them.
 *
 * The referrer stays within the site rather than being withheld altogether: under `no-referrer` a browser also
 * sends `Origin: null` with our own forms, which could then not be told from a sandboxed frame's.
 */
export function securityHeaders({
  baseUrl,
  nonce,
  develop = false,
}: {
  baseUrl: string
  nonce?: string
  develop?: boolean
}): Record<string, string> {
  const headers: Record<string, string> = {
    'Content-Security-Policy': nonce ? pagePolicy(nonce, develop) : handlerPolicy,
    'Cache-Control': 'private, no-store',
    'Cross-Origin-Opener-Policy': 'same-origin',
    'Cross-Origin-Resource-Policy': 'same-origin',
    'Permissions-Policy': 'camera=(), geolocation=(), microphone=(), payment=(), usb=()',
    'Referrer-Policy': 'same-origin',
    'X-Content-Type-Options': 'nosniff',
    'X-Frame-Options': 'DENY',
  }
  if (baseUrl.startsWith('https:'))
    headers['Strict-Transport-Security'] = 'max-age=63072000; includeSubDomains'
  return headers
}

/** For what is read by programs or saved to disk: nothing in it may run or load. */
const handlerPolicy =
  "default-src 'none'; frame-ancestors 'none'; base-uri 'none'; form-action 'none'; sandbox"

function pagePolicy(nonce: string, develop: boolean): string {
  return [
    "default-src 'self'",
    // The development server compiles its modules from text.
    `script-src 'nonce-${nonce}' 'strict-dynamic'${develop ? " 'unsafe-eval'" : ''}`,
    `style-src 'self' 'nonce-${nonce}'`,
    // Charts place their marks by style attributes; such an attribute runs nothing.
    "style-src-attr 'unsafe-inline'",
    "img-src 'self' data: blob:",
    "font-src 'self'",
    "connect-src 'self'",
    "object-src 'none'",
    "base-uri 'none'",
    "frame-src 'none'",
    "frame-ancestors 'none'",
    "form-action 'self'",
  ].join('; ')
}
