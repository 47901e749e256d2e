import { uniformFloat64 } from 'pure-rand/distribution/uniformFloat64'
import { xoroshiro128plus } from 'pure-rand/generator/xoroshiro128plus'
import type { RandomGenerator } from 'pure-rand/types/RandomGenerator'
import { normalQuantile } from '@/lib/statistics/distributions/normal'

/** Chance drawn once and kept, from which draws on any degrees of freedom are made. */
export type KeptChance = {
  /** Spread as evenly as so many normal numbers can be, in an order left to chance. */
  normals: Float64Array
  /** Above 0 and up to 1, one beside each normal number. */
  uniforms: Float64Array
  /** Gives a copy of the generator that goes on where the kept numbers end. */
  beyond: () => RandomGenerator
}

/**
 * `streams` independent lots of chance, each for `draws` draws, from one whole seed. The streams lie 2^64 numbers apart
 * in one sequence (xoroshiro128+), so they share none.
 *
 * The normal numbers of a lot are the quantiles in the middle of `draws` equal slices, shuffled. What is drawn from them
 * lies nearer to its distribution than independent draws would; chance is only in what meets what.
 *
 * @throws {RangeError} for a seed that is no 32-bit whole number; for fewer than 1 draw.
 */
export function keptChances(chance: { seed: number; draws: number; streams: number }): KeptChance[] {
  const { seed, draws, streams } = chance
  if (!Number.isInteger(seed) || Math.abs(seed) >= 2 ** 31)
    throw new RangeError(`a seed must be a whole number of 32 bits, got ${seed}`)
  if (!Number.isInteger(draws) || draws < 1)
    throw new RangeError(`draws must be a whole number from 1, got ${draws}`)
  const first = xoroshiro128plus(seed)
  const evenly = Float64Array.from({ length: draws }, (_, slice) => normalQuantile((slice + 0.5) / draws))
  return Array.from({ length: streams }, () => {
    // The jump also takes the sequence away from its thin beginning, where seeds that are near give numbers that are near.
    first.jump()
    const own = first.clone()
    const normals = shuffled(evenly, own)
    const uniforms = evenly.map(() => uniformFrom(own))
    return { normals, uniforms, beyond: () => own.clone() }
  })
}

/**
 * One chi-squared draw on `df` degrees of freedom for each kept pair of numbers, by a method that is exact: no
 * approximation of the distribution is in it.
 *
 * Draws made of the same chance on other degrees of freedom come of the same normal numbers, so that a curve over the
 * degrees of freedom runs smoothly, and a value does not depend on which others were asked for. The few pairs that are
 * refused are replaced from beyond the kept ones.
 *
 * @throws {RangeError} for `df` that is no whole number from 1 to 1e9.
 *
 * Source: G. Marsaglia & W. W. Tsang, ACM Trans. Math. Softw. 26 (2000) 363; on 1 degree of freedom the square itself.
 */
export function chiSquaredDraws(chance: KeptChance, df: number): Float64Array {
  if (!Number.isInteger(df) || df < 1 || df > 1e9)
    throw new RangeError(`draws need whole degrees of freedom from 1 to 1e9, got ${df}`)
  if (df === 1) return chance.normals.map((normal) => normal ** 2)

  const beyond = chance.beyond()
  const scale = df / 2 - 1 / 3
  const spread = 1 / Math.sqrt(9 * scale)
  const isTaken = (normal: number, uniform: number): boolean => {
    const root = 1 + spread * normal
    if (root <= 0) return false
    // The authors' bound, which spares the logarithms nearly always. Products, because powers would be most of the time.
    const square = normal * normal
    if (uniform < 1 - 0.0331 * square * square) return true
    const cube = root * root * root
    return Math.log(uniform) < square / 2 + scale * (1 - cube + Math.log(cube))
  }
  return chance.normals.map((kept, draw) => {
    let normal = kept
    let uniform = chance.uniforms[draw]!
    while (!isTaken(normal, uniform)) {
      normal = normalFrom(beyond)
      uniform = uniformFrom(beyond)
    }
    const root = 1 + spread * normal
    return 2 * scale * root * root * root
  })
}

/** Fisher and Yates, from the end. */
function shuffled(values: Float64Array, generator: RandomGenerator): Float64Array {
  const order = values.slice()
  for (let last = order.length - 1; last > 0; last -= 1) {
    const other = Math.floor(uniformFloat64(generator) * (last + 1))
    const moved = order[last]!
    order[last] = order[other]!
    order[other] = moved
  }
  return order
}

/** Box and Muller 1958; one of the pair is enough here. */
function normalFrom(generator: RandomGenerator): number {
  return Math.sqrt(-2 * Math.log(uniformFrom(generator))) * Math.cos(2 * Math.PI * uniformFloat64(generator))
}

/** Above 0, because its logarithm is taken. */
function uniformFrom(generator: RandomGenerator): number {
  return 1 - uniformFloat64(generator)
}
