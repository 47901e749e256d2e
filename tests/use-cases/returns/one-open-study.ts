import { draftStudy, layoutOf, openAndAnswer, planWith } from '@/db/seed/stage-study'
import { laboratories } from '@/db/seed/twine-people'
import { listPlaces, placeKey } from '@/lib/spreadsheet/layout'
import { createTestWorld, type TestWorld } from '../../support/test-world'

export interface OpenStudy {
  readonly world: TestWorld
  readonly studyId: string
  /** The contacts of two laboratories that accepted. */
  readonly contact: string
  readonly other: string
  /** The keys of its four places: two materials, two replicates. */
  readonly keys: readonly string[]
  readonly invitationIds: readonly string[]
}

export const opened = '2027-03-01T09:00:00Z'
/** 17:00 in Lisbon on 14 March 2027, before summer time begins there. */
export const due = '2027-03-14T17:00:00Z'

/** A study open for returns, with its clock standing still two weeks before the deadline. */
export async function openTestStudy(): Promise<OpenStudy> {
  const world = await createTestWorld({ now: opened })
  const { studyId, invitationIds } = await makeStudy(world, 'NT-01')
  const layout = await layoutOf(world, { studyId, shortName: 'NT-01' })
  return {
    world,
    studyId,
    contact: laboratories[0]!.address,
    other: laboratories[1]!.address,
    keys: listPlaces(layout).map(placeKey),
    invitationIds,
  }
}

/** One more open study of the same two laboratories. */
export async function makeStudy(
  world: TestWorld,
  shortName: string,
): Promise<{ studyId: string; invitationIds: string[] }> {
  const draft = await draftStudy(world, {
    coordinator: world.coordinator,
    plan: planWith({ shortName, levels: [{ name: 'replicate', count: 2 }] }),
    laboratories: laboratories.slice(0, 2),
  })
  await openAndAnswer(world, {
    coordinator: world.coordinator,
    studyId: draft.studyId,
    answers: draft.invitationIds.map((invitationId) => ({ invitationId, answer: 'accepted' })),
  })
  return draft
}

export function entriesOf(keys: readonly string[], texts: readonly string[]): Record<string, string> {
  return Object.fromEntries(keys.map((key, index) => [key, texts[index] ?? '']))
}
