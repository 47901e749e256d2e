/** Seeded numbers for invented data: the same seed gives the same world. Never a source of codes or secrets. */
export interface RandomNumbers {
  /** Uniform from 0 to below 1. */
  uniform(): number
  /** Standard normal. */
  normal(): number
}

/** A 32-bit generator with an additive step and a multiplicative hash of its state; ample for invented data. */
export function randomNumbers(seed: number): RandomNumbers {
  let state = seed >>> 0
  const uniform = () => {
    state = (state + 0x9e3779b9) >>> 0
    let mixed = state
    mixed = Math.imul(mixed ^ (mixed >>> 16), 0x21f0aaad)
    mixed = Math.imul(mixed ^ (mixed >>> 15), 0x735a2d97)
    return ((mixed ^ (mixed >>> 15)) >>> 0) / 2 ** 32
  }
  return {
    uniform,
    // Box and Muller 1958; one of the pair is enough here.
    normal: () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform()),
  }
}
