import 'server-only'
import { revalidatePath } from 'next/cache'
import { headers } from 'next/headers'
import { notFound, redirect, unstable_rethrow } from 'next/navigation'
import type { z } from 'zod'
import type { AnonymousContext, Context } from '@/lib/context'
import { NotFound, SignInNeeded } from '@/lib/domain/errors'
import { logDefect } from '@/lib/log'
import { parts } from '@/lib/wiring'
import { isForeignRequest } from './foreign-request'
import { ForeignRequest } from './foreign-request-error'
import type { FormState } from './form-state'
import { paths } from './paths'
import { anonymousContext, requestContext } from './request-context'
import { runForm, type FormOutcome } from './run-form'
import { safePath } from './safe-path'

/** Where a form leads once done: a page to draw afresh, a page to go to, or words to show in place. */
interface Onward {
  readonly refresh?: string
  readonly go?: string
  readonly message?: string
}

interface Definition<C, Schema extends z.ZodType, R> {
  readonly input: Schema
  readonly run: (context: C, input: z.output<Schema>) => Promise<R>
  readonly then: (result: R) => Onward
}

type FormAction = (previous: FormState, form: FormData) => Promise<FormState>

/** A form's action for signed-in people: parse, ask who it is, run the use case, and say where to go. */
export function formAction<Schema extends z.ZodType, R>(
  definition: Definition<Context, Schema, R>,
): FormAction {
  return (_previous, form) => act(definition, form, requestContext)
}

/** The same for forms that anyone may send. */
export function publicFormAction<Schema extends z.ZodType, R>(
  definition: Definition<AnonymousContext, Schema, R>,
): FormAction {
  return (_previous, form) => act(definition, form, async () => anonymousContext())
}

async function act<C, Schema extends z.ZodType, R>(
  { input, run, then }: Definition<C, Schema, R>,
  form: FormData,
  context: () => Promise<C>,
): Promise<FormState> {
  await refuseForeignRequest()
  let outcome: FormOutcome<R>
  try {
    outcome = await runForm({ form, input, run: async (value) => run(await context(), value) })
  } catch (error) {
    if (error instanceof NotFound) notFound()
    if (error instanceof SignInNeeded) redirect(paths.signIn(await pageOfForm()))
    unstable_rethrow(error)
    // The framework prints what it catches, and a driver's error may hold a row's values.
    throw new Error(`defect ${logDefect(error, { place: 'form' })}`)
  }
  if (outcome.kind === 'again') return outcome.state
  const { refresh, go, message } = then(outcome.result)
  if (refresh) revalidatePath(refresh)
  if (go) redirect(go)
  return { ok: message ?? 'Saved.', errors: {}, values: {} }
}

/**
 * For actions that are not made by `formAction`. The proxy answers these requests with 403 before they come here;
 * without it they end here, where nothing was done.
 */
export async function refuseForeignRequest(): Promise<void> {
  const asked = { method: 'POST', headers: await headers() }
  if (isForeignRequest(asked, parts().config.baseUrl)) throw new ForeignRequest()
}

async function pageOfForm(): Promise<string | undefined> {
  const referrer = (await headers()).get('referer')
  if (!referrer || !URL.canParse(referrer)) return undefined
  const { origin, pathname, search } = new URL(referrer)
  return origin === new URL(parts().config.baseUrl).origin ? safePath(pathname + search) : undefined
}
