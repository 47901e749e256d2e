export type Random = { uniform: () => number; normal: () => number }

/** Seeded numbers: Mulberry32, and Box-Muller on top of it. */
export function randomSource(seed: number): Random {
  let state = Math.round(seed * 7919) >>> 0
  const uniform = (): number => {
    state = (state + 0x6d2b79f5) >>> 0
    let mixed = Math.imul(state ^ (state >>> 15), state | 1)
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61)
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4294967296
  }
  const normal = (): number => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform())
  return { uniform, normal }
}
