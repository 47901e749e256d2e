import { NotComputable } from '@/lib/statistics/not-computable'

/**
 * The least number of laboratories, from 2 up to `limit`, with which `precision` comes down to `wished`: "you need
 * p ≥ …". `precision` gives a half-width as a fraction of the value, and must fall as the laboratories grow in number;
 * it is asked about log₂ of the limit times.
 *
 * @throws {NotComputable} `not-reached` where even the limit does not bring it down so far.
 * @throws {RangeError} for a wished half-width not above 0; for a limit below 2.
 */
export function leastLaboratories(search: {
  precision: (laboratories: number) => number
  wished: number
  limit: number
}): number {
  const { precision, wished, limit } = search
  if (!(wished > 0)) throw new RangeError('a wished half-width must lie above 0')
  if (!Number.isInteger(limit) || limit < 2)
    throw new RangeError('a search requires a limit of two laboratories')

  if (precision(limit) > wished) {
    throw new NotComputable('not-reached', `Not even ${limit} laboratories bring it down so far.`)
  }
  let enough = limit
  let tooFew = 1
  while (enough - tooFew > 1) {
    const middle = Math.floor((tooFew + enough) / 2)
    if (precision(middle) <= wished) enough = middle
    else tooFew = middle
  }
  return enough
}
