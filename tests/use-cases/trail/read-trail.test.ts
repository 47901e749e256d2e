import { sql } from 'kysely'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { listAuditEntries } from '@/db/queries/audit'
import { chainStart, hashEntry } from '@/lib/domain/audit-entry'
import { auditActions, describeAuditEntry } from '@/lib/domain/describe-audit-entry'
import { revealKey } from '@/lib/use-cases/laboratories/read-laboratories'
import { readTrail } from '@/lib/use-cases/trail/read-trail'
import { laboratories } from '@/db/seed/twine-people'
import type { TestWorld } from '../../support/test-world'
import { coordinatedWorld, draft, openedStudy, returnResults } from '../studies/coordinated-study'

let world: TestWorld
beforeAll(async () => {
  world = await coordinatedWorld()
})
afterAll(() => world?.destroy())

const verdictOf = async (studyId: string) =>
  (await readTrail(await world.as(world.coordinator), { studyId })).verdict

/** Does to a trail what only the owner of the database could, with its guards taken down. */
async function tamper(work: (owner: typeof world.database.owner) => Promise<unknown>): Promise<void> {
  await world.database.owner.transaction().execute(async (trx) => {
    await sql`alter table audit.entry disable trigger user`.execute(trx)
    await work(trx)
    await sql`alter table audit.entry enable trigger user`.execute(trx)
  })
}

describe('a trail', () => {
  it('holds as it was written, with as many entries as there were decisions', async () => {
    const { studyId } = await draft(world)
    const trail = await readTrail(await world.as(world.coordinator), { studyId })
    expect(trail.verdict).toBeNull()
    expect(trail.entries.map(({ sequence, action }) => [sequence, action])).toEqual([
      [1, 'study.created'],
      [2, 'laboratory.invited'],
      [3, 'laboratory.invited'],
      [4, 'laboratory.invited'],
    ])
    expect(trail.head).toBe(trail.entries.at(-1)?.hash)
    expect(trail.entries[0]?.previousHash).toBe(chainStart)
  })

  it('names the entry of which one byte was flipped', async () => {
    const { studyId } = await draft(world)
    await tamper((owner) =>
      sql`update audit.entry set body = overlay(body placing 'x' from 5 for 1) where study_id = ${studyId} and sequence = 3`.execute(
        owner,
      ),
    )
    expect(await verdictOf(studyId)).toEqual({ sequence: 3, reason: 'entry 3 was changed' })
  })

  it('names the entry whose time was moved by a millisecond', async () => {
    const { studyId } = await draft(world)
    await tamper((owner) =>
      sql`update audit.entry set at = at + interval '1 millisecond' where study_id = ${studyId} and sequence = 2`.execute(
        owner,
      ),
    )
    expect(await verdictOf(studyId)).toEqual({ sequence: 2, reason: 'entry 2 was changed' })
  })

  it('names the entry that was taken out', async () => {
    const { studyId } = await draft(world)
    await tamper((owner) =>
      sql`delete from audit.entry where study_id = ${studyId} and sequence = 2`.execute(owner),
    )
    expect(await verdictOf(studyId)).toEqual({ sequence: 2, reason: 'entry 2 is missing' })
  })

  it('names the first of two entries that changed places', async () => {
    const { studyId } = await draft(world)
    await tamper(async (owner) => {
      for (const [from, to] of [
        [2, 102],
        [3, 2],
        [102, 3],
      ])
        await sql`update audit.entry set sequence = ${to} where study_id = ${studyId} and sequence = ${from}`.execute(
          owner,
        )
    })
    expect(await verdictOf(studyId)).toMatchObject({ sequence: 2 })
  })

  it('names an entry put in between, whose own digest is right', async () => {
    const { studyId } = await draft(world)
    const [first, second] = await listAuditEntries(world.database.app, studyId)
    const forged = { ...second!, previousHash: first!.hash, body: '{"invitationId":"another"}' }
    await tamper(async (owner) => {
      await sql`update audit.entry set sequence = sequence + 100 where study_id = ${studyId} and sequence >= 2`.execute(
        owner,
      )
      await sql`update audit.entry set sequence = sequence - 99 where study_id = ${studyId} and sequence > 100`.execute(
        owner,
      )
      await sql`insert into audit.entry (study_id, sequence, at, actor_id, actor_role, action, version, body, previous_hash, hash)
        values (${studyId}, 2, ${forged.at}, ${forged.actorId}, ${forged.actorRole}, ${forged.action}, 1, ${forged.body}, ${forged.previousHash}, ${hashEntry(forged)})`.execute(
        owner,
      )
    })
    expect(await verdictOf(studyId)).toEqual({
      sequence: 3,
      reason: 'entry 3 does not follow the one before it',
    })
  })

  it('names an entry added past the end', async () => {
    const { studyId } = await draft(world)
    const last = (await listAuditEntries(world.database.app, studyId)).at(-1)!
    const forged = { ...last, sequence: 5, previousHash: last.hash }
    await sql`insert into audit.entry (study_id, sequence, at, actor_id, actor_role, action, version, body, previous_hash, hash)
      values (${studyId}, 5, ${forged.at}, ${forged.actorId}, ${forged.actorRole}, ${forged.action}, 1, ${forged.body}, ${forged.previousHash}, ${hashEntry(forged)})`.execute(
      world.database.owner,
    )
    expect(await verdictOf(studyId)).toEqual({
      sequence: 5,
      reason: 'entry 5 was added past the end of the chain',
    })
  })

  it('notices that its tail was cut', async () => {
    const { studyId } = await draft(world)
    await tamper((owner) =>
      sql`delete from audit.entry where study_id = ${studyId} and sequence > 2`.execute(owner),
    )
    expect(await verdictOf(studyId)).toEqual({
      sequence: 3,
      reason: 'the chain once reached entry 4, and entries after 2 are missing',
    })
  })

  it('notices that its head is gone', async () => {
    const { studyId } = await draft(world)
    await sql`delete from audit.chain where study_id = ${studyId}`.execute(world.database.owner)
    expect(await verdictOf(studyId)).toMatchObject({ sequence: 1 })
  })

  it('is told in sentences, laboratories by code, and says of no acceptance whose it was', async () => {
    const { studyId } = await openedStudy(world)
    await returnResults(world, studyId)
    const coordinator = await world.as(world.coordinator)
    const key = await revealKey(coordinator, { studyId })
    const { entries, subjects } = await readTrail(coordinator, { studyId })
    const told = entries.map((entry) => describeAuditEntry(entry, { subjects, zone: 'Europe/Lisbon' }))
    expect(told).toContain('First Coordinator appointed The chair to the committee as chair.')
    expect(told).toContain('First Coordinator sent 3 invitations and opened the study.')
    expect(told).toContain('An invited laboratory accepted and drew its code.')
    expect(told).toContain('An invited laboratory declined.')
    expect(
      told.some((sentence) =>
        sentence.startsWith(`Laboratory ${key[0]!.code} returned 4 results, version 1`),
      ),
    ).toBe(true)
    expect(told.at(-1)).toBe('First Coordinator read which laboratory is which (1 code).')
    const text = told.join('\n')
    for (const { laboratory, address, contactName } of laboratories.slice(0, 3))
      for (const word of [laboratory, address, contactName]) expect(text).not.toContain(word)
  })

  it('has a sentence for every action the product records', () => {
    expect(new Set(auditActions).size).toBe(auditActions.length)
    expect(auditActions.length).toBeGreaterThan(25)
  })
})

describe('the rows of the trail', () => {
  it.each([
    'update audit.entry set body = body',
    'delete from audit.entry',
    'truncate audit.entry',
    'delete from audit.chain',
    'truncate audit.chain',
  ])('cannot be touched by the product’s own login: %s', async (statement) => {
    await draft(world)
    await expect(sql.raw(statement).execute(world.database.app)).rejects.toThrow(/permission denied/)
  })

  it.each(['update audit.entry set body = body', 'delete from audit.entry', 'truncate audit.entry'])(
    'are guarded even against their owner: %s',
    async (statement) => {
      await draft(world)
      await expect(sql.raw(statement).execute(world.database.owner)).rejects.toThrow(
        /audit entries are never changed/,
      )
    },
  )

  it.each(['select * from audit.entry', 'select * from audit.chain'])(
    'are out of sight of the anonymous login: %s',
    async (statement) => {
      await expect(sql.raw(statement).execute(world.database.reader)).rejects.toThrow(/permission denied/)
    },
  )
})
