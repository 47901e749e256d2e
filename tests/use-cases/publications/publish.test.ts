import { sql } from 'kysely'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { laboratories } from '@/db/seed/twine-people'
import { listAuditEntries } from '@/db/queries/audit'
import { NotFound } from '@/lib/domain/errors'
import { excludeCell } from '@/lib/use-cases/analyses/exclude-cell'
import { confirmPublication } from '@/lib/use-cases/publications/confirm-publication'
import { proposePublication } from '@/lib/use-cases/publications/propose-publication'
import { listPublications, readPublication } from '@/lib/use-cases/publications/read-publications'
import { readReport } from '@/lib/use-cases/publications/read-report'
import { withdrawProposal } from '@/lib/use-cases/publications/withdraw-proposal'
import { sendToReview, takeBackFromReview } from '@/lib/use-cases/reviews/send-to-review'
import { chair, contacts, observer, scrutinisedStudy } from '../../support/scrutinised-study'
import { createTestWorld, type TestWorld } from '../../support/test-world'

let world: TestWorld
let studyId: string
let number = 0

beforeAll(async () => {
  world = await createTestWorld({ now: '2027-03-01T09:00:00Z' })
})
afterAll(() => world.destroy())
beforeEach(async () => {
  number += 1
  studyId = (await scrutinisedStudy(world, { shortName: `NT-${number}` })).studyId
  await sendToReview(await world.as(world.coordinator), { studyId })
})

async function propose(): Promise<string> {
  await proposePublication(await world.as(world.coordinator), { studyId })
  const { proposal } = await readReport(await world.as(world.coordinator), { studyId })
  return proposal?.digest ?? ''
}

describe('publishing', () => {
  it('takes one person who proposes and another who confirms', async () => {
    const digest = await propose()
    expect(await listPublications({ reader: world.database.reader, actor: null })).toEqual([])
    const { slug } = await confirmPublication(await world.as(world.second), { studyId, digest })
    const published = await readPublication({ reader: world.database.reader, actor: null }, { slug })
    expect(published).toMatchObject({ slug: `nt-${number}`, publishedOn: '2027-03-01', digest })
    expect(published.snapshot.measurands[0]?.document.input.laboratories).toBe(4)
  })

  it('refuses the proposer as the second person, saying so', async () => {
    const digest = await propose()
    await expect(
      confirmPublication(await world.as(world.coordinator), { studyId, digest }),
    ).rejects.toMatchObject({ code: 'same-person' })
  })

  it('is held to two people by the database itself', async () => {
    await propose()
    await expect(
      sql`insert into publication (study_id, proposal_id, slug, published_on, proposed_by, confirmed_by)
        select study_id, proposal_id, 'alone', '2027-03-01', proposed_by, proposed_by from publication_proposal
        where study_id = ${studyId}`.execute(world.database.app),
    ).rejects.toMatchObject({ constraint: 'publication_two_people' })
  })

  it('lets the chair confirm, and neither the observer nor a laboratory', async () => {
    const digest = await propose()
    for (const stranger of [observer, contacts[0]!])
      await expect(confirmPublication(await world.as(stranger), { studyId, digest })).rejects.toThrow(
        NotFound,
      )
    expect(await confirmPublication(await world.as(chair), { studyId, digest })).toEqual({
      slug: `nt-${number}`,
    })
  })

  it('is invisible to a stranger, by the words for what does not exist', async () => {
    await propose()
    const elsewhere = '00000000-0000-4000-8000-00000000ffff'
    const seen = await Promise.all(
      [studyId, elsewhere].map(async (id) =>
        confirmPublication(await world.as(contacts[0]!), { studyId: id, digest: '' }).then(
          String,
          (error: Error) => error.constructor.name,
        ),
      ),
    )
    expect(seen).toEqual(['NotFound', 'NotFound'])
  })

  it('refuses a digest that is no longer the proposal’s', async () => {
    const first = await propose()
    await withdrawProposal(await world.as(world.coordinator), {
      studyId,
      reason: 'A word in the purpose is to change.',
    })
    await takeBackFromReview(await world.as(world.coordinator), {
      studyId,
      reason: 'A cell is to be looked at again.',
    })
    await expect(
      confirmPublication(await world.as(world.second), { studyId, digest: first }),
    ).rejects.toMatchObject({ code: 'wrong-state' })
    await sendToReview(await world.as(world.coordinator), { studyId })
    await propose()
    await expect(
      confirmPublication(await world.as(world.second), { studyId, digest: 'f'.repeat(64) }),
    ).rejects.toMatchObject({
      code: 'proposal-changed',
    })
  })

  it('cannot be proposed twice, nor changed while it is proposed', async () => {
    await propose()
    const context = await world.as(world.coordinator)
    await expect(proposePublication(context, { studyId })).rejects.toMatchObject({ code: 'already-proposed' })
    const cell = {
      studyId,
      code: 'B22',
      measurandId: studyId,
      materialId: studyId,
      reason: 'The grips slipped in two tests.',
    }
    await expect(excludeCell(context, cell)).rejects.toMatchObject({ code: 'wrong-state' })
  })

  it('stops a text that names a laboratory before anything is frozen', async () => {
    const town = laboratories[1]!.city
    await sql`update study set purpose = ${`As agreed at the meeting in ${town}.`} where study_id = ${studyId}`.execute(
      world.database.app,
    )
    await expect(proposePublication(await world.as(world.coordinator), { studyId })).rejects.toMatchObject({
      code: 'names-a-laboratory',
      field: 'purpose',
    })
  })

  it('holds no name of a person, a laboratory or an address in its snapshot', async () => {
    await propose()
    const { rows } = await sql<{
      snapshot: string
    }>`select snapshot from publication_proposal where study_id = ${studyId}`.execute(world.database.reader)
    const text = rows[0]?.snapshot.toLowerCase() ?? ''
    expect(text.length).toBeGreaterThan(1000)
    for (const { laboratory, city, contactName, address } of laboratories.slice(0, 4))
      for (const word of [laboratory, city, contactName, address])
        expect(text).not.toContain(word.toLowerCase())
    for (const word of ['coordinator@', 'first coordinator']) expect(text).not.toContain(word)
  })

  it('leaves its two entries in the trail, with the digest', async () => {
    const digest = await propose()
    await confirmPublication(await world.as(world.second), { studyId, digest })
    const entries = (await listAuditEntries(world.database.app, studyId)).slice(-2)
    expect(
      entries.map(({ action, actorRole, body }) => [
        action,
        actorRole,
        (JSON.parse(body) as { digest: string }).digest,
      ]),
    ).toEqual([
      ['publication.proposed', 'administrator', digest],
      ['publication.confirmed', 'coordinator', digest],
    ])
  })
})
