import { sql, type Kysely } from 'kysely'
import PgBoss from 'pg-boss'
import type { DB } from '@/db/tables'
import { queueNames } from '@/lib/jobs/queues'
import { runStatement } from '@/lib/jobs/run-statement'

/**
 * Makes the job queue's schema and queues as owner, and lets the app work in them: the app itself
 * creates nothing, so it runs the queue with `migrate: false`.
 */
export async function installQueues(db: Kysely<DB>): Promise<void> {
  await db.connection().execute(async (connection) => {
    // Two installations at once would both find nothing and both create it.
    await sql`select pg_advisory_lock(hashtext('evenlot.queues'))`.execute(connection)
    try {
      await install(connection)
      await grant(connection)
    } finally {
      await sql`select pg_advisory_unlock(hashtext('evenlot.queues'))`.execute(connection)
    }
  })
}

async function install(db: Kysely<DB>): Promise<void> {
  const executeSql = (text: string, values?: unknown[]) => runStatement(db, text, values)
  const boss = new PgBoss({ db: { executeSql }, migrate: true, supervise: false, schedule: false })
  await boss.start()
  try {
    const existing = new Set((await boss.getQueues()).map(({ name }) => name))
    for (const name of queueNames) if (!existing.has(name)) await boss.createQueue(name)
  } finally {
    await boss.stop({ graceful: false })
  }
}

async function grant(db: Kysely<DB>): Promise<void> {
  await sql`grant usage on schema pgboss to app`.execute(db)
  await sql`grant select, insert, update, delete on all tables in schema pgboss to app`.execute(db)
}
