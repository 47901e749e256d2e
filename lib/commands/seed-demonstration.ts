import { createDatabase } from '@/db/connection'

interface Seeding {
  ownerUrl: string
  environment: { DATABASE_URL: string; AUTH_SECRET: string }
}

/** Fills an empty private database. */
export async function seedDemonstration({ ownerUrl, environment }: Seeding): Promise<void> {
  const { seedDemonstrationWorld } = await demonstrationWorld()
  const app = createDatabase(environment.DATABASE_URL, { applicationName: 'evenlot-seed', max: 4 })
  const owner = createDatabase(ownerUrl, { applicationName: 'evenlot-seed', max: 1 })
  try {
    await seedDemonstrationWorld({ app, owner, authSecret: environment.AUTH_SECRET })
  } finally {
    await Promise.all([app.destroy(), owner.destroy()])
  }
}

export async function demonstrationPeople() {
  return (await demonstrationWorld()).demonstrationPeople
}

// Loaded only where the run is private: a run against outside services never has it in memory.
function demonstrationWorld() {
  return import('@/db/seed/demonstration-world')
}
