import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { codeOf } from '@/db/seed/stage-study'
import type { Context } from '@/lib/context'
import { grantExtension } from '@/lib/use-cases/laboratories/grant-extension'
import { requestExtension } from '@/lib/use-cases/laboratories/request-extension'
import { watchReturns } from '@/lib/use-cases/returns/watch-returns'
import type { TestWorld } from '../../support/test-world'
import {
  auditedBy,
  contact,
  coordinatedWorld,
  entryOf,
  opened,
  openedStudy,
  returnResults,
} from '../studies/coordinated-study'

let world: TestWorld
let asCoordinator: Context
beforeAll(async () => {
  world = await coordinatedWorld()
  asCoordinator = await world.as(world.coordinator)
})
afterAll(() => world?.destroy())
beforeEach(() => world.database.setClock(opened))

const message = 'The machine is being recalibrated until Thursday.'
const reason = 'The machine of this laboratory is being recalibrated.'
const longer = '2027-03-18T17:00'
const justAfterDeadline = '2027-03-14T17:00:00.001Z'

async function laneOf(studyId: string) {
  const [lane] = (await watchReturns(asCoordinator, { studyId })).lanes
  return lane!
}

describe('more time for one laboratory', () => {
  it('is asked for in its own words, and told to each coordinator by mail', async () => {
    const { studyId } = await openedStudy(world)
    const asContact = await world.as(contact)
    const { participantId } = await laneOf(studyId)
    const audited = await auditedBy(world, studyId, () => requestExtension(asContact, { studyId, message }))
    expect(audited).toEqual([
      entryOf(asContact.actor.personId, 'contact', {
        action: 'extension.requested',
        version: 1,
        participantId,
      }),
    ])
    expect((await laneOf(studyId)).request).toMatchObject({ message })
    const mails = await world.database.owner
      .selectFrom('vault.mail')
      .select('recipient')
      .where('study_id', '=', studyId)
      .where('kind', '=', 'extension-requested')
      .execute()
    expect(mails.map(({ recipient }) => recipient).sort()).toEqual([world.coordinator, world.second].sort())
  })

  it('answers the request, moves only this laboratory, and is recorded by its id', async () => {
    const { studyId } = await openedStudy(world)
    await requestExtension(await world.as(contact), { studyId, message })
    await world.database.setClock('2027-03-02T09:00:00Z')
    const [{ participantId }, code] = [await laneOf(studyId), await codeOf(world, { contact, studyId })]
    const audited = await auditedBy(world, studyId, () =>
      grantExtension(asCoordinator, { studyId, code, localTime: longer, reason }),
    )
    expect(audited).toEqual([
      entryOf(asCoordinator.actor.personId, 'administrator', {
        action: 'extension.granted',
        version: 1,
        participantId,
        dueAt: '2027-03-18T17:00:00Z',
        reason,
      }),
    ])
    expect(await laneOf(studyId)).toMatchObject({
      request: null,
      extendedTo: new Date('2027-03-18T17:00:00Z'),
    })
    const mails = await world.database.owner
      .selectFrom('vault.mail')
      .select('recipient')
      .where('study_id', '=', studyId)
      .where('kind', '=', 'extension-granted')
      .execute()
    expect(mails).toEqual([{ recipient: contact }])
  })

  it('lets a laboratory return after the deadline that stands for the others', async () => {
    const { studyId } = await openedStudy(world)
    const code = await codeOf(world, { contact, studyId })
    await world.database.setClock(justAfterDeadline)
    expect((await laneOf(studyId)).state).toBe('late')
    await expect(returnResults(world, studyId)).rejects.toThrow()
    await grantExtension(asCoordinator, { studyId, code, localTime: longer, reason })
    expect((await laneOf(studyId)).state).toBe('not begun')
    await returnResults(world, studyId)
    expect((await laneOf(studyId)).state).toBe('returned')
  })

  it.each([
    [{ reason: 'why not' }, 'reason-needed', 'reason'],
    [{ localTime: '2027-02-01T10:00' }, 'deadline-past', 'localTime'],
    [{ localTime: '2027-03-28T01:30' }, 'time-skipped', 'localTime'],
    [{ localTime: 'tomorrow' }, 'bad-time', 'localTime'],
  ])('is refused with %j, beside its field', async (fields, code, field) => {
    const { studyId } = await openedStudy(world)
    const laboratory = await codeOf(world, { contact, studyId })
    const grant = grantExtension(asCoordinator, {
      studyId,
      code: laboratory,
      localTime: longer,
      reason,
      ...fields,
    })
    await expect(grant).rejects.toMatchObject({ code, field })
    expect((await laneOf(studyId)).extendedTo).toBeNull()
  })

  it('is not given under a code that nobody drew', async () => {
    const { studyId } = await openedStudy(world)
    await expect(
      grantExtension(asCoordinator, { studyId, code: 'A00', localTime: longer, reason }),
    ).rejects.toMatchObject({ name: 'NotFound' })
  })

  it('is not asked for without a word why', async () => {
    const { studyId } = await openedStudy(world)
    await expect(
      requestExtension(await world.as(contact), { studyId, message: ' soon ' }),
    ).rejects.toMatchObject({ code: 'message-needed', field: 'message' })
  })
})
