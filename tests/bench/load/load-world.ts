import {
  draftStudy,
  invitationToken,
  layoutOf,
  openAndAnswer,
  planWith,
  returnAs,
} from '@/db/seed/stage-study'
import { randomNumbers, type RandomNumbers } from '@/db/seed/random-numbers'
import { buildWorld } from '@/db/seed/world'
import { findDraft, findParticipation } from '@/db/queries/participations'
import { listPlaces, placeKey, type ReturnLayout } from '@/lib/spreadsheet/layout'
import { writeReturnWorkbook } from '@/lib/spreadsheet/write-return-workbook'
import { answerInvitation } from '@/lib/use-cases/laboratories/answer-invitation'
import { saveDraft } from '@/lib/use-cases/returns/save-draft'
import type { AttackWorld, Committee } from '@/tests/e2e/trust/support/attack-world'
import type { Sitter } from './laboratory-requests'

const farDeadline = '2099-03-14T17:00'

/** Two hundred rows on the sheet and in the file: twenty materials, ten replicates each. */
const deadlinePlan = planWith({
  shortName: 'LOAD-1',
  title: 'Breaking force of twine, before a deadline',
  materials: Array.from({ length: 20 }, (_, index) => ({ name: `twine ${index + 1}` })),
  levels: [{ name: 'replicate', count: 10 }],
  localTime: farDeadline,
})

/** The most measurands a study may have is ten; with two materials each, twenty precision statements are computed. */
const statisticsPlan = planWith({
  shortName: 'LOAD-2',
  title: 'Ten measurands of twine',
  measurands: Array.from({ length: 10 }, (_, index) => ({
    name: `Measurand ${index + 1}`,
    unit: 'N',
    decimals: 1,
  })),
  levels: [{ name: 'replicate', count: 3 }],
  localTime: farDeadline,
})

export interface DeadlineStudy {
  readonly studyId: string
  readonly invitationIds: readonly string[]
  readonly layout: ReturnLayout
}

export async function draftDeadlineStudy(world: AttackWorld, committee: Committee): Promise<DeadlineStudy> {
  const { studyId, invitationIds } = await draftStudy(world, {
    coordinator: committee.coordinator,
    plan: deadlinePlan,
    laboratories: committee.laboratories,
  })
  return { studyId, invitationIds, layout: await layoutOf(world, { studyId, shortName: 'LOAD-1' }) }
}

/** Has every invited laboratory accept by the link in its mail. */
export async function acceptAll(
  world: AttackWorld,
  { studyId, invitationIds }: Pick<DeadlineStudy, 'studyId' | 'invitationIds'>,
): Promise<void> {
  for (const invitationId of invitationIds) {
    const token = await invitationToken(world, { studyId, invitationId })
    await answerInvitation(world.system, { token, answer: 'accepted' })
  }
}

/** A signed-in contact for every laboratory, each with the sheet filled to the last place but not returned. */
export async function seatContacts(
  world: AttackWorld,
  { contacts, layout, random }: { contacts: readonly string[]; layout: ReturnLayout; random: RandomNumbers },
): Promise<Sitter[]> {
  return inParallel(contacts, async (contact) => ({
    cookie: await world.cookieOf(contact),
    entries: inventEntries(layout, random),
    draftVersion: 0,
    checked: null,
    turn: Promise.resolve(),
  }))
}

/** Gives every laboratory a draft, whatever an earlier run left it with. */
export async function keepAllDrafts(
  world: AttackWorld,
  {
    studyId,
    contacts,
    sitters,
  }: { studyId: string; contacts: readonly string[]; sitters: readonly Sitter[] },
): Promise<void> {
  await inParallel(contacts, async (contact, index) => {
    const sitter = sitters[index]
    const context = await world.as(contact)
    const { personId } = context.actor
    const participation = await findParticipation(world.app, { studyId, personId })
    if (!sitter || !participation) throw new Error(`${contact} takes no part`)
    const { participantId } = participation
    const seenVersion = (await findDraft(world.app, { studyId, participantId }))?.version ?? 0
    const kept = await saveDraft(context, { studyId, entries: sitter.entries, remark: '', seenVersion })
    sitter.draftVersion = kept.version
    sitter.checked = null
  })
}

/** Workbooks as the product hands them out, filled in. */
export async function fillWorkbooks(layout: ReturnLayout, random: RandomNumbers): Promise<Buffer[]> {
  const files: Buffer[] = []
  for (let file = 0; file < 8; file += 1) {
    const values = new Map(Object.entries(inventEntries(layout, random)))
    files.push(Buffer.from(await writeReturnWorkbook({ layout, values, deadlineText: 'in a while' })))
  }
  return files
}

/** A study in which every laboratory has returned. Its own past sends no mail and waits for no worker. */
export async function stageReturnedStudy(
  world: AttackWorld,
  { committee, seed, secret }: { committee: Committee; seed: number; secret: string },
): Promise<{ studyId: string; results: number }> {
  const quiet = buildWorld({ ...world, authSecret: secret, jobs: { enqueue: () => Promise.resolve() } })
  const { coordinator, laboratories, contacts } = committee
  const { studyId, invitationIds } = await draftStudy(quiet, {
    coordinator,
    plan: statisticsPlan,
    laboratories,
  })
  const answers = invitationIds.map((invitationId) => ({ invitationId, answer: 'accepted' as const }))
  await openAndAnswer(quiet, { coordinator, studyId, answers })
  const layout = await layoutOf(quiet, { studyId, shortName: 'LOAD-2' })
  const random = randomNumbers(seed)
  await inParallel(contacts, (contact) =>
    returnAs(quiet, { contact, studyId, entries: inventEntries(layout, random) }),
  )
  return { studyId, results: contacts.length * listPlaces(layout).length }
}

/** One laboratory's invented results: its own shift in each cell, and a scatter within. */
function inventEntries(layout: ReturnLayout, random: RandomNumbers): Record<string, string> {
  const shifts = new Map<string, number>()
  const entries: Record<string, string> = {}
  for (const place of listPlaces(layout)) {
    const cell = `${place.measurandId} ${place.materialId}`
    const shift = shifts.get(cell) ?? 8 * random.normal()
    shifts.set(cell, shift)
    entries[placeKey(place)] = (400 + shift + 5 * random.normal()).toFixed(1)
  }
  return entries
}

/** No more at a time than the world has connections. */
async function inParallel<Item, Made>(
  items: readonly Item[],
  make: (item: Item, index: number) => Promise<Made>,
): Promise<Made[]> {
  const made: Made[] = []
  const waiting = items.map((item, index) => ({ item, index }))
  const hand = async () => {
    for (let next = waiting.shift(); next; next = waiting.shift())
      made[next.index] = await make(next.item, next.index)
  }
  await Promise.all(Array.from({ length: 4 }, hand))
  return made
}
