import PgBoss from 'pg-boss'
import { JobFailed, runJob } from './run-job'
import { queueNames, type QueueName } from './queues'
import { runStatement } from './run-statement'
import type { WorkerContext } from './worker-context'

interface Ran {
  readonly queue: QueueName
  readonly outcome: 'completed' | 'failed'
}

/**
 * Runs whatever is due, and what that enqueues, until nothing is, in this process and without waiting: for tests
 * and for making the demonstration.
 * @param options.includeWaiting also runs, once, jobs that are to wait before their next try
 */
export async function runJobs(
  context: WorkerContext,
  { includeWaiting = false }: { includeWaiting?: boolean } = {},
): Promise<Ran[]> {
  const executeSql = (text: string, values?: unknown[]) => runStatement(context.db, text, values)
  const boss = new PgBoss({ db: { executeSql }, migrate: false, supervise: false, schedule: false })
  const ran: Ran[] = []
  const seen = new Set<string>()
  for (let before = -1; before !== ran.length;) {
    before = ran.length
    for (const queue of queueNames) {
      for (;;) {
        const [job] = await boss.fetch<object>(queue, { batchSize: 1, ignoreStartAfter: includeWaiting })
        if (!job) break
        // A job that failed a moment ago comes round again when waiting is ignored; it has had its try.
        if (seen.has(job.id)) {
          await boss.fail(queue, job.id)
          break
        }
        seen.add(job.id)
        ran.push({ queue, outcome: await runOne(boss, context, queue, job) })
      }
    }
  }
  return ran
}

async function runOne(boss: PgBoss, context: WorkerContext, queue: QueueName, job: PgBoss.Job<object>) {
  try {
    await boss.complete(queue, job.id, await runJob(context, queue, job.data))
    return 'completed'
  } catch (error) {
    if (!(error instanceof JobFailed)) throw error
    await boss.fail(queue, job.id, { reason: error.message })
    return 'failed'
  }
}
