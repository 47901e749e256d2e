import PgBoss from 'pg-boss'
import { logDefect, logEvent } from '@/lib/log'
import { queueNames, type QueueName } from './queues'
import { requireWholeRegistry } from './registry'
import { runJob } from './run-job'
import { runStatement } from './run-statement'
import type { WorkerContext } from './worker-context'

/** How many jobs of a queue one worker process runs side by side. Each looks for work twice a second. */
const sideBySide: Record<QueueName, number> = { 'mail.send': 4, 'upload.check': 2, 'analysis.run': 1 }

export interface RunningWorker {
  /** Takes no new job, lets those under way finish, and gives back what does not. */
  stop(): Promise<void>
}

export async function startWorker(context: WorkerContext): Promise<RunningWorker> {
  requireWholeRegistry()
  const executeSql = (text: string, values?: unknown[]) => runStatement(context.db, text, values)
  const boss = new PgBoss({ db: { executeSql }, migrate: false, supervise: true, schedule: false })
  boss.on('error', (error) => logDefect(error, { place: 'queue' }))
  await boss.start()
  for (const queue of queueNames) {
    for (let each = 0; each < sideBySide[queue]; each += 1) {
      await boss.work<object>(queue, { batchSize: 1, pollingIntervalSeconds: 0.5 }, async ([job]) => {
        return job ? runJob(context, queue, job.data) : undefined
      })
    }
  }
  logEvent('worker started')
  return { stop: () => boss.stop({ graceful: true, timeout: 25_000 }) }
}
