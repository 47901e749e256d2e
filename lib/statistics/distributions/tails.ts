export type Side = 'lower' | 'upper'

/** Both tails of a distribution at one point, and how they change there. */
export interface Tails {
  readonly lower: number
  readonly upper: number
  /** Derivative of the lower tail with respect to the logarithm u of the point. */
  readonly slope: number
  /** Logarithm of the slope, which is there where the slope itself is no double any more. */
  readonly logSlope: number
  /** The slope over the tail on the point's own side of the bulk. */
  readonly hazard: number
  /** Derivative of `logSlope` with respect to u. */
  readonly bend: number
}
