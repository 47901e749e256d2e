import { NotFound } from '@/lib/domain/errors'
import { answerRequest } from '@/lib/web/answer-request'
import type { Parts } from '@/lib/wiring'

/**
 * Of the library's own addresses only the session's is open. Its callback above all is not: a mail scanner that
 * follows a link would consume the token and be given the session.
 */
export function handleLibraryRequest<Asked extends Request>(
  request: Asked,
  parts: Pick<Parts, 'config'>,
  library: (request: Asked) => Promise<Response>,
): Promise<Response> {
  return answerRequest(request, {
    baseUrl: parts.config.baseUrl,
    run: async () => {
      const isOpen = request.method === 'GET' && new URL(request.url).pathname === '/api/auth/session'
      if (!isOpen) throw new NotFound('auth address')
      return library(request)
    },
  })
}
