import type { JobPayload } from '../definitions'
import type { WorkerContext } from '../worker-context'

export async function handleUploadCheck(
  context: WorkerContext,
  payload: JobPayload<'upload.check'>,
): Promise<void> {
  const { checkUploadedFile } = await import('@/lib/use-cases/returns/check-upload')
  await checkUploadedFile(context, payload)
}
