import { describe, expect, it } from 'vitest'
import { Latencies, percentile, summarise, timeOutMs } from './latencies'

const upTo = (count: number) => Array.from({ length: count }, (_, index) => index + 1)

describe('percentiles', () => {
  // By the definition: the smallest sample that at least this share of all do not exceed.
  it('are samples that were measured', () => {
    expect(percentile(upTo(100), 0.95)).toBe(95)
    expect(percentile(upTo(10), 0.95)).toBe(10)
    expect(percentile(upTo(10), 0.5)).toBe(5)
    expect(percentile([7], 0.5)).toBe(7)
  })

  it('do not exist for no samples', () => {
    expect(() => percentile([], 0.5)).toThrow(RangeError)
  })

  it('refuse the 99th under 5,000 samples, and give it from there on', () => {
    expect(summarise(upTo(4_999)).p99).toBeNull()
    expect(summarise(upTo(5_000)).p99).toBe(4_950)
  })

  it('do not depend on the order in which samples came', () => {
    expect(summarise(upTo(200).reverse())).toEqual(summarise(upTo(200)))
  })
})

describe('latencies', () => {
  it('count a failure as the time-out and keep its reason', () => {
    const latencies = new Latencies<'page'>()
    for (const ms of upTo(9)) latencies.add('page', ms)
    latencies.fail('page', 'status 500')
    expect(latencies.summaryOf('page')).toMatchObject({ count: 10, errors: 1, p50: 5, max: timeOutMs })
    expect([...latencies.failuresOf('page')]).toEqual([['status 500', 1]])
  })

  it('count an answer after the time-out as none', () => {
    const latencies = new Latencies<'page'>()
    latencies.add('page', timeOutMs + 3_000)
    expect(latencies.summaryOf('page')).toMatchObject({ count: 1, errors: 1, max: timeOutMs })
  })

  it('of what was never asked are none, not nought', () => {
    expect(new Latencies<'page'>().summaryOf('page')).toBeNull()
  })

  it('keep every sample', () => {
    const latencies = new Latencies<'page'>()
    for (const ms of [3, 1, 2]) latencies.add('page', ms)
    expect(latencies.raw()).toEqual({ page: [3, 1, 2] })
  })
})
