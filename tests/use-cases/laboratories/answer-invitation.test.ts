import { sql } from 'kysely'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { draftStudy, invitationToken, planWith } from '@/db/seed/stage-study'
import { laboratories } from '@/db/seed/twine-people'
import { NotFound } from '@/lib/domain/errors'
import { answerInvitation } from '@/lib/use-cases/laboratories/answer-invitation'
import { readInvitation } from '@/lib/use-cases/laboratories/read-invitation'
import { requestNewLink } from '@/lib/use-cases/laboratories/request-new-link'
import { openStudy } from '@/lib/use-cases/studies/open-study'
import { createTestWorld, type TestWorld } from '../../support/test-world'

const opened = '2027-03-01T09:00:00Z'
const due = '2027-03-14T17:00:00Z'

let world: TestWorld
beforeAll(async () => {
  world = await createTestWorld({ now: opened })
})
afterAll(() => world?.destroy())
beforeEach(() => world.database.setClock(opened))

let made = 0

async function invite(in_ = world): Promise<{ studyId: string; tokens: string[]; invitationIds: string[] }> {
  const { studyId, invitationIds } = await draftStudy(in_, {
    coordinator: in_.coordinator,
    plan: planWith({ shortName: `NT-${(made += 1)}` }),
    laboratories: laboratories.slice(0, 3),
  })
  await openStudy(await in_.as(in_.coordinator), { studyId })
  const tokens = await Promise.all(
    invitationIds.map((invitationId) => invitationToken(in_, { studyId, invitationId })),
  )
  return { studyId, tokens, invitationIds }
}

const codesOf = async (of: TestWorld, studyId: string) => {
  const { rows } = await sql<{
    code: string
  }>`select code from participant where study_id = ${studyId} order by code`.execute(of.database.owner)
  return rows.map(({ code }) => code)
}

describe('an invitation', () => {
  it('is accepted once, however often the button is pressed at the same time', async () => {
    const { studyId, tokens } = await invite()
    const answers = await Promise.allSettled(
      Array.from({ length: 8 }, () =>
        answerInvitation(world.system, { token: tokens[0]!, answer: 'accepted' }),
      ),
    )
    const accepted = answers.filter((answer) => answer.status === 'fulfilled')
    expect(accepted).toHaveLength(1)
    expect(answers.flatMap((answer) => (answer.status === 'rejected' ? [answer.reason.code] : []))).toEqual(
      Array(7).fill('already-answered'),
    )
    expect(await codesOf(world, studyId)).toHaveLength(1)
    expect(await readInvitation(world.system, { token: tokens[0]! })).toMatchObject({ state: 'accepted' })
  })

  it('gives back the invited address and nobody else’s', async () => {
    const { tokens } = await invite()
    expect(await answerInvitation(world.system, { token: tokens[1]!, answer: 'accepted' })).toEqual({
      address: laboratories[1]!.address,
    })
  })

  it('can be declined, draws no code then, and cannot be accepted afterwards', async () => {
    const { studyId, tokens } = await invite()
    await answerInvitation(world.system, { token: tokens[0]!, answer: 'declined' })
    await expect(
      answerInvitation(world.system, { token: tokens[0]!, answer: 'accepted' }),
    ).rejects.toMatchObject({ code: 'already-answered' })
    expect(await codesOf(world, studyId)).toEqual([])
    const { rows } =
      await sql`select action, actor_role from audit.entry where study_id = ${studyId} order by sequence desc limit 1`.execute(
        world.database.owner,
      )
    expect(rows).toEqual([{ action: 'laboratory.declined', actor_role: 'invited laboratory' }])
  })

  it('is not answered by a link that a newer one has replaced; the newer one answers', async () => {
    const { studyId, tokens, invitationIds } = await invite()
    await world.database.setClock('2027-03-02T09:00:00Z')
    await requestNewLink(world.system, { token: tokens[0]! })
    await expect(
      answerInvitation(world.system, { token: tokens[0]!, answer: 'accepted' }),
    ).rejects.toMatchObject({ code: 'superseded' })
    expect(await readInvitation(world.system, { token: tokens[0]! })).toMatchObject({ state: 'superseded' })
    const newer = await invitationToken(world, { studyId, invitationId: invitationIds[0]! })
    expect(await answerInvitation(world.system, { token: newer, answer: 'accepted' })).toEqual({
      address: laboratories[0]!.address,
    })
  })

  it('has a new link mailed to the invited address alone, and not twice within five minutes', async () => {
    const { studyId, tokens } = await invite()
    await world.database.setClock('2027-03-02T09:00:00Z')
    await requestNewLink(world.system, { token: tokens[0]! })
    await expect(requestNewLink(world.system, { token: tokens[0]! })).rejects.toMatchObject({
      code: 'just-sent',
    })
    const { rows } = await sql`
      select recipient, count(*)::int as mails from vault.mail where study_id = ${studyId} and kind = 'invitation' group by recipient having count(*) > 1
    `.execute(world.database.owner)
    expect(rows).toEqual([{ recipient: laboratories[0]!.address, mails: 2 }])
  })

  it('is answered in the last instant and no longer after it', async () => {
    const { tokens } = await invite()
    await world.database.setClock(due)
    await answerInvitation(world.system, { token: tokens[0]!, answer: 'accepted' })
    await world.database.setClock('2027-03-14T17:00:00.001Z')
    await expect(
      answerInvitation(world.system, { token: tokens[1]!, answer: 'accepted' }),
    ).rejects.toMatchObject({ code: 'closed' })
    expect(await readInvitation(world.system, { token: tokens[1]! })).toMatchObject({ state: 'closed' })
  })

  it('is not known by a link with one sign changed, nor by one without its secret', async () => {
    const { tokens } = await invite()
    const [id, number, secret] = tokens[0]!.split('.') as [string, string, string]
    const changed = `${id}.${number}.${secret.startsWith('A') ? 'B' : 'A'}${secret.slice(1)}`
    for (const token of [changed, `${id}.${number}.`, `${id}.2.${secret}`, '', 'x'.repeat(5000)]) {
      expect(await readInvitation(world.system, { token })).toEqual({ state: 'unknown' })
      await expect(answerInvitation(world.system, { token, answer: 'accepted' })).rejects.toBeInstanceOf(
        NotFound,
      )
    }
    // 256 bits of a keyed hash, in 43 signs.
    expect(secret).toMatch(/^[\w-]{43}$/)
  })

  it('shows no laboratory, no address, no code and no contact to whoever holds its link', async () => {
    const { studyId, tokens } = await invite()
    await answerInvitation(world.system, { token: tokens[0]!, answer: 'accepted' })
    const shown = JSON.stringify(await readInvitation(world.system, { token: tokens[0]! }))
    const { laboratory, address, contactName } = laboratories[0]!
    for (const secret of [laboratory, address, contactName, ...(await codesOf(world, studyId))])
      expect(shown).not.toContain(secret)
  })
})

describe('the code of a laboratory', () => {
  it('is drawn and not derived: the same world with other chance has other codes', async () => {
    const other = await createTestWorld({ now: opened, seed: 2 })
    try {
      const [here, there] = [await invite(), await invite(other)]
      for (const token of here.tokens) await answerInvitation(world.system, { token, answer: 'accepted' })
      for (const token of there.tokens) await answerInvitation(other.system, { token, answer: 'accepted' })
      const [one, two] = [await codesOf(world, here.studyId), await codesOf(other, there.studyId)]
      expect(new Set(one).size).toBe(3)
      expect(one).not.toEqual(two)
    } finally {
      await other.destroy()
    }
  })

  it('is another in each study of the same laboratory', async () => {
    const studies = [await invite(), await invite(), await invite(), await invite()]
    const codes: string[] = []
    for (const { studyId, tokens } of studies) {
      await answerInvitation(world.system, { token: tokens[0]!, answer: 'accepted' })
      codes.push(...(await codesOf(world, studyId)))
    }
    expect(new Set(codes).size).toBe(4)
  })
})
