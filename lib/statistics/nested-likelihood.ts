import type { NestedLayout } from '@/lib/statistics/nested-layout'

/** The restricted likelihood at given variance ratios, with its first and second derivatives. */
export type RestrictedLikelihood = {
  deviance: number
  /** Derivatives of the deviance by each ratio. */
  gradient: readonly number[]
  curvature: readonly (readonly number[])[]
  residualVariance: number
  mean: number
  /** 1′V⁻¹1 in units of the residual variance. */
  information: number
  /** N − 1. */
  df: number
  /** A typical size of each ratio: one over the mean group size of its level. */
  scale: readonly number[]
}

/**
 * Makes the function that evaluates the restricted likelihood of a nested layout, in time proportional to the
 * number of groups that differ in kind. Given are the ratios of the outer components to the residual, outermost
 * first: pure numbers, each at least 0. The residual variance comes back in u², the mean in u.
 *
 * No matrix is formed. A group of results is summed up by its precision A, its weighted mean m and its weighted sum
 * of squares Q. Groups are joined by adding precisions, and a random effect of ratio θ common to a group changes A
 * to A/(1 + θA) and adds log(1 + θA) to the log determinant, while m and Q stay. Working with means and not with
 * raw sums keeps the digits that a large common part would take away.
 *
 * Derivatives are carried along with each value (see `Jet`), so they are exact. The layout must have some residual
 * scatter: `fitReml` sees to it.
 *
 * Source: Searle, Casella & McCulloch 1992, chapter 6; the recursion is our own working.
 */
export function restrictedLikelihood(
  layout: NestedLayout,
): (ratios: readonly number[]) => RestrictedLikelihood {
  const random = layout.strata.slice(0, -1)
  const count = random.length
  const results = layout.deviations.length
  const df = results - 1
  const within = withinParts(layout)
  const pools = poolAlike(layout, within)
  const scale = random.map(({ size }) => size.length / results)

  return (ratios) => {
    const jets = jetArithmetic(count)
    let precision = pools.map(({ size, groups }) => jets.constant(groups * size))
    let means = pools.map(({ mean }) => jets.constant(mean))
    let squares = jets.constant(within.ss)
    let logDeterminant = jets.constant(0)

    if (count > 0) {
      const ratio = jets.variable(ratios[count - 1]!, count - 1)
      precision = pools.map(({ size, groups, ss }) => {
        const inflated = jets.add(jets.constant(1), jets.scale(ratio, size))
        const own = jets.divide(jets.constant(size), inflated)
        logDeterminant = jets.add(logDeterminant, jets.scale(jets.log(inflated), groups))
        squares = jets.add(squares, jets.scale(own, ss))
        return jets.scale(own, groups)
      })
      const parentOf = pools.map(({ parent }) => parent)
      const joined = join(jets, { precision, means, parentOf, parents: random[count - 2]?.size.length ?? 1 })
      precision = joined.precision
      means = joined.means
      squares = jets.add(squares, joined.squares)
    }

    for (let level = count - 2; level >= 0; level -= 1) {
      const ratio = jets.variable(ratios[level]!, level)
      precision = precision.map((value) => {
        const inflated = jets.add(jets.constant(1), jets.multiply(ratio, value))
        logDeterminant = jets.add(logDeterminant, jets.log(inflated))
        return jets.divide(value, inflated)
      })
      const inner = random[level]!
      const outer = level === 0 ? undefined : random[level - 1]!
      const parentOf = Array.from(inner.firstMember, (member) => outer?.groupOf[member] ?? 0)
      const joined = join(jets, { precision, means, parentOf, parents: outer?.size.length ?? 1 })
      precision = joined.precision
      means = joined.means
      squares = jets.add(squares, joined.squares)
    }

    const information = precision[0]!
    const deviance = jets.add(
      jets.add(logDeterminant, jets.log(information)),
      jets.scale(jets.log(jets.scale(squares, 1 / df)), df),
    )
    return {
      deviance: deviance[0]! + df * (1 + Math.log(2 * Math.PI)),
      gradient: jets.gradient(deviance),
      curvature: jets.curvature(deviance),
      residualVariance: squares[0]! / df,
      mean: means[0]![0]!,
      information: information[0]!,
      df,
      scale,
    }
  }
}

/** The innermost groups, within which results differ by the residual alone. */
function withinParts({ strata, deviations, mean }: NestedLayout): {
  sizes: number[]
  means: number[]
  ss: number
} {
  const innermost = strata.at(-2)
  let ss = 0
  deviations.forEach((deviation, index) => {
    ss += (deviation - (innermost === undefined ? mean : innermost.mean[innermost.groupOf[index]!]!)) ** 2
  })
  if (innermost === undefined) return { sizes: [deviations.length], means: [mean], ss }
  return { sizes: Array.from(innermost.size), means: Array.from(innermost.mean), ss }
}

/** Innermost groups of one size under one parent: whatever the ratios are, they weigh alike. */
type AlikeGroups = { parent: number; size: number; groups: number; mean: number; ss: number }

/** They are joined once and not at every step; in a balanced layout one for each parent is left. */
function poolAlike({ strata }: NestedLayout, within: { sizes: number[]; means: number[] }): AlikeGroups[] {
  const innermost = strata.at(-2)
  const outer = strata.at(-3)
  const pools = new Map<number, Map<number, AlikeGroups>>()
  within.sizes.forEach((size, group) => {
    const parent =
      outer === undefined || innermost === undefined ? 0 : outer.groupOf[innermost.firstMember[group]!]!
    const ofParent = pools.get(parent) ?? new Map<number, AlikeGroups>()
    pools.set(parent, ofParent)
    const pool = ofParent.get(size) ?? { parent, size, groups: 0, mean: 0, ss: 0 }
    ofParent.set(size, pool)
    // Welford: the sum of squares about the mean so far.
    const apart = within.means[group]! - pool.mean
    pool.groups += 1
    pool.mean += apart / pool.groups
    pool.ss += apart * (within.means[group]! - pool.mean)
  })
  return [...pools.values()].flatMap((ofParent) => [...ofParent.values()])
}

type Groups = {
  precision: readonly Jet[]
  means: readonly Jet[]
  parentOf: readonly number[]
  parents: number
}

function join(
  jets: JetArithmetic,
  { precision, means, parentOf, parents }: Groups,
): { precision: Jet[]; means: Jet[]; squares: Jet } {
  const total = Array.from({ length: parents }, () => jets.constant(0))
  const weighted = Array.from({ length: parents }, () => jets.constant(0))
  precision.forEach((value, group) => {
    const parent = parentOf[group]!
    total[parent] = jets.add(total[parent]!, value)
    weighted[parent] = jets.add(weighted[parent]!, jets.multiply(value, means[group]!))
  })
  const joined = total.map((value, parent) => jets.divide(weighted[parent]!, value))
  let squares = jets.constant(0)
  precision.forEach((value, group) => {
    const distance = jets.add(means[group]!, jets.scale(joined[parentOf[group]!]!, -1))
    squares = jets.add(squares, jets.multiply(value, jets.multiply(distance, distance)))
  })
  return { precision: total, means: joined, squares }
}

/**
 * A value with its derivatives: first the value, then the gradient, then the
 * upper triangle of second derivatives row by row.
 */
type Jet = Float64Array

type JetArithmetic = ReturnType<typeof jetArithmetic>

function jetArithmetic(variables: number) {
  const length = 1 + variables + (variables * (variables + 1)) / 2

  /** Applies a function of one argument, given its value and derivatives there. */
  function chain(jet: Jet, value: number, first: number, second: number): Jet {
    const result = new Float64Array(length)
    result[0] = value
    let place = 1 + variables
    for (let row = 0; row < variables; row += 1) {
      result[1 + row] = first * jet[1 + row]!
      for (let column = row; column < variables; column += 1) {
        result[place] = first * jet[place]! + second * jet[1 + row]! * jet[1 + column]!
        place += 1
      }
    }
    return result
  }

  function multiply(one: Jet, other: Jet): Jet {
    const result = new Float64Array(length)
    const a = one[0]!
    const b = other[0]!
    result[0] = a * b
    let place = 1 + variables
    for (let row = 0; row < variables; row += 1) {
      result[1 + row] = a * other[1 + row]! + b * one[1 + row]!
      for (let column = row; column < variables; column += 1) {
        result[place] =
          a * other[place]! +
          b * one[place]! +
          one[1 + row]! * other[1 + column]! +
          one[1 + column]! * other[1 + row]!
        place += 1
      }
    }
    return result
  }

  function constant(value: number): Jet {
    const result = new Float64Array(length)
    result[0] = value
    return result
  }

  function variable(value: number, index: number): Jet {
    const result = constant(value)
    result[1 + index] = 1
    return result
  }

  function add(one: Jet, other: Jet): Jet {
    const result = new Float64Array(length)
    for (let place = 0; place < length; place += 1) result[place] = one[place]! + other[place]!
    return result
  }

  function scale(jet: Jet, factor: number): Jet {
    const result = new Float64Array(length)
    for (let place = 0; place < length; place += 1) result[place] = jet[place]! * factor
    return result
  }

  function divide(one: Jet, other: Jet): Jet {
    const value = other[0]!
    return multiply(one, chain(other, 1 / value, -1 / value ** 2, 2 / value ** 3))
  }

  function log(jet: Jet): Jet {
    const value = jet[0]!
    return chain(jet, Math.log(value), 1 / value, -1 / value ** 2)
  }

  function gradient(jet: Jet): number[] {
    return Array.from({ length: variables }, (_, index) => jet[1 + index]!)
  }

  function curvature(jet: Jet): number[][] {
    const square = Array.from({ length: variables }, () => new Array<number>(variables).fill(0))
    let place = 1 + variables
    for (let row = 0; row < variables; row += 1) {
      for (let column = row; column < variables; column += 1) {
        square[row]![column] = jet[place]!
        square[column]![row] = jet[place]!
        place += 1
      }
    }
    return square
  }

  return { constant, variable, add, multiply, scale, divide, log, gradient, curvature }
}
