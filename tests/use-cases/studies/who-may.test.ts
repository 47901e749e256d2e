import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { planWith } from '@/db/seed/stage-study'
import { laboratories } from '@/db/seed/twine-people'
import type { Context } from '@/lib/context'
import { NotFound } from '@/lib/domain/errors'
import {
  appointCommitteeMember,
  dismissCommitteeMember,
  readCommittee,
} from '@/lib/use-cases/committee/appoint-committee-member'
import { correctInvitation } from '@/lib/use-cases/laboratories/correct-invitation'
import { grantExtension } from '@/lib/use-cases/laboratories/grant-extension'
import { inviteLaboratories, inviteLaboratory } from '@/lib/use-cases/laboratories/invite-laboratory'
import { readLaboratories, revealKey } from '@/lib/use-cases/laboratories/read-laboratories'
import { sendInvitationAgain } from '@/lib/use-cases/laboratories/send-invitation-again'
import { watchReturns } from '@/lib/use-cases/returns/watch-returns'
import { closeStudy } from '@/lib/use-cases/studies/close-study'
import { openStudy } from '@/lib/use-cases/studies/open-study'
import { planStudy } from '@/lib/use-cases/studies/plan-study'
import { readStudy } from '@/lib/use-cases/studies/read-study'
import { reopenStudy } from '@/lib/use-cases/studies/reopen-study'
import { setDeadline } from '@/lib/use-cases/studies/set-deadline'
import { readTrail } from '@/lib/use-cases/trail/read-trail'
import { publicError } from '@/lib/web/error-status'
import type { TestWorld } from '../../support/test-world'
import {
  committee,
  contact,
  coordinatedWorld,
  countRows,
  openedStudy,
  stranger,
  type Staged,
} from './coordinated-study'

let world: TestWorld
let staged: Staged
beforeAll(async () => {
  world = await coordinatedWorld()
  staged = await openedStudy(world)
})
afterAll(() => world?.destroy())

const reason = 'A reason of more than ten characters.'
const deadline = { localTime: '2027-04-01T17:00', zone: 'Europe/Lisbon' }
const newcomer = laboratories[3]!
const contactFields = { contactName: 'N', address: 'n@x.example', zone: 'Europe/Lisbon' }

/** Every use case of a study's coordinator, asked of one study. */
const asked: Record<string, (context: Context, studyId: string) => Promise<unknown>> = {
  readStudy: (context, studyId) => readStudy(context, { studyId }),
  planStudy: (context, studyId) => planStudy(context, { studyId, plan: planWith({ shortName: 'OTHER' }) }),
  setDeadline: (context, studyId) => setDeadline(context, { studyId, ...deadline }),
  openStudy: (context, studyId) => openStudy(context, { studyId }),
  closeStudy: (context, studyId) => closeStudy(context, { studyId, reason }),
  reopenStudy: (context, studyId) => reopenStudy(context, { studyId, reason, ...deadline }),
  readLaboratories: (context, studyId) => readLaboratories(context, { studyId }),
  revealKey: (context, studyId) => revealKey(context, { studyId }),
  inviteLaboratory: (context, studyId) => inviteLaboratory(context, { studyId, ...newcomer }),
  inviteLaboratories: (context, studyId) => inviteLaboratories(context, { studyId, invitations: [newcomer] }),
  correctInvitation: (context, studyId) =>
    correctInvitation(context, { studyId, invitationId: staged.invitationIds[2]!, ...contactFields }),
  sendInvitationAgain: (context, studyId) =>
    sendInvitationAgain(context, { studyId, invitationId: staged.invitationIds[2]! }),
  grantExtension: (context, studyId) =>
    grantExtension(context, { studyId, code: 'K47', localTime: deadline.localTime, reason }),
  watchReturns: (context, studyId) => watchReturns(context, { studyId }),
  readCommittee: (context, studyId) => readCommittee(context, { studyId }),
  appointCommitteeMember: (context, studyId) =>
    appointCommitteeMember(context, { studyId, name: 'N', address: 'n@x.example', role: 'member' }),
  dismissCommitteeMember: (context, studyId) =>
    dismissCommitteeMember(context, { studyId, personId: randomUUID() }),
  readTrail: (context, studyId) => readTrail(context, { studyId }),
}

const refused = { ...committee, contact, stranger }
const cases = Object.keys(asked).flatMap((useCase) =>
  Object.entries(refused).map(([role, address]) => ({ useCase, role, address })),
)

async function errorOf(run: Promise<unknown>): Promise<unknown> {
  return run.then(
    () => {
      throw new Error('it was allowed')
    },
    (error: unknown) => error,
  )
}

describe('a study that is not theirs to coordinate', () => {
  it.each(cases)(
    'is not there for $role in $useCase, exactly as one that does not exist',
    async ({ useCase, address }) => {
      const before = await countRows(world)
      const forbidden = await errorOf(asked[useCase]!(await world.as(address), staged.studyId))
      const missing = await errorOf(asked[useCase]!(await world.as(world.coordinator), randomUUID()))
      expect(forbidden).toBeInstanceOf(NotFound)
      expect(publicError(forbidden)).toEqual(publicError(missing))
      expect(await countRows(world)).toBe(before)
    },
  )

  it.each(Object.keys(asked))('is not there in %s under an id that is none', async (useCase) => {
    expect(await errorOf(asked[useCase]!(await world.as(world.coordinator), "x' or 1=1"))).toBeInstanceOf(
      NotFound,
    )
  })

  it.each(['readStudy', 'readLaboratories', 'watchReturns', 'readCommittee', 'readTrail'])(
    '%s is open to both coordinators',
    async (useCase) => {
      for (const address of [world.coordinator, world.second])
        await expect(asked[useCase]!(await world.as(address), staged.studyId)).resolves.toBeDefined()
    },
  )
})
