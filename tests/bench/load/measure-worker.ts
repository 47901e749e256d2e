import { setTimeout as pause } from 'node:timers/promises'
import { sql } from 'kysely'
import { findAnalysisProgress } from '@/db/queries/analyses'
import { openStudy } from '@/lib/use-cases/studies/open-study'
import { requestAnalysis } from '@/lib/use-cases/analyses/request-analysis'
import type { AttackWorld } from '@/tests/e2e/trust/support/attack-world'
import { timeOutMs } from './latencies'
import { playArrivals } from './play-arrivals'
import { askTimed } from './timed-request'

const lookEveryMs = 200

interface Invitations {
  readonly sent: number
  readonly ms: number
}

/** Opens the study, and waits until the mail server has taken the last invitation, or ten minutes are over. */
export async function measureInvitations(
  world: AttackWorld,
  { coordinator, studyId, isStopped }: { coordinator: string; studyId: string; isStopped: () => boolean },
): Promise<Invitations> {
  const { invitations } = await openStudy(await world.as(coordinator), { studyId })
  const queuedMs = performance.now()
  for (;;) {
    const sent = await countSentInvitations(world, studyId)
    const ms = performance.now() - queuedMs
    if (sent === invitations || ms > 600_000 || isStopped()) return { sent, ms }
    await pause(lookEveryMs)
  }
}

async function countSentInvitations(world: AttackWorld, studyId: string): Promise<number> {
  const { rows } = await sql<{ sent: number }>`
    select count(*)::int as sent from vault.mail join vault.mail_attempt using (mail_id)
    where study_id = ${studyId} and kind = 'invitation' and outcome = 'sent'`.execute(world.owner)
  return rows[0]?.sent ?? 0
}

/** Has the worker compute, and gives back how long the result took to be there. */
export async function measureAnalysis(
  world: AttackWorld,
  { coordinator, studyId, isStopped }: { coordinator: string; studyId: string; isStopped: () => boolean },
): Promise<{ ms: number; done: boolean }> {
  await requestAnalysis(await world.as(coordinator), { studyId })
  const askedMs = performance.now()
  for (;;) {
    const done = (await findAnalysisProgress(world.app, studyId))?.done ?? false
    const ms = performance.now() - askedMs
    if (done || ms > 600_000 || isStopped()) return { ms, done }
    await pause(lookEveryMs)
  }
}

const probeEveryMs = 50

export interface Probed {
  readonly answers: readonly number[]
  readonly worstLagMs: number
}

/** Asks the web process every 50 ms for next to nothing: what that takes is how long its event loop was busy elsewhere. */
export async function probeWhile(base: string, work: () => Promise<unknown>): Promise<Probed> {
  const answers: number[] = []
  let isOver = false
  const arrivals = Array.from({ length: 20_000 }, (_, index) => ({ atMs: index * probeEveryMs }))
  const probing = playArrivals({
    arrivals,
    isStopped: () => isOver,
    act: async (_, plannedMs) => {
      // A probe that found nobody waited as long as anyone would have.
      const answer = await askTimed({ base, path: '/api/health/live' }).catch(() => null)
      answers.push(answer?.status === 200 ? answer.lastByteMs - plannedMs : timeOutMs)
    },
  })
  try {
    await work()
  } finally {
    isOver = true
  }
  const { worstLagMs } = await probing
  return { answers, worstLagMs }
}
