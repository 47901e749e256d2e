import PgBoss from 'pg-boss'
import type { Jobs } from '@/lib/context'
import { jobDefinitions } from './definitions'
import { runStatement } from './run-statement'

/** Sends jobs, each inside the transaction it is given. It holds no connection and is never started. */
export function createJobs(): Jobs {
  const onlyInTransactions = {
    executeSql: () => Promise.reject(new Error('a job is enqueued in a transaction only')),
  }
  const boss = new PgBoss({ db: onlyInTransactions, migrate: false, supervise: false, schedule: false })
  return {
    async enqueue(trx, queue, payload, options = {}) {
      const { payload: schema, retry } = jobDefinitions[queue]
      const db = { executeSql: (text: string, values?: unknown[]) => runStatement(trx, text, values) }
      const startAfter = options.afterSeconds ? { startAfter: options.afterSeconds } : {}
      const id = await boss.send(queue, schema.parse(payload), { ...retry, ...startAfter, db })
      if (!id) throw new Error(`the queue ${queue} did not take a job`)
    },
  }
}
