import { existsSync } from 'node:fs'
import type { Kysely } from 'kysely'
import { createDatabase } from '@/db/connection'
import type { DB } from '@/db/tables'

export interface DemonstrationPerson {
  name: string
  address: string
  role: string
}

interface DemonstrationWorld {
  seedDemonstrationWorld(parts: { app: Kysely<DB>; owner: Kysely<DB>; authSecret: string }): Promise<void>
  demonstrationPeople: readonly DemonstrationPerson[]
}

interface Seeding {
  ownerUrl: string
  environment: { DATABASE_URL: string; AUTH_SECRET: string }
}

/** Fills an empty private database. False where this checkout has no demonstration world. */
export async function seedDemonstration({ ownerUrl, environment }: Seeding): Promise<boolean> {
  const world = await demonstrationWorld()
  if (!world) return false
  const app = createDatabase(environment.DATABASE_URL, { applicationName: 'evenlot-seed', max: 4 })
  const owner = createDatabase(ownerUrl, { applicationName: 'evenlot-seed', max: 1 })
  try {
    await world.seedDemonstrationWorld({ app, owner, authSecret: environment.AUTH_SECRET })
    return true
  } finally {
    await Promise.all([app.destroy(), owner.destroy()])
  }
}

export async function demonstrationPeople(): Promise<readonly DemonstrationPerson[]> {
  return (await demonstrationWorld())?.demonstrationPeople ?? []
}

// Loaded only where the run is private: a run against outside services never has it in memory.
async function demonstrationWorld(): Promise<DemonstrationWorld | undefined> {
  const source = new URL('../../db/seed/demonstration-world.ts', import.meta.url)
  return existsSync(source) ? ((await import(source.href)) as DemonstrationWorld) : undefined
}
