import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { planWith } from '@/db/seed/stage-study'
import { laboratories } from '@/db/seed/twine-people'
import { readLayout } from '@/db/queries/studies'
import type { Context } from '@/lib/context'
import { Refusal } from '@/lib/domain/errors'
import { studyStates, type StudyState } from '@/lib/domain/study-states'
import { grantExtension } from '@/lib/use-cases/laboratories/grant-extension'
import { inviteLaboratory } from '@/lib/use-cases/laboratories/invite-laboratory'
import { sendInvitationAgain } from '@/lib/use-cases/laboratories/send-invitation-again'
import { sendToReview, takeBackFromReview } from '@/lib/use-cases/reviews/send-to-review'
import { closeStudy } from '@/lib/use-cases/studies/close-study'
import { createStudy } from '@/lib/use-cases/studies/create-study'
import { listStudies } from '@/lib/use-cases/studies/list-studies'
import { openStudy } from '@/lib/use-cases/studies/open-study'
import { planStudy } from '@/lib/use-cases/studies/plan-study'
import { readStudy } from '@/lib/use-cases/studies/read-study'
import { reopenStudy } from '@/lib/use-cases/studies/reopen-study'
import { setDeadline } from '@/lib/use-cases/studies/set-deadline'
import type { TestWorld } from '../../support/test-world'
import {
  auditedBy,
  contact,
  coordinatedWorld,
  draft,
  draftIn,
  entryOf,
  opened,
  openedStudy,
  returnResults,
  stranger,
  type Staged,
} from './coordinated-study'

let world: TestWorld
let asCoordinator: Context
beforeAll(async () => {
  world = await coordinatedWorld()
  asCoordinator = await world.as(world.coordinator)
})
afterAll(() => world?.destroy())
beforeEach(() => world.database.setClock(opened))

const reason = 'The laboratories were asked and agreed.'
const later = { localTime: '2027-04-01T17:00', zone: 'Europe/Lisbon' }
const afterDeadline = '2027-03-14T17:00:00.001Z'

const entry = (fact: Parameters<typeof entryOf>[2], role = 'administrator') =>
  entryOf(asCoordinator.actor.personId, role, fact)
const stateOf = async (studyId: string) => (await readStudy(asCoordinator, { studyId })).study.state

describe('each step of a study, from each state', () => {
  const steps: Record<string, { from: readonly StudyState[]; take: (staged: Staged) => Promise<unknown> }> = {
    planStudy: {
      from: ['draft'],
      take: ({ studyId }) =>
        planStudy(asCoordinator, { studyId, plan: planWith({ shortName: `P-${studyId.slice(0, 8)}` }) }),
    },
    openStudy: { from: ['draft'], take: ({ studyId }) => openStudy(asCoordinator, { studyId }) },
    setDeadline: {
      from: ['draft', 'open'],
      take: ({ studyId }) => setDeadline(asCoordinator, { studyId, ...later }),
    },
    inviteLaboratory: {
      from: ['draft', 'open'],
      take: ({ studyId }) => inviteLaboratory(asCoordinator, { studyId, ...laboratories[5]! }),
    },
    sendInvitationAgain: {
      from: ['open'],
      take: ({ studyId, invitationIds }) =>
        sendInvitationAgain(asCoordinator, { studyId, invitationId: invitationIds[0]! }),
    },
    closeStudy: { from: ['open'], take: ({ studyId }) => closeStudy(asCoordinator, { studyId, reason }) },
    reopenStudy: {
      from: ['closed'],
      take: ({ studyId }) => reopenStudy(asCoordinator, { studyId, reason, ...later }),
    },
    sendToReview: { from: ['closed'], take: ({ studyId }) => sendToReview(asCoordinator, { studyId }) },
    takeBackFromReview: {
      from: ['in-review'],
      take: ({ studyId }) => takeBackFromReview(asCoordinator, { studyId, reason }),
    },
  }
  const cases = Object.entries(steps).flatMap(([step, { from }]) =>
    studyStates.map((state) => ({ step, state, may: from.includes(state) })),
  )

  it.each(cases)('$step from $state: $may', async ({ step, state, may }) => {
    const staged = await draftIn(world, state)
    const outcome = await steps[step]!.take(staged).then(
      () => 'done',
      (error: unknown) => {
        if (error instanceof Refusal) return error.code
        throw error
      },
    )
    if (!may) {
      expect(outcome).toBe('wrong-state')
      expect(await stateOf(staged.studyId)).toBe(state)
    } else {
      // Some steps need more than the state; that another rule speaks shows that the state did not.
      expect(['done', 'nothing-returned', 'analysis-missing']).toContain(outcome)
    }
  })
})

describe('a study', () => {
  it('is opened as a draft, with exactly what was planned', async () => {
    const plan = planWith({
      shortName: 'NEW-1',
      limitFactor: '2.77',
      levels: [
        { name: 'day', count: 2 },
        { name: 'replicate', count: 3 },
      ],
    })
    const { studyId } = await createStudy(asCoordinator, { organisationId: world.organisationId, plan })
    const view = await readStudy(asCoordinator, { studyId })
    expect(view.study).toMatchObject({
      shortName: 'NEW-1',
      state: 'draft',
      limitFactor: '2.77',
      deadline: { at: '2027-03-14T17:00:00.000Z' },
    })
    expect(view.layout.levels).toEqual(plan.levels)
    expect(view.counts).toEqual({ invited: 0, accepted: 0, declined: 0, returned: 0, committee: 0 })
    expect(await auditedBy(world, studyId, async () => {})).toEqual([])
  })

  it('is not opened for an organisation one does not coordinate', async () => {
    const plan = planWith({ shortName: 'NEW-2' })
    const create = createStudy(await world.as(stranger), { organisationId: world.organisationId, plan })
    await expect(create).rejects.toMatchObject({ name: 'NotFound' })
  })

  it('is refused a short name that the organisation has already, beside its field', async () => {
    const { studyId } = await draft(world)
    const { shortName } = (await readStudy(asCoordinator, { studyId })).study
    await expect(
      createStudy(asCoordinator, { organisationId: world.organisationId, plan: planWith({ shortName }) }),
    ).rejects.toMatchObject({
      code: 'short-name-taken',
      field: 'shortName',
    })
  })

  it('is refused a deadline that has passed, by the clock of the database', async () => {
    await world.database.setClock(afterDeadline)
    await expect(
      createStudy(asCoordinator, {
        organisationId: world.organisationId,
        plan: planWith({ shortName: 'NEW-3' }),
      }),
    ).rejects.toMatchObject({
      code: 'deadline-past',
      field: 'localTime',
    })
  })

  it('replans a draft whole, and records what stood before and after', async () => {
    const { studyId } = await draft(world)
    const plan = planWith({
      shortName: 'REPLAN',
      materials: [{ name: 'jute' }],
      localTime: '2027-03-20T12:00',
    })
    const [first, ...rest] = await auditedBy(world, studyId, () =>
      planStudy(asCoordinator, { studyId, plan }),
    )
    expect(rest).toEqual([])
    expect(first).toMatchObject({ actorRole: 'administrator', action: 'study.planned' })
    const { before, after } = JSON.parse(first!.body) as {
      before: { materials: { name: string }[] }
      after: unknown
    }
    expect(before.materials.map(({ name }) => name)).toEqual(['sisal', 'hemp'])
    expect(after).toEqual(JSON.parse(JSON.stringify(plan)))
    expect((await readLayout(world.database.app, studyId)).materials.map(({ name }) => name)).toEqual([
      'jute',
    ])
    expect((await readStudy(asCoordinator, { studyId })).study.deadline.at).toBe('2027-03-20T12:00:00.000Z')
  })

  it('sends every invitation when it opens, once, and says how many', async () => {
    const { studyId } = await draft(world)
    const audited = await auditedBy(world, studyId, () => openStudy(asCoordinator, { studyId }))
    expect(audited).toEqual([entry({ action: 'study.opened', version: 1, invitations: 3 })])
    const mails = await world.database.owner
      .selectFrom('vault.mail')
      .select('kind')
      .where('study_id', '=', studyId)
      .execute()
    expect(mails).toEqual(Array(3).fill({ kind: 'invitation' }))
    await expect(openStudy(asCoordinator, { studyId })).rejects.toMatchObject({ code: 'wrong-state' })
  })

  it('does not open with fewer than two laboratories', async () => {
    const { studyId } = await createStudy(asCoordinator, {
      organisationId: world.organisationId,
      plan: planWith({ shortName: 'LONE' }),
    })
    await inviteLaboratory(asCoordinator, { studyId, ...laboratories[0]! })
    await expect(openStudy(asCoordinator, { studyId })).rejects.toMatchObject({
      code: 'too-few-laboratories',
    })
    expect(await stateOf(studyId)).toBe('draft')
  })

  it('is opened by one of two people who press at the same time', async () => {
    const { studyId } = await draft(world)
    const other = await world.as(world.second)
    const outcomes = await Promise.allSettled([
      openStudy(asCoordinator, { studyId }),
      openStudy(other, { studyId }),
    ])
    expect(outcomes.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected'])
    const mails = await world.database.owner
      .selectFrom('vault.mail')
      .select('kind')
      .where('study_id', '=', studyId)
      .execute()
    expect(mails).toHaveLength(3)
  })

  it('moves its deadline and keeps the earlier one in the trail', async () => {
    const { studyId } = await openedStudy(world)
    const audited = await auditedBy(world, studyId, () => setDeadline(asCoordinator, { studyId, ...later }))
    expect(audited).toHaveLength(1)
    expect(JSON.parse(audited[0]!.body)).toMatchObject({
      before: { at: '2027-03-14T17:00:00.000Z', zone: 'Europe/Lisbon', localTime: '2027-03-14T17:00' },
      after: { at: '2027-04-01T16:00:00Z', zone: 'Europe/Lisbon', localTime: '2027-04-01T17:00' },
    })
  })

  it('refuses to move its deadline into an hour that does not occur', async () => {
    const { studyId } = await openedStudy(world)
    const move = setDeadline(asCoordinator, { studyId, localTime: '2027-03-28T02:30', zone: 'Europe/Berlin' })
    await expect(move).rejects.toMatchObject({ code: 'time-skipped', field: 'localTime' })
  })

  it('closes before its deadline only with a reason, after it without one', async () => {
    const { studyId } = await openedStudy(world)
    await expect(closeStudy(asCoordinator, { studyId, reason })).rejects.toMatchObject({
      code: 'nothing-returned',
    })
    await returnResults(world, studyId)
    await expect(closeStudy(asCoordinator, { studyId, reason: ' short ' })).rejects.toMatchObject({
      code: 'reason-needed',
      field: 'reason',
    })
    expect(await auditedBy(world, studyId, () => closeStudy(asCoordinator, { studyId, reason }))).toEqual([
      entry({ action: 'study.closed', version: 1, reason, returned: 1, expected: 1 }),
    ])

    const second = await openedStudy(world)
    await returnResults(world, second.studyId)
    await world.database.setClock(afterDeadline)
    expect(
      await auditedBy(world, second.studyId, () =>
        closeStudy(asCoordinator, { studyId: second.studyId, reason: '' }),
      ),
    ).toEqual([entry({ action: 'study.closed', version: 1, reason: null, returned: 1, expected: 1 })])
  })

  it('reopens with a reason and a deadline to come, and records both', async () => {
    const { studyId } = await openedStudy(world)
    await returnResults(world, studyId)
    await closeStudy(asCoordinator, { studyId, reason })
    await expect(reopenStudy(asCoordinator, { studyId, reason: 'why', ...later })).rejects.toMatchObject({
      code: 'reason-needed',
    })
    await expect(
      reopenStudy(asCoordinator, { studyId, reason, ...later, localTime: '2027-02-01T10:00' }),
    ).rejects.toMatchObject({ code: 'deadline-past' })
    expect(await stateOf(studyId)).toBe('closed')
    const audited = await auditedBy(world, studyId, () =>
      reopenStudy(asCoordinator, { studyId, reason, ...later }),
    )
    expect(audited.map(({ action }) => action)).toEqual(['study.reopened', 'deadline.set'])
    expect(audited[0]).toEqual(entry({ action: 'study.reopened', version: 1, reason }))
    expect(await stateOf(studyId)).toBe('open')
    // The laboratory can return again, which it could not a moment before.
    await returnResults(world, studyId)
  })

  it('is listed once for each capacity in which a person reads it, and to nobody else', async () => {
    const { studyId } = await openedStudy(world)
    const listed = async (address: string) =>
      (await listStudies(await world.as(address))).entries
        .filter(({ study }) => study.studyId === studyId)
        .map((each) => each.as)
    expect(await listed(world.coordinator)).toEqual(['coordinator'])
    expect(await listed(contact)).toEqual(['laboratory'])
    expect(await listed('observer@study.example')).toEqual(['committee'])
    expect(await listed(stranger)).toEqual([])
  })

  it('may be opened anew only by who coordinates, in the organisations named', async () => {
    expect((await listStudies(asCoordinator)).mayCreateIn).toEqual([
      { organisationId: world.organisationId, name: 'Committee of the Tests' },
    ])
    expect((await listStudies(await world.as(contact))).mayCreateIn).toEqual([])
  })

  it('grants a laboratory more time only while it is open', async () => {
    const { studyId } = await draftIn(world, 'closed')
    const grant = grantExtension(asCoordinator, { studyId, code: 'K47', localTime: later.localTime, reason })
    await expect(grant).rejects.toMatchObject({ code: 'wrong-state' })
  })
})
