import type { z } from 'zod'
import { Refusal } from '@/lib/domain/errors'
import type { FormState } from './form-state'
import { parseForm } from './parse-form'

export type FormOutcome<R> = { kind: 'again'; state: FormState } | { kind: 'done'; result: R }

/** Parses a form and runs what it asks for. A refusal comes back as form state; anything else rises. */
export async function runForm<Schema extends z.ZodType, R>({
  form,
  input,
  run,
}: {
  form: FormData
  input: Schema
  run: (input: z.output<Schema>) => Promise<R>
}): Promise<FormOutcome<R>> {
  const parsed = parseForm(input, form)
  if (!parsed.ok) return { kind: 'again', state: parsed.state }
  try {
    return { kind: 'done', result: await run(parsed.input) }
  } catch (error) {
    if (!(error instanceof Refusal)) throw error
    const { values } = parsed.state
    const { field, publicMessage } = error
    if (field) return { kind: 'again', state: { errors: { [field]: [publicMessage] }, values } }
    return { kind: 'again', state: { errors: {}, message: publicMessage, values } }
  }
}
