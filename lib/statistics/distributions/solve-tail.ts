export interface TailToSolve {
  /** The tail probability at u and the size of its derivative there. */
  readonly tailAt: (u: number) => { readonly tail: number; readonly steepness: number }
  readonly side: 'lower' | 'upper'
  readonly target: number
  readonly start: number
}

/**
 * The u at which a tail probability equals `target`, by Newton's method on the logarithm of the tail, kept
 * inside a bracket that each evaluation narrows.
 *
 * On the logarithm both the bulk and a tail of 1e-12 are nearly straight, so that few steps are needed. A step that
 * leaves the bracket is replaced by a bisection; whether the step had already converged is asked first, else a solution
 * at the very edge of the bracket would be thrown away. Nothing is refused: the target lies strictly between 0 and 1.
 */
export function solveTail({ tailAt, side, target, start }: TailToSolve): number {
  // A lower tail rises with u, an upper one falls. Far out the derivative underflows and could not tell.
  const sign = side === 'lower' ? 1 : -1
  let u = start
  let low = -Infinity
  let high = Infinity
  for (let turn = 0; turn < 200; turn++) {
    const { tail, steepness } = tailAt(u)
    const gap = Math.log(tail / target)
    if (gap === 0) return u
    if (gap * sign > 0) high = u
    else low = u

    const newton = (-sign * gap * tail) / steepness
    if (Math.abs(newton) < 1e-15 * Math.max(1, Math.abs(u))) return u + newton
    u = nextPoint(u, newton, low, high)
    if (u === low || u === high) return u
  }
  return u
}

const longestStep = 4

function nextPoint(u: number, newton: number, low: number, high: number): number {
  // A tail that has underflowed to 0 gives no usable step: only the side is known.
  if (Number.isFinite(newton)) {
    const step = Math.max(-longestStep, Math.min(longestStep, newton))
    const next = u + step
    if (next > low && next < high) return next
  }
  if (low === -Infinity) return high - longestStep
  if (high === Infinity) return low + longestStep
  return low + (high - low) / 2
}
