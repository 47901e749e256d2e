import 'server-only'
import type { ZodType, output } from 'zod'
import { z } from 'zod'
import { findActor } from '@/lib/auth/find-actor'
import { readSessionCookie } from '@/lib/auth/session-cookie'
import type { AnonymousContext, Context } from '@/lib/context'
import { SignInNeeded } from '@/lib/domain/errors'
import { parts, systemContext } from '@/lib/wiring'
import { answerRequest } from './answer-request'

interface Asked<Params> {
  readonly request: Request
  readonly params: Params
}

type NextHandler = (request: Request, segment: { params: Promise<unknown> }) => Promise<Response>

/** A handler under app/api for signed-in people: a value becomes JSON, a Response is passed on. */
export function routeHandler<Params extends ZodType = ZodType<object>>({
  params,
  run,
}: {
  params?: Params
  run: (context: Context, asked: Asked<output<Params>>) => Promise<unknown>
}): NextHandler {
  return handler(params, async (asked) => {
    const { config, db } = parts()
    const actor = await findActor(db, readSessionCookie(asked.request.headers, config.baseUrl))
    if (!actor) throw new SignInNeeded()
    return run({ ...systemContext(), actor }, asked)
  })
}

/** The same for what anyone may ask. */
export function publicRouteHandler<Params extends ZodType = ZodType<object>>({
  params,
  run,
}: {
  params?: Params
  run: (context: AnonymousContext, asked: Asked<output<Params>>) => Promise<unknown>
}): NextHandler {
  return handler(params, (asked) => run(systemContext(), asked))
}

function handler<Params extends ZodType>(
  params: Params | undefined,
  run: (asked: Asked<output<Params>>) => Promise<unknown>,
): NextHandler {
  return (request, segment) =>
    answerRequest(request, {
      baseUrl: parts().config.baseUrl,
      run: async () => {
        const schema = (params ?? z.object({})) as Params
        // A route without a segment in its path is handed no parameters at all.
        return run({ request, params: schema.parse((await segment.params) ?? {}) })
      },
    })
}
