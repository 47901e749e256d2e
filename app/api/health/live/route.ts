import { answerRequest } from '@/lib/web/answer-request'
import { parts } from '@/lib/wiring'

/** The process answers; nothing else is asked. */
export function GET(request: Request): Promise<Response> {
  return answerRequest(request, { baseUrl: parts().config.baseUrl, run: async () => ({ status: 'live' }) })
}
