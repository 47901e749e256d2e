import type { JobPayload } from '../definitions'
import type { WorkerContext } from '../worker-context'

// Loaded when first needed: the statistics are large, and most jobs are mail.
export async function handleAnalysisRun(
  context: WorkerContext,
  payload: JobPayload<'analysis.run'>,
): Promise<void> {
  const { makeAnalysis } = await import('@/lib/use-cases/analyses/make-analysis')
  await makeAnalysis(context, payload)
}
