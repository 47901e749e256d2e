import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { invitationToken } from '@/db/seed/stage-study'
import { laboratories } from '@/db/seed/twine-people'
import type { Context } from '@/lib/context'
import { answerInvitation } from '@/lib/use-cases/laboratories/answer-invitation'
import { checkLaboratoryLines } from '@/lib/use-cases/laboratories/check-laboratory-lines'
import { correctInvitation } from '@/lib/use-cases/laboratories/correct-invitation'
import { inviteLaboratories, inviteLaboratory } from '@/lib/use-cases/laboratories/invite-laboratory'
import { readLaboratories } from '@/lib/use-cases/laboratories/read-laboratories'
import { sendInvitationAgain } from '@/lib/use-cases/laboratories/send-invitation-again'
import type { TestWorld } from '../../support/test-world'
import { auditedBy, coordinatedWorld, draft, entryOf, openedStudy } from '../studies/coordinated-study'

let world: TestWorld
let asCoordinator: Context
beforeAll(async () => {
  world = await coordinatedWorld()
  asCoordinator = await world.as(world.coordinator)
})
afterAll(() => world?.destroy())

const newcomer = laboratories[3]!
const another = laboratories[4]!
const entry = (fact: Parameters<typeof entryOf>[2]) =>
  entryOf(asCoordinator.actor.personId, 'administrator', fact)
const listOf = async (studyId: string) => (await readLaboratories(asCoordinator, { studyId })).invitations
const mailsOf = (studyId: string) =>
  world.database.owner
    .selectFrom('vault.mail')
    .select(['kind', 'recipient'])
    .where('study_id', '=', studyId)
    .orderBy('queued_at')
    .execute()

describe('a laboratory', () => {
  it('is put on the list of a draft without a mail, and its entry names it by id alone', async () => {
    const { studyId } = await draft(world)
    const audited = await auditedBy(world, studyId, () =>
      inviteLaboratory(asCoordinator, { studyId, ...newcomer }),
    )
    const invitation = (await listOf(studyId)).find(({ laboratory }) => laboratory === newcomer.laboratory)
    expect(audited).toEqual([
      entry({ action: 'laboratory.invited', version: 1, invitationId: invitation!.invitationId }),
    ])
    expect(await mailsOf(studyId)).toEqual([])
    expect(invitation).toMatchObject({ address: newcomer.address, lastLink: null, answer: null, mail: null })
  })

  it('is mailed at once in an open study', async () => {
    const { studyId } = await openedStudy(world)
    const before = await mailsOf(studyId)
    expect(await inviteLaboratory(asCoordinator, { studyId, ...newcomer })).toMatchObject({ mailed: true })
    expect((await mailsOf(studyId)).slice(before.length)).toEqual([
      { kind: 'invitation', recipient: newcomer.address },
    ])
  })

  it('stands on the list once', async () => {
    const { studyId } = await draft(world)
    await expect(inviteLaboratory(asCoordinator, { studyId, ...laboratories[0]! })).rejects.toMatchObject({
      code: 'already-invited',
      field: 'laboratory',
    })
  })

  it('is not invited by two addresses in one', async () => {
    const { studyId } = await draft(world)
    const invite = inviteLaboratory(asCoordinator, {
      studyId,
      ...newcomer,
      address: 'a@x.example,b@y.example',
    })
    await expect(invite).rejects.toMatchObject({ code: 'bad-address', field: 'address' })
    expect(await listOf(studyId)).toHaveLength(3)
  })

  it('comes onto the list with all of a pasted list, or none do', async () => {
    const { studyId } = await draft(world)
    const all = inviteLaboratories(asCoordinator, {
      studyId,
      invitations: [newcomer, another, laboratories[0]!],
    })
    await expect(all).rejects.toMatchObject({ code: 'already-invited' })
    expect(await listOf(studyId)).toHaveLength(3)
    expect(await inviteLaboratories(asCoordinator, { studyId, invitations: [newcomer, another] })).toEqual({
      invited: 2,
      mailed: false,
    })
    expect(await listOf(studyId)).toHaveLength(5)
  })
})

describe('pasted lines', () => {
  it('are read with semicolons or with the tabs of a sheet, and a place stands for its zone', () => {
    const text =
      'Alpha; Aton; Norway; A. Person; a@alpha.example; Oslo\n\nBeta\tBtown\tIndia\tB. Person\tb@beta.example\tAsia/Kolkata\r\n'
    const { invitations, problems } = checkLaboratoryLines(text)
    expect(problems).toEqual([])
    expect(invitations.map(({ laboratory, zone }) => [laboratory, zone])).toEqual([
      ['Alpha', 'Europe/Oslo'],
      ['Beta', 'Asia/Kolkata'],
    ])
  })

  it('name each problem by its line, empty lines counted', () => {
    const lines = [
      'Alpha; Aton; Norway; A. Person; a@alpha.example; Oslo',
      '',
      'Beta; Btown',
      'Alpha; x; y; Z; z@z, y@y; Nowhere',
      '; t; c; P; p@p.example; Oslo',
    ]
    expect(checkLaboratoryLines(lines.join('\n')).problems).toEqual([
      'Line 3: 2 parts instead of 6: laboratory; town; country; contact; address; zone.',
      'Line 4: “Alpha” stands in line 1 already.',
      'Line 4: Choose the time zone of the laboratory.',
      'Line 4: “z@z, y@y” is not one mail address.',
      'Line 5: Give the name of the laboratory.',
    ])
  })

  it('are refused when there are none, or too many to look through', () => {
    expect(checkLaboratoryLines(' \n ').problems).toEqual(['Paste one line a laboratory.'])
    expect(checkLaboratoryLines('x\n'.repeat(201)).problems).toEqual([
      'Paste 200 lines at most at a time; these are 201.',
    ])
  })
})

describe('an invitation without an answer', () => {
  it('is sent again by a new link, and the earlier link says it was replaced', async () => {
    const { studyId, invitationIds } = await openedStudy(world)
    const place = { studyId, invitationId: invitationIds[2]! }
    const earlier = await invitationToken(world, place)
    const audited = await auditedBy(world, studyId, () => sendInvitationAgain(asCoordinator, place))
    expect(audited).toEqual([
      entry({ action: 'laboratory.re-sent', version: 1, invitationId: place.invitationId, link: 2 }),
    ])
    await expect(
      answerInvitation(world.system, { token: earlier, answer: 'accepted' }),
    ).rejects.toMatchObject({ code: 'superseded' })
    await expect(
      answerInvitation(world.system, { token: await invitationToken(world, place), answer: 'accepted' }),
    ).resolves.toBeDefined()
  })

  it('is not sent again once it is answered', async () => {
    const { studyId, invitationIds } = await openedStudy(world)
    for (const invitationId of invitationIds.slice(0, 2))
      await expect(sendInvitationAgain(asCoordinator, { studyId, invitationId })).rejects.toMatchObject({
        code: 'already-answered',
      })
  })

  it('goes to the corrected address, and the link at the old one no longer works', async () => {
    const { studyId, invitationIds } = await openedStudy(world)
    const place = { studyId, invitationId: invitationIds[2]! }
    const earlier = await invitationToken(world, place)
    const corrected = { contactName: 'New Contact', address: 'New@Right.Example', zone: 'Asia/Kolkata' }
    const audited = await auditedBy(world, studyId, () =>
      correctInvitation(asCoordinator, { ...place, ...corrected }),
    )
    expect(audited).toEqual([
      entry({ action: 'laboratory.corrected', version: 1, invitationId: place.invitationId, link: 2 }),
    ])
    expect((await mailsOf(studyId)).at(-1)).toEqual({ kind: 'invitation', recipient: 'new@right.example' })
    await expect(
      answerInvitation(world.system, { token: earlier, answer: 'accepted' }),
    ).rejects.toMatchObject({ code: 'superseded' })
    expect(
      await answerInvitation(world.system, {
        token: await invitationToken(world, place),
        answer: 'accepted',
      }),
    ).toEqual({ address: 'new@right.example' })
  })

  it('is corrected in a draft without a mail, and not at all once answered', async () => {
    const contact = { contactName: 'N', address: 'n@x.example', zone: 'Europe/Lisbon' }
    const drafted = await draft(world)
    const place = { studyId: drafted.studyId, invitationId: drafted.invitationIds[0]! }
    expect(await correctInvitation(asCoordinator, { ...place, ...contact })).toEqual({ mailed: false })
    expect(await mailsOf(drafted.studyId)).toEqual([])
    const { studyId, invitationIds } = await openedStudy(world)
    await expect(
      correctInvitation(asCoordinator, { studyId, invitationId: invitationIds[0]!, ...contact }),
    ).rejects.toMatchObject({ code: 'already-answered' })
  })

  it('of another study is not there', async () => {
    const [one, other] = [await openedStudy(world), await openedStudy(world)]
    await expect(
      sendInvitationAgain(asCoordinator, { studyId: one.studyId, invitationId: other.invitationIds[2]! }),
    ).rejects.toMatchObject({ name: 'NotFound' })
  })
})
