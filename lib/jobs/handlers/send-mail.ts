import { sendMail } from '@/lib/use-cases/mail/send-mail'
import type { JobPayload } from '../definitions'
import type { WorkerContext } from '../worker-context'

export function handleMailSend(context: WorkerContext, payload: JobPayload<'mail.send'>): Promise<void> {
  return sendMail(context, payload)
}
