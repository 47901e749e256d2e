import { ensurePerson, insertOrganisation, insertOrganisationMember } from '@/db/queries/people'
import { randomNumbers } from '@/db/seed/random-numbers'
import { buildWorld, type World } from '@/db/seed/world'
import { createJobs } from '@/lib/jobs/create-jobs'
import { createTestDatabase, type TestDatabase } from './database'

export interface TestWorld extends World {
  readonly database: TestDatabase
  readonly organisationId: string
  /** Addresses of two people who coordinate, of whom the first administers too. */
  readonly coordinator: string
  readonly second: string
  destroy(): Promise<void>
}

/** A database with one organisation and its two coordinators, the clock standing still, chance seeded. */
export async function createTestWorld({ now, seed = 1 }: { now: string; seed?: number }): Promise<TestWorld> {
  const database = await createTestDatabase()
  await database.setClock(now)
  const numbers = randomNumbers(seed)
  let ids = 0
  const world = buildWorld({
    app: database.app,
    owner: database.owner,
    authSecret: 'a secret of the tests, of forty characters',
    jobs: createJobs(),
    random: {
      below: (limit) => Math.floor(numbers.uniform() * limit),
      uuid: () => `00000000-0000-4000-8000-${String((ids += 1)).padStart(12, '0')}`,
    },
  })
  const coordinator = 'first.coordinator@study.example'
  const second = 'second.coordinator@study.example'
  const organisationId = await database.app.transaction().execute(async (trx) => {
    const made = await insertOrganisation(trx, 'Committee of the Tests')
    const first = await ensurePerson(trx, { address: coordinator, name: 'First Coordinator' })
    const other = await ensurePerson(trx, { address: second, name: 'Second Coordinator' })
    for (const role of ['administrator', 'coordinator'] as const)
      await insertOrganisationMember(trx, { organisationId: made, personId: first.personId, role })
    await insertOrganisationMember(trx, {
      organisationId: made,
      personId: other.personId,
      role: 'coordinator',
    })
    return made
  })
  return { ...world, database, organisationId, coordinator, second, destroy: () => database.destroy() }
}
