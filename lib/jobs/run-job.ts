import { NotFound, Refusal } from '@/lib/domain/errors'
import { logDefect } from '@/lib/log'
import { MailDeferred } from '@/lib/use-cases/mail/send-mail'
import type { QueueName } from './queues'
import { jobHandlers } from './registry'
import type { WorkerContext } from './worker-context'

/** A job that is to come again. Its words go into the queue's table, and so say nothing of what failed. */
export class JobFailed extends Error {
  constructor(reason: string) {
    super(reason)
    this.name = 'JobFailed'
  }
}

/**
 * Runs one job. A refusal, or a row that is gone, ends it: another try would end the same. Anything else comes
 * again, and is logged unless it is only a mail server that is busy.
 */
export async function runJob(
  context: WorkerContext,
  queue: QueueName,
  data: unknown,
): Promise<{ ended?: string }> {
  try {
    await jobHandlers[queue](context, data)
    return {}
  } catch (error) {
    if (error instanceof Refusal) return { ended: error.code }
    if (error instanceof NotFound) return { ended: 'not-found' }
    if (error instanceof MailDeferred) throw new JobFailed('mail deferred')
    throw new JobFailed(`defect ${logDefect(error, { place: `job ${queue}` })}`)
  }
}
