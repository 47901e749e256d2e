import { randomBytes } from 'node:crypto'
import type { Kysely } from 'kysely'
import { createDatabase } from '@/db/connection'
import { ensurePerson, insertOrganisation, insertOrganisationMember } from '@/db/queries/people'
import { findClock, insertSession } from '@/db/queries/sessions'
import { analyseNow, draftStudy, layoutOf, openAndAnswer, planWith, returnAs } from '@/db/seed/stage-study'
import { buildWorld, type World } from '@/db/seed/world'
import type { DB } from '@/db/tables'
import { idleHours, makeSessionToken, readSessionToken } from '@/lib/auth/session-token'
import { createJobs } from '@/lib/jobs/create-jobs'
import { listPlaces, placeKey } from '@/lib/spreadsheet/layout'
import { appointCommitteeMember } from '@/lib/use-cases/committee/appoint-committee-member'
import { proposePublication } from '@/lib/use-cases/publications/propose-publication'
import { sendToReview } from '@/lib/use-cases/reviews/send-to-review'
import { closeStudy } from '@/lib/use-cases/studies/close-study'

export interface AttackWorld extends World {
  readonly app: Kysely<DB>
  readonly owner: Kysely<DB>
  /** A session of a person, made in the database: mails to one computer are limited, and tests are one computer. */
  cookieOf(address: string): Promise<string>
  destroy(): Promise<void>
}

type Access = Readonly<Record<'DATABASE_URL' | 'DATABASE_OWNER_URL' | 'AUTH_SECRET', string>>

/** The hands that arrange what is then attacked from outside. */
export function openAttackWorld(access: Access = process.env as unknown as Access): AttackWorld {
  const app = createDatabase(access.DATABASE_URL, { applicationName: 'test-attack', max: 4 })
  const owner = createDatabase(access.DATABASE_OWNER_URL, { applicationName: 'test-attack', max: 2 })
  const world = buildWorld({ app, owner, authSecret: access.AUTH_SECRET, jobs: createJobs() })
  return {
    ...world,
    app,
    owner,
    async cookieOf(address) {
      const { actor } = await world.as(address)
      const token = makeSessionToken(await findClock(app))
      const session = readSessionToken(token)
      if (!session) throw new Error('a session token was made that cannot be read')
      await insertSession(app, { ...session, personId: actor.personId, idleHours })
      return `evenlot.session=${token}`
    },
    destroy: async () => {
      await Promise.all([app.destroy(), owner.destroy()])
    },
  }
}

export interface Committee {
  readonly organisationId: string
  readonly coordinator: string
  readonly second: string
  readonly chair: string
  readonly member: string
  readonly observer: string
  /** Contacts of its laboratories. */
  readonly contacts: readonly string[]
  readonly laboratories: readonly ReturnType<typeof inventLaboratory>[]
}

/** An organisation of its own with its people, so that attacks on it disturb no other test. */
export async function foundCommittee(
  world: AttackWorld,
  { laboratories: count = 3 } = {},
): Promise<Committee> {
  const mark = randomBytes(4).toString('hex')
  const address = (name: string) => `${name}@kites-${mark}.example`
  const [coordinator, second] = [address('coordinator'), address('second')]
  const organisationId = await world.app.transaction().execute(async (trx) => {
    const made = await insertOrganisation(trx, `Committee on kite paper ${mark}`)
    const first = await ensurePerson(trx, { address: coordinator, name: `Wenna Kite ${mark}` })
    const other = await ensurePerson(trx, { address: second, name: `Osk Kite ${mark}` })
    for (const role of ['administrator', 'coordinator'] as const)
      await insertOrganisationMember(trx, { organisationId: made, personId: first.personId, role })
    await insertOrganisationMember(trx, {
      organisationId: made,
      personId: other.personId,
      role: 'coordinator',
    })
    return made
  })
  const laboratories = Array.from({ length: count }, (_, index) => inventLaboratory(mark, index))
  return {
    organisationId,
    coordinator,
    second,
    chair: address('chair'),
    member: address('member'),
    observer: address('observer'),
    contacts: laboratories.map((laboratory) => laboratory.address),
    laboratories,
  }
}

function inventLaboratory(mark: string, index: number) {
  return {
    laboratory: `Paper Bench ${index + 1} of ${mark}`,
    city: `Kitetown ${index + 1} ${mark}`,
    country: 'Nowhere',
    contactName: `Keeper ${index + 1} ${mark}`,
    address: `keeper-${index + 1}@bench-${mark}.example`,
    zone: 'Europe/Lisbon',
  }
}

export type Stage = 'draft' | 'open' | 'scrutiny' | 'review' | 'proposed'

export interface StagedStudy {
  readonly studyId: string
  readonly invitationIds: readonly string[]
  readonly keys: readonly string[]
}

/** A study of the committee brought to a stage by the steps that people take. */
export async function stageStudy(
  world: AttackWorld,
  committee: Committee,
  {
    stage,
    plan = {},
    returns = true,
  }: { stage: Stage; plan?: Parameters<typeof planWith>[0]; returns?: boolean },
): Promise<StagedStudy> {
  const { coordinator } = committee
  const shortName = `K-${randomBytes(4).toString('hex')}`
  const settled = planWith({
    shortName,
    title: `Tear of kite paper ${shortName}`,
    localTime: '2099-03-14T17:00',
    ...plan,
  })
  const { studyId, invitationIds } = await draftStudy(world, {
    coordinator,
    plan: settled,
    laboratories: committee.laboratories,
  })
  const keys = listPlaces(await layoutOf(world, { studyId, shortName })).map(placeKey)
  const staged = { studyId, invitationIds, keys }
  for (const role of ['chair', 'member', 'observer'] as const)
    await appointCommitteeMember(await world.as(coordinator), {
      studyId,
      name: `Person ${role}`,
      address: committee[role],
      role,
    })
  if (stage === 'draft') return staged
  const answers = invitationIds.map((invitationId) => ({ invitationId, answer: 'accepted' as const }))
  await openAndAnswer(world, { coordinator, studyId, answers })
  if (!returns) return staged
  for (const [index, contact] of committee.contacts.entries())
    await returnAs(world, { contact, studyId, entries: inventEntries(keys, index) })
  if (stage === 'open') return staged
  await closeStudy(await world.as(coordinator), { studyId, reason: 'Every laboratory has returned.' })
  await analyseNow(world, { coordinator, studyId })
  if (stage === 'scrutiny') return staged
  await sendToReview(await world.as(coordinator), { studyId })
  if (stage === 'review') return staged
  await proposePublication(await world.as(coordinator), { studyId })
  return staged
}

/** A text for every place, different for each laboratory and each place. */
export function inventEntries(keys: readonly string[], index = 0): Record<string, string> {
  return Object.fromEntries(
    keys.map((key, place) => [key, (400 + index + ((place * 7) % 5) / 10 + place).toFixed(1)]),
  )
}
