import { setTimeout as pause } from 'node:timers/promises'

export interface Clock {
  /** Milliseconds on a clock that never goes back. */
  now(): number
  until(ms: number): Promise<void>
}

export const realClock: Clock = {
  now: () => performance.now(),
  until: async (ms) => {
    const left = ms - performance.now()
    if (left > 0) await pause(left)
  },
}

/** Beyond this, what is measured is the generator and not the product. */
export const mostLagMs = 100

/**
 * Lets every arrival come at its planned moment, whether earlier ones were answered or not. What an arrival does gets
 * that planned moment, and counts from it: a server that stalls would else make its own arrivals late and look quick.
 * @returns how late the latest arrival was let go; more than `mostLagMs` makes the run invalid
 */
export async function playArrivals<Planned extends { readonly atMs: number }>({
  arrivals,
  act,
  clock = realClock,
  isStopped = () => false,
}: {
  arrivals: readonly Planned[]
  act: (arrival: Planned, plannedMs: number) => Promise<void>
  clock?: Clock
  isStopped?: () => boolean
}): Promise<{ worstLagMs: number }> {
  const beganMs = clock.now()
  const underWay: Promise<void>[] = []
  let worstLagMs = 0
  for (const arrival of arrivals) {
    const plannedMs = beganMs + arrival.atMs
    await clock.until(plannedMs)
    if (isStopped()) break
    worstLagMs = Math.max(worstLagMs, clock.now() - plannedMs)
    underWay.push(act(arrival, plannedMs))
  }
  await Promise.all(underWay)
  return { worstLagMs }
}
