import { isForeignRequest } from './foreign-request'
import { pagePathHeader } from './page-path-header'
import { securityHeaders } from './security-headers'

interface PageRequest {
  readonly method: string
  readonly headers: Headers
  readonly url: string
  readonly baseUrl: string
  readonly nonce: string
  /** The development server needs a laxer script policy. */
  readonly develop: boolean
}

interface Judgement {
  /** A status to answer with at once, or null to let the request through. */
  readonly status: 403 | 404 | null
  readonly requestHeaders: Headers
  readonly responseHeaders: Record<string, string>
}

/**
 * What the proxy does with a request for a page. It guards nothing that the pages, actions and handlers do not
 * guard themselves; it answers early and sets the headers they share.
 */
export function judgePageRequest({ method, headers, url, baseUrl, nonce, develop }: PageRequest): Judgement {
  const { pathname, search } = new URL(url)
  const responseHeaders = securityHeaders({ baseUrl, nonce, develop })
  const requestHeaders = new Headers(headers)
  requestHeaders.set('content-security-policy', responseHeaders['Content-Security-Policy'] ?? '')
  requestHeaders.set('x-nonce', nonce)
  requestHeaders.set(pagePathHeader, pathname + search)
  return { status: statusAtOnce({ method, headers, pathname, baseUrl }), requestHeaders, responseHeaders }
}

function statusAtOnce(asked: {
  method: string
  headers: Headers
  pathname: string
  baseUrl: string
}): 403 | 404 | null {
  // Pictures are served as they are; nothing here fetches or shrinks one on request.
  if (asked.pathname.startsWith('/_next/image')) return 404
  return isForeignRequest(asked, asked.baseUrl) ? 403 : null
}
