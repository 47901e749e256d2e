import { findAnalysisProgress } from '@/db/queries/analyses'
import { findInvitation } from '@/db/queries/laboratories'
import { findParticipation } from '@/db/queries/participations'
import { readLayout } from '@/db/queries/studies'
import { studyPlan, type StudyPlan } from '@/lib/domain/study-plan'
import type { ReturnLayout } from '@/lib/spreadsheet/layout'
import { makeAnalysis } from '@/lib/use-cases/analyses/make-analysis'
import { requestAnalysis } from '@/lib/use-cases/analyses/request-analysis'
import { answerInvitation } from '@/lib/use-cases/laboratories/answer-invitation'
import { inviteLaboratory, type LaboratoryInvitation } from '@/lib/use-cases/laboratories/invite-laboratory'
import { toReturnLayout } from '@/lib/use-cases/returns/return-layout'
import { submitReturn } from '@/lib/use-cases/returns/submit-return'
import { createStudy } from '@/lib/use-cases/studies/create-study'
import { openStudy } from '@/lib/use-cases/studies/open-study'
import type { World } from './world'

/** A plan from the few fields that matter to a caller, and plain ones for the rest. */
export function planWith(fields: Partial<Record<keyof StudyPlan, unknown>>): StudyPlan {
  return studyPlan.parse({
    shortName: 'NT-01',
    title: 'Breaking force of natural-fibre twine',
    method: 'NT 14, breaking force of twine by constant rate of extension',
    purpose: '',
    measurands: [{ name: 'Breaking force', unit: 'N', decimals: 1, hasTrueZero: true }],
    materials: [{ name: 'sisal' }, { name: 'hemp' }],
    levels: [{ name: 'replicate', count: 3 }],
    localTime: '2027-03-14T17:00',
    zone: 'Europe/Lisbon',
    ...fields,
  })
}

/** Makes a draft with its laboratories named. */
export async function draftStudy(
  world: World,
  {
    coordinator,
    plan,
    laboratories,
  }: { coordinator: string; plan: StudyPlan; laboratories: readonly LaboratoryInvitation[] },
): Promise<{ studyId: string; invitationIds: string[] }> {
  const context = await world.as(coordinator)
  const organisationId = context.actor.organisations[0]?.organisationId
  if (!organisationId) throw new Error(`${coordinator} belongs to no organisation`)
  const { studyId } = await createStudy(context, { organisationId, plan })
  const invitationIds: string[] = []
  for (const laboratory of laboratories)
    invitationIds.push((await inviteLaboratory(context, { studyId, ...laboratory })).invitationId)
  return { studyId, invitationIds }
}

/** Opens a draft and answers for the laboratories by the latest link of each. */
export async function openAndAnswer(
  world: World,
  {
    coordinator,
    studyId,
    answers,
  }: {
    coordinator: string
    studyId: string
    answers: readonly { invitationId: string; answer: 'accepted' | 'declined' }[]
  },
): Promise<void> {
  await openStudy(await world.as(coordinator), { studyId })
  for (const { invitationId, answer } of answers)
    await answerInvitation(world.system, {
      token: await invitationToken(world, { studyId, invitationId }),
      answer,
    })
}

/** The token that the latest mail to this laboratory carries. */
export async function invitationToken(
  world: World,
  place: { studyId: string; invitationId: string },
): Promise<string> {
  const invitation = await findInvitation(world.system.db, place)
  if (!invitation?.lastLink) throw new Error('no link was issued')
  const row = `${place.invitationId}.${invitation.lastLink.number}`
  return `${row}.${world.system.secrets.token('invitation', row)}`
}

export async function layoutOf(
  world: World,
  { studyId, shortName }: { studyId: string; shortName: string },
): Promise<ReturnLayout> {
  return toReturnLayout(shortName, await readLayout(world.system.db, studyId))
}

/** Returns results as a laboratory's contact. */
export async function returnAs(
  world: World,
  {
    contact,
    studyId,
    entries,
    remark = '',
  }: { contact: string; studyId: string; entries: Record<string, string>; remark?: string },
): Promise<void> {
  const context = await world.as(contact)
  const outcome = await submitReturn(context, {
    studyId,
    submissionKey: context.random.uuid(),
    entries,
    remark,
  })
  if (outcome.outcome !== 'received')
    throw new Error(`the return of ${contact} has problems: ${JSON.stringify(outcome.problems)}`)
}

/** Has the analysis made here and now, as the worker would. */
export async function analyseNow(
  world: World,
  { coordinator, studyId }: { coordinator: string; studyId: string },
): Promise<void> {
  const { number } = await requestAnalysis(await world.as(coordinator), { studyId })
  await makeAnalysis(world.system, { studyId, number })
}

/** Makes an analysis that another step has asked for. */
export async function finishAnalysis(world: World, studyId: string): Promise<void> {
  const progress = await findAnalysisProgress(world.system.db, studyId)
  if (progress && !progress.done) await makeAnalysis(world.system, { studyId, number: progress.number })
}

/** The code a contact's laboratory has in a study. */
export async function codeOf(
  world: World,
  { contact, studyId }: { contact: string; studyId: string },
): Promise<string> {
  const { actor } = await world.as(contact)
  const participation = await findParticipation(world.system.db, { studyId, personId: actor.personId })
  if (!participation) throw new Error(`${contact} takes no part`)
  return participation.code
}
