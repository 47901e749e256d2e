import { answerRequest } from '@/lib/web/answer-request'
import { checkReady } from '@/lib/web/check-ready'
import { parts } from '@/lib/wiring'

/** Whether requests can be served. Why not is in the log and not in the answer. */
export function GET(request: Request): Promise<Response> {
  return answerRequest(request, {
    baseUrl: parts().config.baseUrl,
    run: async () => {
      const isReady = await checkReady(parts().db)
      return Response.json({ status: isReady ? 'ready' : 'not ready' }, { status: isReady ? 200 : 503 })
    },
  })
}
