import { z } from 'zod'
import type { QueueName } from './queues'

interface Retry {
  readonly retryLimit: number
  readonly retryDelay: number
  readonly retryBackoff: boolean
  readonly expireInSeconds: number
  readonly retentionDays?: number
}

interface JobDefinition {
  readonly payload: z.ZodType<Record<string, string | number>>
  readonly retry: Retry
}

const number = z.number().int().positive()

/**
 * What each queue carries, and how patiently. A job holds ids only and loads what they mean when it runs.
 *
 * Mail is tried again after a minute, then after twice as long each time: twelve tries span about four days.
 */
export const jobDefinitions = {
  'mail.send': {
    payload: z.object({ mailId: z.uuid() }),
    retry: { retryLimit: 12, retryDelay: 60, retryBackoff: true, expireInSeconds: 120, retentionDays: 14 },
  },
  'upload.check': {
    payload: z.object({ studyId: z.uuid(), uploadId: z.uuid(), number }),
    retry: { retryLimit: 3, retryDelay: 5, retryBackoff: true, expireInSeconds: 300 },
  },
  'analysis.run': {
    payload: z.object({ studyId: z.uuid(), number }),
    retry: { retryLimit: 3, retryDelay: 5, retryBackoff: true, expireInSeconds: 900 },
  },
} as const satisfies Record<QueueName, JobDefinition>

export type JobPayload<Queue extends QueueName> = z.output<(typeof jobDefinitions)[Queue]['payload']>
