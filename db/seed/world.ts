import { randomInt, randomUUID } from 'node:crypto'
import { sql, type Kysely } from 'kysely'
import { findActorOfPerson, findPersonByAddress } from '@/db/queries/people'
import type { DB } from '@/db/tables'
import { createLinkSecrets } from '@/lib/auth/link-secrets'
import type { AnonymousContext, Context, Jobs, Random } from '@/lib/context'

/** The hands that build a world: contexts for its people, and its clock. Seeds and tests share them. */
export interface World {
  readonly system: AnonymousContext
  /** The context of a person, with the roles held at this moment. */
  as(address: string): Promise<Context>
  /** Moves the database's clock; null gives it back to the present. Private clusters only. */
  travel(instant: Date | null): Promise<void>
}

export function buildWorld({
  app,
  owner,
  authSecret,
  jobs,
  random = { below: (limit) => randomInt(limit), uuid: () => randomUUID() },
}: {
  app: Kysely<DB>
  owner: Kysely<DB>
  authSecret: string
  jobs: Jobs
  random?: Random
}): World {
  const system: AnonymousContext = { db: app, jobs, random, secrets: createLinkSecrets(authSecret) }
  return {
    system,
    async as(address) {
      const person = await findPersonByAddress(app, address)
      const actor = person && (await findActorOfPerson(app, person.personId))
      if (!actor) throw new Error(`nobody has the address ${address}`)
      return { ...system, actor }
    },
    async travel(instant) {
      await sql`select set_clock(${instant}::timestamptz, false)`.execute(owner)
    },
  }
}
