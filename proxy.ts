import { randomBytes } from 'node:crypto'
import { NextResponse, type NextRequest } from 'next/server'
import { judgePageRequest } from '@/lib/web/judge-page-request'

export function proxy(request: NextRequest): NextResponse {
  const { status, requestHeaders, responseHeaders } = judgePageRequest({
    method: request.method,
    headers: request.headers,
    url: request.url,
    baseUrl: process.env.BASE_URL ?? request.nextUrl.origin,
    nonce: randomBytes(16).toString('base64'),
    develop: process.env.NODE_ENV === 'development',
  })
  if (status !== null) return new NextResponse(null, { status, headers: responseHeaders })
  const response = NextResponse.next({ request: { headers: requestHeaders } })
  for (const [name, value] of Object.entries(responseHeaders)) response.headers.set(name, value)
  return response
}

// Handlers under api/ take files and set the same headers themselves: what passes here is buffered, and cut.
export const config = { matcher: ['/((?!api/|_next/static/|mark\\.svg$).*)'] }
