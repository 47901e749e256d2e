import NextAuth from 'next-auth'
import type { NextRequest } from 'next/server'
import { authConfig } from '@/lib/auth/auth-config'
import { answerRequest } from '@/lib/web/answer-request'
import { NotFound } from '@/lib/domain/errors'
import { parts } from '@/lib/wiring'

const { handlers } = NextAuth(() => authConfig(parts()))

/**
 * Of the library's own addresses only the session's is open. Its callback above all is not: a mail scanner that
 * follows a link would consume the token and be given the session.
 */
export function GET(request: NextRequest): Promise<Response> {
  const isSession = request.nextUrl.pathname === '/api/auth/session'
  return answerRequest(request, {
    baseUrl: parts().config.baseUrl,
    run: async () => {
      if (!isSession || request.method !== 'GET') throw new NotFound('auth address')
      return handlers.GET(request)
    },
  })
}

export async function POST(request: NextRequest): Promise<Response> {
  return answerRequest(request, {
    baseUrl: parts().config.baseUrl,
    run: () => Promise.reject(new NotFound('auth address')),
  })
}
