import { jobDefinitions, type JobPayload } from './definitions'
import { handleUploadCheck } from './handlers/check-upload'
import { handleAnalysisRun } from './handlers/run-analysis'
import { handleMailSend } from './handlers/send-mail'
import { queueNames, type QueueName } from './queues'
import type { WorkerContext } from './worker-context'

export type JobHandler = (context: WorkerContext, data: unknown) => Promise<void>

/** The one handler of each queue, its payload read by the queue's definition first. */
export const jobHandlers: Readonly<Record<QueueName, JobHandler>> = {
  'mail.send': parsed('mail.send', handleMailSend),
  'upload.check': parsed('upload.check', handleUploadCheck),
  'analysis.run': parsed('analysis.run', handleAnalysisRun),
}

/** @throws when a queue has no definition or no handler, or either has no queue */
export function requireWholeRegistry(
  handlers: Readonly<Record<string, unknown>> = jobHandlers,
  definitions: Readonly<Record<string, unknown>> = jobDefinitions,
): void {
  const faults = [
    ...queueNames.filter((name) => !Object.hasOwn(handlers, name)).map((name) => `${name} has no handler`),
    ...queueNames
      .filter((name) => !Object.hasOwn(definitions, name))
      .map((name) => `${name} has no definition`),
    ...[...new Set([...Object.keys(handlers), ...Object.keys(definitions)])]
      .filter((name) => !(queueNames as readonly string[]).includes(name))
      .map((name) => `${name} is no queue`),
  ]
  if (faults.length > 0) throw new Error(`The worker cannot start: ${faults.join('; ')}.`)
}

function parsed<Queue extends QueueName>(
  queue: Queue,
  handle: (context: WorkerContext, payload: JobPayload<Queue>) => Promise<void>,
): JobHandler {
  return (context, data) => handle(context, jobDefinitions[queue].payload.parse(data) as JobPayload<Queue>)
}
