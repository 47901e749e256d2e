'use server'

import { z } from 'zod'
import { Refusal } from '@/lib/domain/errors'
import {
  appointCommitteeMember,
  dismissCommitteeMember,
} from '@/lib/use-cases/committee/appoint-committee-member'
import { checkLaboratoryLines } from '@/lib/use-cases/laboratories/check-laboratory-lines'
import { correctInvitation } from '@/lib/use-cases/laboratories/correct-invitation'
import {
  inviteLaboratories,
  inviteLaboratory,
  laboratoryInvitation,
} from '@/lib/use-cases/laboratories/invite-laboratory'
import { sendInvitationAgain } from '@/lib/use-cases/laboratories/send-invitation-again'
import { openStudy } from '@/lib/use-cases/studies/open-study'
import { readStudy } from '@/lib/use-cases/studies/read-study'
import { formAction } from '@/lib/web/form-action'
import type { FormState } from '@/lib/web/form-state'
import { paths } from '@/lib/web/paths'

const study = { studyId: z.uuid() }

export const inviteLaboratoryAction = formAction({
  input: laboratoryInvitation.extend(study),
  run: async (context, input) => ({ ...input, ...(await inviteLaboratory(context, input)) }),
  then: ({ studyId, laboratory, mailed }) => ({
    refresh: paths.station(studyId, 'laboratories'),
    message: mailed
      ? `${laboratory} is on the list and its invitation is on its way.`
      : `${laboratory} is on the list. Nothing is sent yet.`,
  }),
})

const inviteLines = formAction({
  input: z.object({ ...study, lines: z.string().max(50_000, 'Paste fewer lines at a time.') }),
  run: async (context, { studyId, lines }) => {
    const { invitations, problems } = checkLaboratoryLines(lines)
    if (problems.length > 0) throw new Refusal('bad-lines', problems.join(' '), 'lines')
    return { studyId, ...(await inviteLaboratories(context, { studyId, invitations })) }
  },
  then: ({ studyId, invited, mailed }) => ({
    refresh: paths.station(studyId, 'laboratories'),
    message: `${invited} ${invited === 1 ? 'laboratory is' : 'laboratories are'} on the list${mailed ? ' and their invitations are on their way' : '. Nothing is sent yet'}.`,
  }),
})

/** Reading costs work too, and is done for the study's coordinators alone. */
const mayInvite = formAction({
  input: z.object(study),
  run: readStudy,
  then: () => ({}),
})

/** Pasted lines are read and shown first; only the second press puts them on the list. */
export async function inviteLinesAction(previous: FormState, form: FormData): Promise<FormState> {
  if (form.get('step') === 'confirm') return inviteLines(previous, form)
  const asked = await mayInvite(previous, form)
  if (!asked.ok) return asked
  const lines = String(form.get('lines') ?? '').slice(0, 50_000)
  const { problems } = checkLaboratoryLines(lines)
  return {
    errors: problems.length > 0 ? { lines: [...problems] } : {},
    values: { lines, step: problems.length > 0 ? 'mend' : 'confirm' },
  }
}

export const correctInvitationAction = formAction({
  input: laboratoryInvitation
    .pick({ contactName: true, address: true, zone: true })
    .extend({ ...study, invitationId: z.uuid() }),
  run: async (context, input) => ({ ...input, ...(await correctInvitation(context, input)) }),
  then: ({ studyId, mailed }) => ({
    refresh: paths.station(studyId, 'laboratories'),
    go: `${paths.station(studyId, 'laboratories')}?done=${mailed ? 'corrected-sent' : 'corrected'}`,
  }),
})

export const sendAgainAction = formAction({
  input: z.object({ ...study, invitationId: z.uuid() }),
  run: async (context, input) => {
    await sendInvitationAgain(context, input)
    return input
  },
  then: ({ studyId }) => ({
    refresh: paths.station(studyId, 'laboratories'),
    message: 'A new link is on its way; the earlier one no longer works.',
  }),
})

/** Sends every invitation and opens the study. */
export const openStudyAction = formAction({
  input: z.object(study),
  run: async (context, input) => ({ ...input, ...(await openStudy(context, input)) }),
  then: ({ studyId }) => ({
    refresh: paths.study(studyId),
    go: `${paths.station(studyId, 'laboratories')}?done=sent`,
  }),
})

export const appointAction = formAction({
  input: z.object({
    ...study,
    name: z
      .string()
      .trim()
      .min(1, 'Give the name of the member.')
      .max(120, 'Keep the name within 120 characters.'),
    address: z.string(),
    role: z.enum(['chair', 'member', 'observer'], 'Choose what the person does on the committee.'),
  }),
  run: async (context, input) => {
    await appointCommitteeMember(context, input)
    return input
  },
  then: ({ studyId, name, role }) => ({
    refresh: paths.station(studyId, 'laboratories'),
    message: `${name} is on the committee as ${role}.`,
  }),
})

export const dismissAction = formAction({
  input: z.object({ ...study, personId: z.uuid() }),
  run: async (context, input) => {
    await dismissCommitteeMember(context, input)
    return input
  },
  then: ({ studyId }) => ({
    refresh: paths.station(studyId, 'laboratories'),
    message: 'The person is no longer on the committee.',
  }),
})
