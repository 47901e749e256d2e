import type { Kysely, Transaction } from 'kysely'
import { sql } from 'kysely'
import { insertAuditEntry } from '@/db/queries/audit'
import { ensurePerson, insertOrganisation, insertOrganisationMember } from '@/db/queries/people'
import type { DB } from '@/db/tables'
import type { Jobs } from '@/lib/context'
import { houseChain } from '@/lib/domain/audit-entry'
import { excludeCell } from '@/lib/use-cases/analyses/exclude-cell'
import { appointCommitteeMember } from '@/lib/use-cases/committee/appoint-committee-member'
import { requestExtension } from '@/lib/use-cases/laboratories/request-extension'
import { saveDraft } from '@/lib/use-cases/returns/save-draft'
import { confirmPublication } from '@/lib/use-cases/publications/confirm-publication'
import { proposePublication } from '@/lib/use-cases/publications/propose-publication'
import { readReport } from '@/lib/use-cases/publications/read-report'
import { sendToReview } from '@/lib/use-cases/reviews/send-to-review'
import { closeStudy } from '@/lib/use-cases/studies/close-study'
import { readReview } from '@/lib/use-cases/reviews/read-review'
import { randomNumbers } from './random-numbers'
import {
  analyseNow,
  codeOf,
  draftStudy,
  finishAnalysis,
  layoutOf,
  openAndAnswer,
  planWith,
  returnAs,
} from './stage-study'
import { laboratories, organisationName, people } from './twine-people'
import { inventResults, twineNames, type Habit } from './twine-results'
import { buildWorld, type World } from './world'

/** Who can sign in to the demonstration, as printed at the start. */
export const demonstrationPeople = [
  ...Object.values(people),
  ...[laboratories[0], laboratories[10]].flatMap((laboratory) =>
    laboratory
      ? [{ name: laboratory.contactName, address: laboratory.address, role: 'contact of a laboratory' }]
      : [],
  ),
]

const day = 86_400_000
const { ines, tobin } = people

const force = { name: 'Breaking force', unit: 'N', decimals: 1, hasTrueZero: true }
const density = { name: 'Linear density', unit: 'ktex', decimals: 3, hasTrueZero: true }
const fiveTwines = twineNames.map((name) => ({
  name,
  description: `Twine of ${name} fibre, one lot, spooled and cut in one day`,
}))
const byDays = [
  { name: 'day', count: 2 },
  { name: 'replicate', count: 2 },
]

/**
 * Fills an empty private database: one study at each station, the earlier ones made by the very steps that
 * people take, with the clock set back to when they took them. Codes are drawn as always, so that they differ
 * from one start to the next; the results do not.
 */
export async function seedDemonstrationWorld({
  app,
  owner,
  authSecret,
}: {
  app: Kysely<DB>
  owner: Kysely<DB>
  authSecret: string
}): Promise<void> {
  const world = buildWorld({ app, owner, authSecret, jobs: nothingQueued })
  const now = new Date()
  try {
    await world.travel(new Date(now.getTime() - 400 * day))
    await app.transaction().execute(foundCommittee)
    const stages = [published, proposed, inReview, atScrutiny, collecting, inviting, planning]
    for (const stage of stages) await stage(world, now)
    await markMailSent(app)
  } finally {
    await world.travel(null)
  }
}

/** The demonstration's own past sends no mail and waits for no worker. */
const nothingQueued: Jobs = { enqueue: () => Promise.resolve() }

async function foundCommittee(trx: Transaction<DB>): Promise<void> {
  const organisationId = await insertOrganisation(trx, organisationName)
  const members = [
    { person: ines, roles: ['administrator', 'coordinator'] as const },
    { person: tobin, roles: ['coordinator'] as const },
  ]
  await insertAuditEntry(trx, {
    studyId: houseChain,
    actorId: null,
    actorRole: 'server',
    fact: { action: 'organisation.created', version: 1, name: organisationName },
  })
  for (const { person, roles } of members) {
    const { personId } = await ensurePerson(trx, person)
    for (const role of roles) {
      await insertOrganisationMember(trx, { organisationId, personId, role })
      await insertAuditEntry(trx, {
        studyId: houseChain,
        actorId: null,
        actorRole: 'server',
        fact: { action: 'member.added', version: 1, personId, role },
      })
    }
  }
}

interface Round {
  readonly shortName: string
  readonly title: string
  readonly seed: number
  /** Days before now at which the study began and at which returns were due. */
  readonly began: number
  readonly due: number
  readonly nested?: boolean
  readonly measurands?: readonly (typeof force)[]
  readonly habits?: Readonly<Record<number, Habit>>
  /** Indices of the laboratories that have returned; all by default. */
  readonly returned?: readonly number[]
}

/** Draft, invitations, answers and returns of one round, each at its time. */
async function playRound(world: World, now: Date, round: Round): Promise<string> {
  const ago = (days: number) => new Date(now.getTime() - days * day)
  await world.travel(ago(round.began))
  const { studyId, invitationIds } = await draftStudy(world, {
    coordinator: ines.address,
    plan: planOf(round, now),
    laboratories,
  })
  for (const [person, role] of [
    [people.marit, 'chair'],
    [people.juno, 'member'],
    [people.leda, 'observer'],
  ] as const)
    await appointCommitteeMember(await world.as(ines.address), { studyId, ...person, role })
  await openAndAnswer(world, {
    coordinator: ines.address,
    studyId,
    answers: invitationIds.map((invitationId) => ({ invitationId, answer: 'accepted' })),
  })
  const layout = await layoutOf(world, { studyId, shortName: round.shortName })
  const numbers = randomNumbers(round.seed)
  for (const [index, laboratory] of laboratories.entries()) {
    const habit = round.habits?.[index]
    const entries = inventResults(layout, numbers, habit)
    if (round.returned && !round.returned.includes(index)) continue
    await world.travel(ago(Math.max(round.due, 0) + 2 + ((index * 7) % 11)))
    const remark = habit?.missing
      ? `The specimens of ${habit.missing} were damaged on arrival and could not be tested.`
      : ''
    await returnAs(world, { contact: laboratory.address, studyId, entries, remark })
  }
  return studyId
}

function planOf(round: Round, now: Date) {
  const due = new Date(now.getTime() - round.due * day)
  return planWith({
    shortName: round.shortName,
    title: round.title,
    purpose:
      'To learn how far two results on one twine may differ within a laboratory and between laboratories.',
    measurands: round.measurands ?? [force],
    materials: fiveTwines,
    levels: round.nested ? byDays : [{ name: 'replicate', count: 3 }],
    localTime: `${due.toISOString().slice(0, 10)}T17:00`,
    zone: 'Europe/Lisbon',
  })
}

async function published(world: World, now: Date): Promise<void> {
  const studyId = await scrutinised(world, now, {
    shortName: 'NT-21',
    title: 'Breaking force and linear density of natural-fibre twine',
    seed: 20260301,
    began: 330,
    due: 250,
    measurands: [force, density],
    // One laboratory apart throughout, one cell that scatters, one material missing.
    habits: {
      4: { forceShare: 0.12 },
      7: { scatter: { material: 'coir', times: 3.1 } },
      10: { missing: 'jute' },
    },
  })
  await sendToReview(await world.as(ines.address), { studyId })
  await world.travel(new Date(now.getTime() - 200 * day))
  await proposePublication(await world.as(ines.address), { studyId })
  await confirmProposed(world, studyId)
}

async function confirmProposed(world: World, studyId: string): Promise<void> {
  const context = await world.as(tobin.address)
  const { proposal } = await readReport(context, { studyId })
  if (!proposal) throw new Error('nothing was proposed')
  await confirmPublication(context, { studyId, digest: proposal.digest })
}

async function proposed(world: World, now: Date): Promise<void> {
  const studyId = await scrutinised(world, now, {
    shortName: 'NT-22',
    title: 'Breaking force of twine after soaking',
    seed: 20260302,
    began: 210,
    due: 120,
    nested: true,
  })
  await sendToReview(await world.as(ines.address), { studyId })
  await world.travel(new Date(now.getTime() - 2 * day))
  await proposePublication(await world.as(ines.address), { studyId })
}

async function inReview(world: World, now: Date): Promise<void> {
  const studyId = await scrutinised(world, now, {
    shortName: 'NT-23',
    title: 'Breaking force of conditioned twine, two days',
    seed: 20260303,
    began: 170,
    due: 60,
    nested: true,
    habits: { 2: { scatter: { material: 'flax', times: 2.6 } }, 9: { forceShare: -0.07 } },
  })
  await sendToReview(await world.as(ines.address), { studyId })
}

async function scrutinised(world: World, now: Date, round: Round): Promise<string> {
  const studyId = await playRound(world, now, round)
  await world.travel(new Date(now.getTime() - (round.due - 1) * day))
  await closeStudy(await world.as(ines.address), { studyId, reason: '' })
  await analyseNow(world, { coordinator: ines.address, studyId })
  return studyId
}

async function atScrutiny(world: World, now: Date): Promise<void> {
  const studyId = await scrutinised(world, now, {
    shortName: 'NT-24',
    title: 'Breaking force of fine twine',
    seed: 20260304,
    began: 120,
    due: 9,
    habits: {
      1: { scatter: { material: 'coir', times: 4.2 } },
      6: { forceShare: 0.09 },
      8: { missing: 'hemp' },
    },
  })
  await world.travel(new Date(now.getTime() - 3 * day))
  const scattered = laboratories[1]
  const material = await materialIds(world, studyId)
  if (!scattered) throw new Error('the list of laboratories is short')
  await excludeCell(await world.as(ines.address), {
    studyId,
    code: await codeOf(world, { contact: scattered.address, studyId }),
    measurandId: material.measurandId,
    materialId: material.coir,
    reason: 'The grips slipped in two of three tests, as the laboratory confirmed when asked.',
  })
  await finishAnalysis(world, studyId)
}

async function materialIds(world: World, studyId: string): Promise<{ measurandId: string; coir: string }> {
  const { actor } = await world.as(ines.address)
  const review = await readReview({ reader: world.system.db, actor }, { studyId })
  const coir = review.materials.find(({ name }) => name === 'coir')
  const measurand = review.analysis?.measurands[0]
  if (!coir || !measurand) throw new Error('the study has no analysis yet')
  return { measurandId: measurand.measurandId, coir: coir.materialId }
}

async function collecting(world: World, now: Date): Promise<void> {
  const round: Round = {
    shortName: 'NT-25',
    title: 'Breaking force of baling twine',
    seed: 20260305,
    began: 45,
    due: -3,
    returned: [1, 2, 3, 5, 6, 7, 8, 9],
    habits: { 3: { missing: 'flax' } },
  }
  const studyId = await playRound(world, now, round)
  const layout = await layoutOf(world, { studyId, shortName: round.shortName })
  const [drafting, asking] = [laboratories[0], laboratories[10]]
  if (!drafting || !asking) throw new Error('the list of laboratories is short')
  await world.travel(new Date(now.getTime() - 0.4 * day))
  const entries = Object.entries(inventResults(layout, randomNumbers(20260399))).slice(0, 9)
  await saveDraft(await world.as(drafting.address), {
    studyId,
    entries: Object.fromEntries(entries),
    remark: '',
    seenVersion: 0,
  })
  await requestExtension(await world.as(asking.address), {
    studyId,
    message: 'Our testing machine is with the calibration service until Thursday; four more days would do.',
  })
}

async function inviting(world: World, now: Date): Promise<void> {
  await world.travel(new Date(now.getTime() - 4 * day))
  const { studyId, invitationIds } = await draftStudy(world, {
    coordinator: tobin.address,
    plan: planOf(
      {
        shortName: 'NT-26',
        title: 'Breaking force of tarred twine',
        seed: 0,
        began: 4,
        due: -40,
        nested: true,
      },
      now,
    ),
    laboratories,
  })
  await world.travel(new Date(now.getTime() - 3 * day))
  await openAndAnswer(world, {
    coordinator: tobin.address,
    studyId,
    answers: invitationIds
      .slice(0, 8)
      .map((invitationId, index) => ({ invitationId, answer: index === 5 ? 'declined' : 'accepted' })),
  })
}

async function planning(world: World, now: Date): Promise<void> {
  await world.travel(new Date(now.getTime() - day))
  await draftStudy(world, {
    coordinator: ines.address,
    plan: planOf(
      {
        shortName: 'NT-27',
        title: 'Breaking force and linear density of hay-bale twine',
        seed: 0,
        began: 1,
        due: -90,
        measurands: [force, density],
      },
      now,
    ),
    laboratories: laboratories.slice(0, 6),
  })
}

/** Everything the past would have mailed counts as sent, but for one address that takes no mail any more. */
async function markMailSent(app: Kysely<DB>): Promise<void> {
  const gone = laboratories[11]?.address ?? ''
  await sql`
    insert into vault.mail_attempt (mail_id, number, started_at, finished_at, outcome, detail)
    select mail.mail_id, 1, mail.queued_at, mail.queued_at,
      case when mail.recipient = ${gone} and study.short_name = 'NT-26' then 'refused' else 'sent' end,
      case when mail.recipient = ${gone} and study.short_name = 'NT-26' then '550 no such mailbox here' end
    from vault.mail join study using (study_id)
  `.execute(app)
}
