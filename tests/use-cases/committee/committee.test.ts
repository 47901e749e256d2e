import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Context } from '@/lib/context'
import {
  appointCommitteeMember,
  dismissCommitteeMember,
  readCommittee,
} from '@/lib/use-cases/committee/appoint-committee-member'
import type { TestWorld } from '../../support/test-world'
import {
  auditedBy,
  contact,
  coordinatedWorld,
  draft,
  entryOf,
  openedStudy,
} from '../studies/coordinated-study'

let world: TestWorld
let asCoordinator: Context
beforeAll(async () => {
  world = await coordinatedWorld()
  asCoordinator = await world.as(world.coordinator)
})
afterAll(() => world?.destroy())

const member = { name: ' Reader of Results ', address: 'Reader@Study.Example', role: 'member' as const }
const memberOf = async (studyId: string) => (await readCommittee(asCoordinator, { studyId })).members

describe('the committee of a study', () => {
  it('takes a member, who then sees this study and no other', async () => {
    const [{ studyId }, other] = [await draft(world), await draft(world)]
    const audited = await auditedBy(world, studyId, () =>
      appointCommitteeMember(asCoordinator, { studyId, ...member }),
    )
    const { actor } = await world.as('reader@study.example')
    expect(actor.committees).toEqual([{ studyId, role: 'member' }])
    expect(audited).toEqual([
      entryOf(asCoordinator.actor.personId, 'administrator', {
        action: 'committee.appointed',
        version: 1,
        personId: actor.personId,
        role: 'member',
      }),
    ])
    expect(await memberOf(other.studyId)).toEqual([])
    expect(await memberOf(studyId)).toEqual([
      {
        personId: actor.personId,
        name: 'Reader of Results',
        address: 'reader@study.example',
        role: 'member',
      },
    ])
  })

  it('changes a role by appointing the same address again, and counts one person', async () => {
    const { studyId } = await draft(world)
    await appointCommitteeMember(asCoordinator, { studyId, ...member })
    await appointCommitteeMember(asCoordinator, { studyId, ...member, role: 'chair' })
    expect((await memberOf(studyId)).map(({ role }) => role)).toEqual(['chair'])
  })

  it('lets go of a member, from whom the study is gone at once', async () => {
    const { studyId } = await draft(world)
    await appointCommitteeMember(asCoordinator, { studyId, ...member })
    const { personId } = (await memberOf(studyId))[0]!
    expect(
      await auditedBy(world, studyId, () => dismissCommitteeMember(asCoordinator, { studyId, personId })),
    ).toEqual([
      entryOf(asCoordinator.actor.personId, 'administrator', {
        action: 'committee.dismissed',
        version: 1,
        personId,
      }),
    ])
    expect(
      (await world.as('reader@study.example')).actor.committees.some((each) => each.studyId === studyId),
    ).toBe(false)
    await expect(dismissCommitteeMember(asCoordinator, { studyId, personId })).rejects.toMatchObject({
      name: 'NotFound',
    })
  })

  it('refuses who acts for a laboratory of the study, and writes nothing', async () => {
    const { studyId } = await openedStudy(world)
    const before = await memberOf(studyId)
    const appoint = appointCommitteeMember(asCoordinator, {
      studyId,
      name: 'Contact',
      address: contact,
      role: 'observer',
    })
    await expect(appoint).rejects.toMatchObject({ code: 'acts-for-laboratory', field: 'address' })
    expect(await memberOf(studyId)).toEqual(before)
  })

  it.each([
    [{ address: 'a@x.example, b@y.example' }, 'bad-address', 'address'],
    [{ name: '  ' }, 'name-needed', 'name'],
  ])('refuses %j beside its field', async (fields, code, field) => {
    const { studyId } = await draft(world)
    await expect(
      appointCommitteeMember(asCoordinator, { studyId, ...member, ...fields }),
    ).rejects.toMatchObject({ code, field })
  })
})
