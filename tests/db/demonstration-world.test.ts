import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { findChainHead, listAuditEntries, listChains } from '@/db/queries/audit'
import { findActorOfPerson, findPersonByAddress } from '@/db/queries/people'
import { seedDemonstrationWorld } from '@/db/seed/demonstration-world'
import { laboratories, people } from '@/db/seed/twine-people'
import { findBreak } from '@/lib/domain/audit-entry'
import { listPublications } from '@/lib/use-cases/publications/read-publications'
import { listStudiesFor } from '@/db/queries/studies'
import { createTestDatabase, type TestDatabase } from '../support/database'

let database: TestDatabase

beforeAll(async () => {
  database = await createTestDatabase()
  await seedDemonstrationWorld({
    app: database.app,
    owner: database.owner,
    authSecret: 'a secret of the tests, of forty characters',
  })
})
afterAll(() => database.destroy())

describe('the demonstration world', () => {
  it('holds a study at each station, from the draft to the published page', async () => {
    const ines = await findPersonByAddress(database.app, people.ines.address)
    const actor = await findActorOfPerson(database.app, ines!.personId)
    const studies = await listStudiesFor(database.app, actor!)
    expect(Object.fromEntries(studies.map(({ shortName, state }) => [shortName, state]))).toEqual({
      'NT-21': 'published',
      'NT-22': 'in-review',
      'NT-23': 'in-review',
      'NT-24': 'closed',
      'NT-25': 'open',
      'NT-26': 'open',
      'NT-27': 'draft',
    })
  })

  it('has twelve invented laboratories in at least eight time zones, all under .example', () => {
    expect(laboratories).toHaveLength(12)
    expect(new Set(laboratories.map(({ zone }) => zone)).size).toBeGreaterThanOrEqual(8)
    for (const { address } of [...laboratories, ...Object.values(people)])
      expect(address).toMatch(/^[a-z.]+@[a-z-]+\.example$/)
  })

  it('publishes a study with an inconsistent laboratory, a straggling cell and a missing one', async () => {
    const [publication] = await listPublications({ reader: database.reader, actor: null })
    const force = publication!.snapshot.measurands[0]!.document
    const apart = new Map<string, number>()
    for (const { cells, critical } of force.materials)
      for (const { laboratory, h } of cells)
        if (h !== null && Math.abs(h) > critical.h['0.01']!)
          apart.set(laboratory, (apart.get(laboratory) ?? 0) + 1)
    expect(Math.max(...apart.values())).toBeGreaterThanOrEqual(3)
    const coir = force.materials.find(({ material }) => material === 'coir')!
    expect(coir.cochran.level).not.toBe('none')
    expect(force.materials.find(({ material }) => material === 'jute')!.laboratories).toBe(11)
  })

  it('leaves every audit chain whole', async () => {
    const chains = await listChains(database.app)
    expect(chains).toHaveLength(8)
    for (const chain of chains) {
      const entries = await listAuditEntries(database.app, chain)
      expect(entries.length).toBeGreaterThan(0)
      expect(findBreak(entries, await findChainHead(database.app, chain))).toBeNull()
    }
  })
})
