import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { randomNumbers } from '@/db/seed/random-numbers'
import { drawMoments } from './deadline-arrivals'
import { summarise } from './latencies'
import { mostLagMs, playArrivals, type Clock } from './play-arrivals'

/** A minute at a hundred a second. */
const arrivals = drawMoments({ count: 6_000, fromMs: 0, toMs: 60_000, random: randomNumbers(5) }).map(
  (atMs) => ({ atMs }),
)

describe('arrivals that wait for nobody', () => {
  /** Time that stands still except where it is told to go on, for timers and for the one who plays. */
  let nowMs = 0
  const clock: Clock = {
    now: () => nowMs,
    until: (ms) => {
      nowMs = Math.max(nowMs, ms)
      return Promise.resolve()
    },
  }
  beforeEach(() => {
    nowMs = 1_000
  })

  /** Answers one after the other in 2 ms each, and nothing at all for five seconds from the thirtieth on. */
  function stallingServer(stallMs: number) {
    const samples: number[] = []
    let freeAtMs = 0
    let hasStalled = false
    const act = (_: unknown, plannedMs: number) => {
      if (!hasStalled && nowMs >= 31_000) {
        hasStalled = true
        freeAtMs = nowMs + stallMs
      }
      freeAtMs = Math.max(freeAtMs, nowMs) + 2
      samples.push(freeAtMs - plannedMs)
      return Promise.resolve()
    }
    return { act, samples }
  }

  it('show a stall of five seconds in the tail', async () => {
    const { act, samples } = stallingServer(5_000)
    await playArrivals({ arrivals, act, clock })
    const { p50, p99, max } = summarise(samples)
    // A tenth of all come while nothing is answered or the queue is long; the slowest hundredth waits for most of it.
    expect(p99).toBeGreaterThan(4_000)
    expect(max).toBeGreaterThan(4_990)
    expect(p50).toBeLessThan(20)
  })

  it('have no such tail without the stall', async () => {
    const { act, samples } = stallingServer(0)
    await playArrivals({ arrivals, act, clock })
    expect(summarise(samples).p99).toBeLessThan(50)
  })

  it('say how far they fell behind, and count the delay in', async () => {
    const samples: number[] = []
    const { worstLagMs } = await playArrivals({
      arrivals: [{ atMs: 0 }, { atMs: 10 }, { atMs: 20 }],
      clock,
      act: (_, plannedMs) => {
        samples.push(nowMs - plannedMs)
        // The generator itself is held up, by which the later two come late.
        nowMs += 150
        return Promise.resolve()
      },
    })
    expect(samples).toEqual([0, 140, 280])
    expect(worstLagMs).toBe(280)
    expect(worstLagMs).toBeGreaterThan(mostLagMs)
  })

  it('end early when they are stopped', async () => {
    let acted = 0
    await playArrivals({
      arrivals,
      clock,
      isStopped: () => acted === 10,
      act: () => {
        acted += 1
        return Promise.resolve()
      },
    })
    expect(acted).toBe(10)
  })
})

describe('on the clock of the machine', () => {
  beforeEach(() => {
    vi.useFakeTimers({ toFake: ['setTimeout', 'performance'] })
  })
  afterEach(() => {
    vi.useRealTimers()
  })

  it('come while an earlier one still waits for its answer', async () => {
    const came: number[] = []
    let answer: () => void = () => undefined
    const began = performance.now()
    const playing = playArrivals({
      arrivals: [{ atMs: 10 }, { atMs: 500 }],
      clock: {
        now: () => performance.now(),
        until: (ms) => new Promise((resolve) => setTimeout(resolve, ms - performance.now())),
      },
      act: ({ atMs }) => {
        came.push(performance.now() - began)
        return atMs === 10 ? new Promise((resolve) => (answer = resolve)) : Promise.resolve()
      },
    })
    await vi.advanceTimersByTimeAsync(600)
    expect(came).toEqual([10, 500])
    answer()
    await playing
  })
})
