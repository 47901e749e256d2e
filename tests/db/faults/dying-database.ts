import { Kysely, PostgresDialect, type PostgresPoolClient } from 'kysely'
import pg from 'pg'
import type { DB } from '@/db/tables'

/** Where a transaction dies: before its n-th statement is sent, or once its commit is done but not yet answered. */
export type Death = { beforeStatement: number } | 'after-commit' | 'never'

export interface DyingDatabase {
  readonly db: Kysely<DB>
  /** Statements of the transactions so far, `begin` and `commit` counted. */
  readonly statements: () => readonly string[]
  destroy(): Promise<void>
}

/**
 * A login whose connection is torn down in the middle of a transaction, as it is when the process that holds it is
 * killed outright: no rollback is sent, and the server learns of it by the closed socket.
 */
export function openDyingDatabase(url: string, death: Death): DyingDatabase {
  const pool = new pg.Pool({ connectionString: url, application_name: 'test-dying', max: 1 })
  pool.on('error', () => undefined)
  const said: string[] = []
  const dialect = new PostgresDialect({
    pool: {
      connect: async () => watch(await pool.connect(), { death, said }),
      end: () => pool.end(),
    },
  })
  const db = new Kysely<DB>({ dialect })
  return { db, statements: () => said, destroy: () => db.destroy() }
}

function watch(client: pg.PoolClient, { death, said }: { death: Death; said: string[] }): PostgresPoolClient {
  let isDead = false
  let isInTransaction = false
  client.on('error', () => undefined)

  async function query(text: string, values: readonly unknown[]) {
    if (isDead) throw new Error('the process is gone')
    if (/^begin\b/i.test(text)) isInTransaction = true
    if (isInTransaction) {
      said.push(text)
      if (typeof death === 'object' && said.length === death.beforeStatement) die()
    }
    const result = await client.query(text, [...values])
    if (/^commit\b/i.test(text)) {
      isInTransaction = false
      if (death === 'after-commit') die()
    }
    return result
  }

  function die(): never {
    isDead = true
    const { stream } = (client as unknown as { connection: { stream: { destroy(): void } } }).connection
    stream.destroy()
    throw new Error('the process is gone')
  }

  return {
    query: query as unknown as PostgresPoolClient['query'],
    release: () => client.release(isDead),
  }
}
