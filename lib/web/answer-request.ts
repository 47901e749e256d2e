import { isForeignRequest } from './foreign-request'
import { ForeignRequest } from './foreign-request-error'
import { publicError } from './error-status'
import { logDefect } from '@/lib/log'
import { securityHeaders } from './security-headers'

interface Handling {
  readonly baseUrl: string
  run(): Promise<unknown>
}

/**
 * Runs a handler and answers in every case: its Response, its value as JSON, or an error that tells no more than
 * it may. The headers are set here too, because the proxy does not see what takes uploads.
 */
export async function answerRequest(request: Request, { baseUrl, run }: Handling): Promise<Response> {
  const response = await answer(request, { baseUrl, run })
  const headers = new Headers(response.headers)
  for (const [name, value] of Object.entries(securityHeaders({ baseUrl }))) {
    if (name !== 'Cache-Control' || !headers.has(name)) headers.set(name, value)
  }
  return new Response(response.body, { status: response.status, headers })
}

async function answer(request: Request, { baseUrl, run }: Handling): Promise<Response> {
  try {
    if (isForeignRequest(request, baseUrl)) throw new ForeignRequest()
    const result = await run()
    return result instanceof Response ? result : Response.json(result ?? null)
  } catch (error) {
    return errorResponse(error, request)
  }
}

function errorResponse(error: unknown, request: Request): Response {
  const known = publicError(error)
  if (known) {
    const { status, ...said } = known
    return Response.json({ error: said }, { status })
  }
  const reference = logDefect(error, { place: placeOf(request) })
  const message = `Something went wrong on our side. If it happens again, give the coordinator this reference: ${reference}.`
  return Response.json({ error: { code: 'defect', message, reference } }, { status: 500 })
}

/** The route without what identifies a row: ids and slugs are left out of the log. */
function placeOf(request: Request): string {
  const segments = new URL(request.url).pathname.split('/')
  return `${request.method} ${segments.map((segment) => (/^[a-z-]{0,20}$/.test(segment) ? segment : '…')).join('/')}`
}
