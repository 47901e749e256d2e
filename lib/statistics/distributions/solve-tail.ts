import type { Side, Tails } from '@/lib/statistics/distributions/tails'

export interface TailToSolve {
  /** The distribution at a point whose logarithm is u. */
  readonly at: (u: number) => Tails
  readonly side: Side
  /** At most a half, so that the tail sought is never one of those that have lost their digits to 1. */
  readonly target: number
  readonly start: number
  /** The ends between which the solution is known to lie. */
  readonly low: number
  readonly high: number
}

/**
 * The u at which a tail equals `target`, by Halley's method on the logarithm of the tail, kept inside a bracket that each
 * evaluation narrows.
 *
 * The logarithm of a gamma or odds variable has a density whose logarithm is concave, and so have its tails: from the far side
 * Newton's method never oversteps, and Halley's term makes its digits threefold at a step. Far out, where a tail is no double
 * any more, its logarithm still is one. What leaves the bracket is replaced by its middle. Nothing is refused.
 */
export function solveTail({ at, side, target, start, low, high }: TailToSolve): number {
  // A lower tail rises with u, an upper one falls.
  const sign = side === 'lower' ? 1 : -1
  const wanted = Math.log(target)
  let [below, above] = [low, high]
  let u = Math.min(high, Math.max(low, start))
  for (let turn = 0; turn < MOST_TURNS; turn++) {
    const tails = at(u)
    const { log, hazard } = logarithmOf(tails, side)
    const gap = log - wanted
    if (gap === 0) return u
    if (gap * sign > 0) above = u
    else below = u

    const newton = (-sign * gap) / hazard
    const bending = 1 + 0.5 * newton * (tails.bend - sign * hazard)
    const next = u + newton / Math.min(2, Math.max(0.5, bending))
    // Halley's method cubes the gap, so that what is left of this one is below the last bit.
    if (Math.abs(gap) < 1e-6) return next
    u = turn < MOST_CLEVER && next > below && next < above ? next : below + (above - below) / 2
    if (u === below || u === above) return u
  }
  return u
}

/** Seldom more than six are used. After these the bracket is halved, which from any doubles ends within the rest. */
const MOST_CLEVER = 40
const MOST_TURNS = MOST_CLEVER + 70

function logarithmOf(tails: Tails, side: Side): { log: number; hazard: number } {
  const tail = tails[side]
  if (tail > 1e-290) return { log: Math.log(tail), hazard: tails.slope / tail }
  return { log: tails.logSlope - Math.log(tails.hazard), hazard: tails.hazard }
}
