import type { AnonymousContext } from '@/lib/context'
import type { MailTransport } from '@/lib/mail/transport'

/** What a job is given: the system's context, and the way out for mail. */
export interface WorkerContext extends AnonymousContext {
  readonly mail: MailTransport
  readonly baseUrl: string
}
