'use server'

import { notFound, redirect } from 'next/navigation'
import { z } from 'zod'
import { NotFound, SignInNeeded } from '@/lib/domain/errors'
import { revealKey } from '@/lib/use-cases/laboratories/read-laboratories'
import { refuseForeignRequest } from '@/lib/web/form-action'
import { paths } from '@/lib/web/paths'
import { requestContext } from '@/lib/web/request-context'

export interface KeyState {
  readonly key: readonly { code: string; laboratory: string }[] | null
}

/** Shows which laboratory stands behind which code, once, and has it recorded that someone looked. */
export async function revealKeyAction(_previous: KeyState, form: FormData): Promise<KeyState> {
  await refuseForeignRequest()
  const studyId = z.uuid().safeParse(form.get('studyId'))
  if (!studyId.success) notFound()
  try {
    return { key: await revealKey(await requestContext(), { studyId: studyId.data }) }
  } catch (error) {
    if (error instanceof NotFound) notFound()
    if (error instanceof SignInNeeded)
      redirect(paths.signIn(`${paths.station(studyId.data, 'laboratories')}/key`))
    throw error
  }
}
