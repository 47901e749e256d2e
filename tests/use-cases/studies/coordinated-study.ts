import { sql } from 'kysely'
import { draftStudy, layoutOf, openAndAnswer, planWith, returnAs } from '@/db/seed/stage-study'
import { laboratories } from '@/db/seed/twine-people'
import { insertAuditEntry, listAuditEntries } from '@/db/queries/audit'
import { ensurePerson, insertOrganisation, insertOrganisationMember } from '@/db/queries/people'
import { insertState } from '@/db/queries/studies'
import { canonicalJson, houseChain, type AuditFact } from '@/lib/domain/audit-entry'
import { studyStates, type StudyState } from '@/lib/domain/study-states'
import { listPlaces, placeKey } from '@/lib/spreadsheet/layout'
import { appointCommitteeMember } from '@/lib/use-cases/committee/appoint-committee-member'
import { createTestWorld, type TestWorld } from '../../support/test-world'

export const opened = '2027-03-01T09:00:00Z'
export const stranger = 'coordinator@elsewhere.example'
export const committee = {
  chair: 'chair@study.example',
  member: 'member@study.example',
  observer: 'observer@study.example',
} as const
export const contact = laboratories[0]!.address

/** A world with a second organisation, whose coordinator must see nothing of the first. */
export async function coordinatedWorld(): Promise<TestWorld> {
  const world = await createTestWorld({ now: opened })
  await world.database.app.transaction().execute(async (trx) => {
    const organisationId = await insertOrganisation(trx, 'Another Committee')
    const { personId } = await ensurePerson(trx, { address: stranger, name: 'Stranger' })
    await insertOrganisationMember(trx, { organisationId, personId, role: 'coordinator' })
    await insertAuditEntry(trx, {
      studyId: houseChain,
      actorId: null,
      actorRole: 'server',
      fact: { action: 'organisation.created', version: 1, name: 'Another Committee' },
    })
  })
  return world
}

let made = 0

export interface Staged {
  readonly studyId: string
  readonly invitationIds: readonly string[]
}

/** A draft with three laboratories named. */
export async function draft(world: TestWorld): Promise<Staged> {
  const plan = planWith({ shortName: `ST-${(made += 1)}`, levels: [{ name: 'replicate', count: 2 }] })
  return draftStudy(world, { coordinator: world.coordinator, plan, laboratories: laboratories.slice(0, 3) })
}

/** The same open: one laboratory accepted, one declined, one silent; with a committee of three. */
export async function openedStudy(world: TestWorld): Promise<Staged> {
  const staged = await draft(world)
  for (const role of ['chair', 'member', 'observer'] as const)
    await appointCommitteeMember(await world.as(world.coordinator), {
      studyId: staged.studyId,
      name: `The ${role}`,
      address: committee[role],
      role,
    })
  await openAndAnswer(world, {
    coordinator: world.coordinator,
    studyId: staged.studyId,
    answers: [
      { invitationId: staged.invitationIds[0]!, answer: 'accepted' },
      { invitationId: staged.invitationIds[1]!, answer: 'declined' },
    ],
  })
  return staged
}

/** Returns plain results for the laboratory that accepted. */
export async function returnResults(world: TestWorld, studyId: string): Promise<void> {
  const layout = await layoutOf(world, { studyId, shortName: 'any' })
  const entries = Object.fromEntries(
    listPlaces(layout).map((place, index) => [placeKey(place), `${10 + index}.0`]),
  )
  await returnAs(world, { contact, studyId, entries })
}

/** Puts a draft into any state, by the rows alone: for asking what is possible from there. */
export async function draftIn(world: TestWorld, state: StudyState): Promise<Staged> {
  const staged = await draft(world)
  const { actor } = await world.as(world.coordinator)
  for (const each of studyStates.slice(1, studyStates.indexOf(state) + 1))
    await world.database.app
      .transaction()
      .execute((trx) => insertState(trx, { studyId: staged.studyId, state: each, personId: actor.personId }))
  return staged
}

/** The audit entries made while something ran, as [actor's role, action, fact]. */
export async function auditedBy(world: TestWorld, studyId: string, run: () => Promise<unknown>) {
  const before = await listAuditEntries(world.database.app, studyId)
  await run()
  const after = await listAuditEntries(world.database.app, studyId)
  return after
    .slice(before.length)
    .map(({ actorId, actorRole, action, body }) => ({ actorId, actorRole, action, body }))
}

/** What an entry must look like, to the byte. */
export function entryOf(actorId: string | null, actorRole: string, fact: AuditFact) {
  const { action, version: _, ...details } = fact
  return { actorId, actorRole, action, body: canonicalJson(details) }
}

export async function countRows(world: TestWorld): Promise<string> {
  const { rows } = await sql<{ counts: string }>`
    select concat_ws(' ', (select count(*) from study), (select count(*) from study_state), (select count(*) from study_deadline),
      (select count(*) from vault.invitation), (select count(*) from vault.invitation_link), (select count(*) from vault.extension),
      (select count(*) from vault.committee_member), (select count(*) from vault.mail), (select count(*) from audit.entry)) as counts`.execute(
    world.database.owner,
  )
  return rows[0]!.counts
}
