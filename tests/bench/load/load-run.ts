import { setPriority } from 'node:os'
import { setTimeout as pause } from 'node:timers/promises'
import { randomNumbers } from '@/db/seed/random-numbers'
import type { TestRun } from '@/lib/commands/test-run'
import { listActions } from '@/tests/e2e/trust/support/actions'
import { foundCommittee, openAttackWorld, type AttackWorld } from '@/tests/e2e/trust/support/attack-world'
import { deadlineModel, drawArrivals } from './deadline-arrivals'
import { createLaboratoryRequests, type Series } from './laboratory-requests'
import { Latencies } from './latencies'
import { startLoadProduct, type LoadProduct } from './load-product'
import {
  acceptAll,
  draftDeadlineStudy,
  fillWorkbooks,
  keepAllDrafts,
  seatContacts,
  stageReturnedStudy,
} from './load-world'
import { watchUse, type Use } from './machine-use'
import { measureAnalysis, measureInvitations, probeWhile, type Probed } from './measure-worker'
import { playArrivals } from './play-arrivals'

/** Settled before any run was looked at. */
export const warmUpSeconds = 20
const quietSeconds = 10

export interface LoadFigures {
  readonly requests: Latencies<Series>
  readonly arrivals: number
  readonly worstLagMs: number
  readonly invitations: { sent: number; ms: number }
  readonly analysis: { ms: number; done: boolean; results: number }
  readonly probedQuiet: Probed
  readonly probedAnalysing: Probed
  readonly memory: Readonly<Record<'started' | 'warm' | 'after', number>>
  /** Over the counted arrivals. */
  readonly use: Use
}

/** One deadline against the real product: its world, its invitations, its last minutes, its analysis. */
export async function runLoad(
  run: TestRun,
  { seconds, seed }: { seconds: number; seed: number },
): Promise<LoadFigures> {
  const product = await startLoadProduct(run)
  void product.unexpectedEnd.then(({ name, outcome, tail }) =>
    run.say(`The ${name} ended by itself (${outcome}). Its last words:\n${tail.join('\n')}`),
  )
  comeFirst()
  const started = product.webMemory()
  const world = openAttackWorld(product.access)
  run.onClose(() => world.destroy())
  const isStopped = () => run.isClosing
  const { say } = run

  say(`Naming ${deadlineModel.laboratories} laboratories and sending their invitations`)
  const committee = await foundCommittee(world, { laboratories: deadlineModel.laboratories })
  const study = await draftDeadlineStudy(world, committee)
  const { coordinator, contacts } = committee
  const invitations = await measureInvitations(world, { coordinator, studyId: study.studyId, isStopped })
  await acceptAll(world, study)
  const load = await playDeadline({ run, product, world, study, contacts, seconds, seed })

  say('Returning for every laboratory of a second study, and computing it')
  const { AUTH_SECRET: secret } = product.access
  const returned = await stageReturnedStudy(world, { committee, seed, secret })
  const probedQuiet = await probeWhile(product.base, () => pause(quietSeconds * 1000))
  let analysis = { ms: 0, done: false }
  const probedAnalysing = await probeWhile(product.base, async () => {
    analysis = await measureAnalysis(world, { coordinator, studyId: returned.studyId, isStopped })
  })
  return {
    ...load,
    invitations,
    analysis: { ...analysis, results: returned.results },
    probedQuiet,
    probedAnalysing,
    memory: { started, ...load.memory },
  }
}

/** A generator that waits for the product it drives would measure both; only an administrator may put it first. */
function comeFirst(): void {
  try {
    setPriority(-15)
  } catch {
    // The lag that is printed tells whether it mattered.
  }
}

interface Deadline {
  readonly run: TestRun
  readonly product: LoadProduct
  readonly world: AttackWorld
  readonly study: Awaited<ReturnType<typeof draftDeadlineStudy>>
  readonly contacts: readonly string[]
  readonly seconds: number
  readonly seed: number
}

async function playDeadline({ run, product, world, study, contacts, seconds, seed }: Deadline) {
  const { studyId, layout } = study
  const { base } = product
  const random = randomNumbers(seed)
  const submitActionId = listActions().find(({ name }) => name === 'submitSheetAction')?.id
  if (!submitActionId) throw new Error('the build has no action that returns a sheet')
  const sitters = await seatContacts(world, { contacts, layout, random })
  const files = await fillWorkbooks(layout, random)
  const play = async (length: number, latencies: Latencies<Series>) => {
    await keepAllDrafts(world, { studyId, contacts, sitters })
    const arrivals = drawArrivals({ seconds: length, random })
    const act = createLaboratoryRequests({ base, studyId, submitActionId, sitters, files, latencies })
    const { worstLagMs } = await playArrivals({ arrivals, act, isStopped: () => run.isClosing })
    return { worstLagMs, arrivals: arrivals.length }
  }
  run.say(`Warming up for ${warmUpSeconds} s, of which nothing is counted`)
  await play(warmUpSeconds, new Latencies())
  const warm = product.webMemory()
  run.say(`Playing the last ${seconds} s before the deadline`)
  const requests = new Latencies<Series>()
  const readUse = watchUse({ roots: product.processes })
  const played = await play(seconds, requests)
  return { requests, ...played, use: readUse(), memory: { warm, after: product.webMemory() } }
}
