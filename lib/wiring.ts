import { randomInt, randomUUID } from 'node:crypto'
import type { Kysely } from 'kysely'
import { createDatabase } from '@/db/connection'
import type { DB } from '@/db/tables'
import { createLinkSecrets } from './auth/link-secrets'
import { readConfig, type Config } from './config'
import type { AnonymousContext, Jobs, LinkSecrets, Random } from './context'
import { createJobs } from './jobs/create-jobs'

/** The real parts of the product, as the web server and the worker use them. */
export interface Parts {
  readonly config: Config
  readonly db: Kysely<DB>
  /** The anonymous login, which no schema but the study's own is open to. */
  readonly readerDb: Kysely<DB>
  readonly jobs: Jobs
  readonly random: Random
  readonly secrets: LinkSecrets
}

// The server's bundles each hold their own copy of this module; one process must still have one pool.
const place = Symbol.for('evenlot.parts')
const kept = globalThis as { [place]?: Parts }

/** Made at the first call, so that building the product needs no environment. */
export function parts(): Parts {
  return (kept[place] ??= makeParts(readConfig(process.env)))
}

export function makeParts(config: Config): Parts {
  return {
    config: { ...config, baseUrl: new URL(config.baseUrl).origin },
    db: createDatabase(config.databaseUrl, { applicationName: 'evenlot-app' }),
    readerDb: createDatabase(config.databaseReaderUrl, { applicationName: 'evenlot-reader', max: 5 }),
    jobs: createJobs(),
    random: { below: (limit) => randomInt(limit), uuid: () => randomUUID() },
    secrets: createLinkSecrets(config.authSecret),
  }
}

/** What a use case gets when no person asks: the worker, and what anyone may do. */
export function systemContext({ db, jobs, random, secrets }: Parts = parts()): AnonymousContext {
  return { db, jobs, random, secrets }
}

/** Gives the connections back; for commands and for a process that is asked to stop. */
export async function closeParts({ db, readerDb }: Parts = parts()): Promise<void> {
  await Promise.all([db.destroy(), readerDb.destroy()])
}
