export interface RunningIntegral {
  /** The integral from the first break up to u; constant beyond either end. */
  readonly upTo: (u: number) => number
  readonly total: number
}

const terms = 32

/**
 * The integral of a function that is smooth between its breaks, as a function of its upper limit.
 *
 * On each piece the variable is stretched by u = from + (to - from) sin²(θ/2), under which square-root behaviour at
 * either end becomes smooth, and the integrand is expanded in Chebyshev polynomials of θ, 32 to a piece, which are integrated
 * term by term. Later evaluation costs one short sum.
 *
 * Source: C. W. Clenshaw and A. R. Curtis, Numer. Math. 2 (1960) 197.
 */
export function runningIntegral(
  breaks: readonly number[],
  integrand: (u: number) => number,
): RunningIntegral {
  const pieces: Piece[] = []
  let before = 0
  for (let index = 1; index < breaks.length; index++) {
    const piece = integratePiece({
      from: breaks[index - 1] as number,
      to: breaks[index] as number,
      before,
      integrand,
    })
    pieces.push(piece)
    before = evaluatePiece(piece, piece.to)
  }
  const start = breaks[0] as number
  const upTo = (u: number) => {
    if (u <= start) return 0
    const piece = pieceAt(pieces, u)
    return piece === undefined ? before : evaluatePiece(piece, u)
  }
  return { upTo, total: before }
}

/** The same breaks with further ones between, evenly, wherever two lie further apart than `widest`. */
export function subdivide(breaks: readonly number[], widest: number): number[] {
  return breaks.flatMap((to, index) => {
    const from = index === 0 ? to : (breaks[index - 1] as number)
    const parts = Math.max(1, Math.ceil((to - from) / widest))
    return Array.from({ length: parts }, (_, part) =>
      part === parts - 1 ? to : from + ((to - from) * (part + 1)) / parts,
    )
  })
}

interface Piece {
  readonly from: number
  readonly to: number
  readonly coefficients: Float64Array
}

interface PieceOf {
  from: number
  to: number
  /** The integral over all pieces before this one. */
  before: number
  integrand: (u: number) => number
}

function integratePiece({ from, to, before, integrand }: PieceOf): Piece {
  const length = to - from
  const values = Float64Array.from(nodes, (t) => {
    const theta = (Math.PI / 2) * (t + 1)
    return integrand(from + length * Math.sin(theta / 2) ** 2) * Math.sin(theta) * length * (Math.PI / 4)
  })
  const expanded = chebyshevCoefficients(values)
  const coefficients = new Float64Array(terms + 1)
  let atStart = 0
  for (let k = 1; k <= terms; k++) {
    coefficients[k] = ((expanded[k - 1] ?? 0) - (expanded[k + 1] ?? 0)) / (2 * k)
    atStart += (k % 2 === 0 ? 1 : -1) * (coefficients[k] as number)
  }
  coefficients[0] = before - atStart
  return { from, to, coefficients }
}

const nodes = Array.from({ length: terms }, (_, j) => Math.cos((Math.PI * (j + 0.5)) / terms))

// The first coefficient is left doubled, so that the rule of integration has no exception.
function chebyshevCoefficients(values: Float64Array): Float64Array {
  return Float64Array.from(values, (_, k) => {
    let sum = 0
    for (let j = 0; j < terms; j++)
      sum += (values[j] as number) * (cosines[(k * (2 * j + 1)) % (4 * terms)] as number)
    return (2 * sum) / terms
  })
}

const cosines = Array.from({ length: 4 * terms }, (_, j) => Math.cos((Math.PI * j) / (2 * terms)))

function evaluatePiece({ from, to, coefficients }: Piece, u: number): number {
  const share = Math.min(1, Math.max(0, (u - from) / (to - from)))
  const t = (2 / Math.PI) * Math.acos(1 - 2 * share) - 1
  let above = 0
  let twoAbove = 0
  for (let k = terms; k >= 1; k--) {
    const here = 2 * t * above - twoAbove + (coefficients[k] as number)
    twoAbove = above
    above = here
  }
  return t * above - twoAbove + (coefficients[0] as number)
}

function pieceAt(pieces: readonly Piece[], u: number): Piece | undefined {
  let low = 0
  let high = pieces.length
  while (low < high) {
    const middle = (low + high) >> 1
    if ((pieces[middle] as Piece).to < u) low = middle + 1
    else high = middle
  }
  return pieces[low]
}
