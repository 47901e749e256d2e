import { analyseNow, draftStudy, layoutOf, openAndAnswer, planWith, returnAs } from '@/db/seed/stage-study'
import { laboratories } from '@/db/seed/twine-people'
import { inventResults } from '@/db/seed/twine-results'
import { randomNumbers } from '@/db/seed/random-numbers'
import { appointCommitteeMember } from '@/lib/use-cases/committee/appoint-committee-member'
import { closeStudy } from '@/lib/use-cases/studies/close-study'
import type { TestWorld } from './test-world'

export const chair = 'chair@committee.example'
export const observer = 'observer@committee.example'
export const contacts = laboratories.slice(0, 4).map(({ address }) => address)

/** A study of four laboratories and two twines, returned, closed and analysed; with a chair and an observer. */
export async function scrutinisedStudy(
  world: TestWorld,
  { shortName = 'NT-01' } = {},
): Promise<{ studyId: string }> {
  const coordinator = world.coordinator
  const { studyId, invitationIds } = await draftStudy(world, {
    coordinator,
    plan: planWith({ shortName }),
    laboratories: laboratories.slice(0, 4),
  })
  const context = await world.as(coordinator)
  await appointCommitteeMember(context, { studyId, name: 'The Chair', address: chair, role: 'chair' })
  await appointCommitteeMember(context, {
    studyId,
    name: 'The Observer',
    address: observer,
    role: 'observer',
  })
  await openAndAnswer(world, {
    coordinator,
    studyId,
    answers: invitationIds.map((invitationId) => ({ invitationId, answer: 'accepted' })),
  })
  const layout = await layoutOf(world, { studyId, shortName })
  const numbers = randomNumbers(7)
  for (const contact of contacts)
    await returnAs(world, { contact, studyId, entries: inventResults(layout, numbers) })
  await closeStudy(context, { studyId, reason: 'All four laboratories have returned.' })
  await analyseNow(world, { coordinator, studyId })
  return { studyId }
}
