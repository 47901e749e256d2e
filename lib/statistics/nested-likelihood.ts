import type { NestedLayout, Stratum } from '@/lib/statistics/nested-layout'

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
 * Derivatives are carried along with each value (see `Jet`), so they are exact. `within` is the sum of squares, in u²
 * and above 0, of the results about the means of their innermost groups.
 *
 * Source: Searle, Casella & McCulloch 1992, chapter 6; the recursion is our own working.
 */
export function restrictedLikelihood(
  layout: NestedLayout,
  within: number,
): (ratios: readonly number[]) => RestrictedLikelihood {
  const random = layout.strata.slice(0, -1)
  const count = random.length
  const results = layout.deviations.length
  const df = results - 1
  const { levels, whole } = kindsOfGroups(layout)
  const scale = random.map(({ size }) => size.length / results)
  const jets = jetArithmetic(count)

  return (ratios) => {
    let squares = jets.constant(within)
    let logDeterminant = jets.constant(0)
    /** Of one group of each kind of the level inside, its own random effect included. */
    let precisions: readonly Jet[] = []
    let mixedMeans: readonly Jet[] = []

    const join = ({ pools, mixed }: Joined): { precision: Jet; mean: Jet } => {
      const parts = [
        ...pools.map(({ kind, groups, mean }) => ({
          precision: jets.scale(precisions[kind]!, groups),
          mean: jets.constant(mean),
        })),
        ...mixed.map(({ kind, place }) => ({ precision: precisions[kind]!, mean: mixedMeans[place]! })),
      ]
      let precision = jets.constant(0)
      let weighted = jets.constant(0)
      for (const part of parts) {
        precision = jets.add(precision, part.precision)
        weighted = jets.add(weighted, jets.multiply(part.precision, part.mean))
      }
      const mean = jets.divide(weighted, precision)
      for (const part of parts) {
        const distance = jets.add(part.mean, jets.scale(mean, -1))
        squares = jets.add(squares, jets.multiply(part.precision, jets.multiply(distance, distance)))
      }
      return { precision, mean }
    }

    levels.forEach(({ kinds, mixed, squaresInside }, depth) => {
      squaresInside.forEach((ss, kind) => {
        squares = jets.add(squares, jets.scale(precisions[kind]!, ss))
      })
      const means = mixed.map((group) => join(group).mean)
      const level = count - 1 - depth
      const ratio = jets.variable(ratios[level]!, level)
      precisions = kinds.map(({ groups, results: ownResults, parts }) => {
        let precision = jets.constant(ownResults)
        for (const part of parts)
          precision = jets.add(precision, jets.scale(precisions[part.kind]!, part.groups))
        const inflated = jets.add(jets.constant(1), jets.multiply(ratio, precision))
        logDeterminant = jets.add(logDeterminant, jets.scale(jets.log(inflated), groups))
        return jets.divide(precision, inflated)
      })
      mixedMeans = means
    })

    whole.squaresInside.forEach((ss, kind) => {
      squares = jets.add(squares, jets.scale(precisions[kind]!, ss))
    })
    const { precision: information, mean } =
      count === 0
        ? { precision: jets.constant(results), mean: jets.constant(layout.mean) }
        : join(whole.joined)
    const deviance = jets.add(
      jets.add(logDeterminant, jets.log(information)),
      jets.scale(jets.log(jets.scale(squares, 1 / df)), df),
    )
    return {
      deviance: deviance[0]! + df * (1 + Math.log(2 * Math.PI)),
      gradient: jets.gradient(deviance),
      curvature: jets.curvature(deviance),
      residualVariance: squares[0]! / df,
      mean: mean[0]!,
      information: information[0]!,
      df,
      scale,
    }
  }
}

/** Groups of one level that are built alike weigh alike, whatever the ratios are. */
type Kind = {
  /** How many there are. */
  groups: number
  /** Single results in each, in the innermost level; 0 further out. */
  results: number
  /** Groups of each kind of the level inside, in each. */
  parts: readonly { kind: number; groups: number }[]
}

/**
 * What a group is joined from: groups of one kind whose means do not depend on the ratios, pooled once and not at every
 * step, and mixed ones.
 */
type Joined = {
  pools: { kind: number; groups: number; mean: number }[]
  /** Groups of several kinds of parts, whose mean moves with the ratios: by their place among the mixed of their level. */
  mixed: { kind: number; place: number }[]
}

type Level = {
  kinds: readonly Kind[]
  mixed: readonly Joined[]
  /** By kind of the level inside: the squares of means about those of their pools. */
  squaresInside: readonly number[]
}

/**
 * The groups of each level sorted by kind, innermost level first, and what the whole is joined from. In a balanced layout
 * there is one kind a level and nothing is mixed, however many groups there are.
 */
function kindsOfGroups({ strata }: NestedLayout): { levels: readonly Level[]; whole: Whole } {
  const innermostFirst = strata.slice(0, -1).reverse()
  const levels: SortedLevel[] = []
  for (const stratum of innermostFirst) {
    const inside = levels.at(-1)
    levels.push(inside === undefined ? innermostLevel(stratum) : joinedLevel(inside.groups, stratum))
  }
  const outermost = levels.at(-1)?.groups
  if (outermost === undefined)
    return { levels, whole: { joined: { pools: [], mixed: [] }, squaresInside: [] } }
  const { joined, squaresInside } = pooled(outermost, new Int32Array(outermost.kindOf.length), 1)
  return { levels, whole: { joined: joined[0]!, squaresInside } }
}

type Whole = { joined: Joined; squaresInside: readonly number[] }

type SortedLevel = Level & { groups: Groups }

/** The groups of one level, in their order. */
type Groups = {
  kinds: readonly Kind[]
  kindOf: Int32Array
  /** Of those that are not mixed. */
  meanOf: Float64Array
  /** Place among the mixed of the level, -1 for others. */
  mixedOf: Int32Array
  /** One observation of each. */
  firstMember: Int32Array
}

function innermostLevel({ size, mean, firstMember }: Stratum): SortedLevel {
  const kindOf = new Int32Array(size.length)
  const known = new Map<number, number>()
  const kinds: Kind[] = []
  for (let group = 0; group < size.length; group += 1) {
    let kind = known.get(size[group]!)
    if (kind === undefined) {
      kind = kinds.length
      known.set(size[group]!, kind)
      kinds.push({ groups: 0, results: size[group]!, parts: [] })
    }
    kinds[kind]!.groups += 1
    kindOf[group] = kind
  }
  const mixedOf = new Int32Array(size.length).fill(-1)
  return {
    kinds,
    mixed: [],
    squaresInside: [],
    groups: { kinds, kindOf, meanOf: mean, mixedOf, firstMember },
  }
}

function joinedLevel(inside: Groups, { groupOf, size, firstMember }: Stratum): SortedLevel {
  const parentOf = inside.firstMember.map((member) => groupOf[member]!)
  const { joined, squaresInside } = pooled(inside, parentOf, size.length)
  const known = new Map<string, number>()
  const kinds: Kind[] = []
  const mixed: Joined[] = []
  const kindOf = new Int32Array(joined.length)
  const meanOf = new Float64Array(joined.length)
  const mixedOf = new Int32Array(joined.length).fill(-1)
  joined.forEach((group, place) => {
    const parts = partsOf(group)
    const key = parts.map(({ kind, groups }) => `${kind}:${groups}`).join(' ')
    let kind = known.get(key)
    if (kind === undefined) {
      kind = kinds.length
      known.set(key, kind)
      kinds.push({ groups: 0, results: 0, parts })
    }
    kinds[kind]!.groups += 1
    kindOf[place] = kind
    if (group.mixed.length === 0 && group.pools.length === 1) meanOf[place] = group.pools[0]!.mean
    else mixedOf[place] = mixed.push(group) - 1
  })
  return { kinds, mixed, squaresInside, groups: { kinds, kindOf, meanOf, mixedOf, firstMember } }
}

function partsOf({ pools, mixed }: Joined): { kind: number; groups: number }[] {
  const groups = new Map<number, number>()
  for (const pool of pools) groups.set(pool.kind, pool.groups)
  for (const { kind } of mixed) groups.set(kind, (groups.get(kind) ?? 0) + 1)
  return [...groups]
    .map(([kind, count]) => ({ kind, groups: count }))
    .sort((one, other) => one.kind - other.kind)
}

/** For each parent what it is joined from, and the squares that pooling has taken, by kind. */
function pooled(
  { kinds, kindOf, meanOf, mixedOf }: Groups,
  parentOf: Int32Array,
  parents: number,
): { joined: Joined[]; squaresInside: number[] } {
  const joined = Array.from({ length: parents }, (): Joined => ({ pools: [], mixed: [] }))
  const squaresInside = kinds.map(() => 0)
  const known = new Map<number, Joined['pools'][number]>()
  for (let group = 0; group < kindOf.length; group += 1) {
    const parent = parentOf[group]!
    const kind = kindOf[group]!
    if (mixedOf[group]! >= 0) {
      joined[parent]!.mixed.push({ kind, place: mixedOf[group]! })
      continue
    }
    const key = parent * kinds.length + kind
    let pool = known.get(key)
    if (pool === undefined) {
      pool = { kind, groups: 0, mean: 0 }
      known.set(key, pool)
      joined[parent]!.pools.push(pool)
    }
    // Welford: the sum of squares about the mean so far.
    const apart = meanOf[group]! - pool.mean
    pool.groups += 1
    pool.mean += apart / pool.groups
    squaresInside[kind]! += apart * (meanOf[group]! - pool.mean)
  }
  return { joined, squaresInside }
}

/**
 * A value with its derivatives: first the value, then the gradient, then the
 * upper triangle of second derivatives row by row.
 */
type Jet = Float64Array

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
