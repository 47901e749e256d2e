import { describe, expect, it } from 'vitest'
import { randomNumbers } from '@/db/seed/random-numbers'
import { deadlineModel, drawArrivals, drawMoments, type Arrival } from './deadline-arrivals'

const whole = drawArrivals({ seconds: 600, random: randomNumbers(7) })
const short = drawArrivals({ seconds: 120, random: randomNumbers(7) })
const countOf = (arrivals: readonly Arrival[], kind: Arrival['kind'], fromMs = 0, toMs = Infinity) =>
  arrivals.filter((each) => each.kind === kind && each.atMs >= fromMs && each.atMs < toMs).length

describe('the arrivals before a deadline', () => {
  // From the model: 500 laboratories, each with 6 pages, 20 drafts, 0.3 files, one check and one return.
  it('are those of the model in a whole run', () => {
    expect(countOf(whole, 'sheet')).toBe(3_000)
    expect(countOf(whole, 'draft')).toBe(10_000)
    expect(countOf(whole, 'upload')).toBe(150)
    expect(countOf(whole, 'check')).toBe(500)
    expect(countOf(whole, 'submit')).toBe(500)
  })

  it('bring 40 % of the returns in the last minute', () => {
    expect(countOf(whole, 'submit', 540_000)).toBe(200)
  })

  it('come no more thinly in a shorter run, whose last minute is the whole one', () => {
    expect(countOf(short, 'draft')).toBe(10_000 / 5)
    expect(countOf(short, 'submit', 60_000)).toBe(200)
    // 300 returns in 540 s are 33 in 60 s.
    expect(countOf(short, 'submit', 0, 60_000)).toBe(33)
  })

  it('are the same for the same seed, and others for another', () => {
    expect(drawArrivals({ seconds: 120, random: randomNumbers(7) })).toEqual(short)
    expect(drawArrivals({ seconds: 120, random: randomNumbers(8) })).not.toEqual(short)
  })

  it('stand in the order in which they come, within the run', () => {
    const moments = whole.map(({ atMs }) => atMs)
    expect(moments).toEqual([...moments].sort((one, other) => one - other))
    expect(moments[0]).toBeGreaterThanOrEqual(0)
    expect(moments.at(-1)).toBeLessThan(600_000)
  })

  it('have every laboratory return once, after it has looked at its check page', () => {
    const checked = new Map<number, number>()
    const returned = new Set<number>()
    for (const { kind, laboratory, atMs } of whole) {
      if (kind === 'check') checked.set(laboratory, atMs)
      if (kind !== 'submit') continue
      expect(checked.get(laboratory)).toBeLessThanOrEqual(atMs)
      returned.add(laboratory)
    }
    expect(returned.size).toBe(deadlineModel.laboratories)
  })

  it('let no laboratory type between its check and its return', () => {
    const checking = new Set<number>()
    let typed = 0
    for (const { kind, laboratory } of whole) {
      if (kind === 'check') checking.add(laboratory)
      if (kind === 'submit') checking.delete(laboratory)
      if (kind === 'draft' && checking.has(laboratory)) typed += 1
    }
    expect(typed).toBe(0)
  })

  it('save no draft of one laboratory within the pause in which its typing is gathered', () => {
    const last = new Map<number, number>()
    let least = Infinity
    for (const { kind, laboratory, atMs } of whole) {
      if (kind !== 'draft') continue
      least = Math.min(least, atMs - (last.get(laboratory) ?? -Infinity))
      last.set(laboratory, atMs)
    }
    expect(least).toBeGreaterThan(2_000)
  })

  it('are refused for more than the ten minutes that the model knows', () => {
    expect(() => drawArrivals({ seconds: 601, random: randomNumbers(1) })).toThrow(RangeError)
    expect(() => drawArrivals({ seconds: 0, random: randomNumbers(1) })).toThrow(RangeError)
  })
})

it('moments have exponential gaps: as many below the mean gap as that law says', () => {
  const moments = drawMoments({ count: 20_000, fromMs: 0, toMs: 20_000, random: randomNumbers(3) })
  const gaps = moments.slice(1).map((each, index) => each - (moments[index] ?? 0))
  const share = (most: number) => gaps.filter((gap) => gap < most).length / gaps.length
  // 1 − exp(−1) and 1 − exp(−3); the standard error of a share here is below 0.0035.
  expect(Math.abs(share(1) - 0.6321)).toBeLessThan(0.014)
  expect(Math.abs(share(3) - 0.9502)).toBeLessThan(0.007)
})
