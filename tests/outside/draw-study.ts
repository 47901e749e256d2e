import { type Random, randomSource } from '@/tests/statistics/random-source'

/** One material with known components: laboratories, inner levels, results as text. */
export type DrawnStudy = {
  name: string
  nesting: readonly string[]
  rows: readonly { laboratory: string; groups: readonly string[]; text: string }[]
}

type Shape = {
  nesting?: readonly string[]
  laboratories: number
  /** Groups of each inner level in a parent, then results in an innermost group. */
  children: (random: Random, depth: number, place: number) => number
  /** Standard deviation of each level, outermost first, then of the replicate. */
  spreads: readonly number[]
  decimals?: number
  level?: number
}

const between = (low: number, high: number) => (random: Random) =>
  low + Math.floor(random.uniform() * (high - low + 1))

/** Every kind of layout that an analysis meets; each is drawn several times. */
const SHAPES: Readonly<Record<string, Shape>> = {
  balanced: { laboratories: 8, children: () => 3, spreads: [1, 0.5] },
  unbalanced: { laboratories: 12, children: between(2, 6), spreads: [1, 0.5] },
  'one replicate in some cells': { laboratories: 9, children: between(1, 3), spreads: [1, 0.5] },
  'two laboratories': { laboratories: 2, children: between(2, 5), spreads: [1, 0.5] },
  'no laboratory component': { laboratories: 10, children: between(2, 4), spreads: [0, 1] },
  ties: { laboratories: 8, children: between(2, 4), spreads: [1, 1], decimals: 0 },
  'a large common offset': { laboratories: 8, children: between(2, 4), spreads: [1, 0.5], level: 1e6 },
  'nested, balanced': { nesting: ['day'], laboratories: 6, children: () => 2, spreads: [1, 0.7, 0.5] },
  'nested, unbalanced': {
    nesting: ['day'],
    laboratories: 9,
    children: between(1, 4),
    spreads: [1, 0.7, 0.5],
  },
  'nested, missing cells': {
    nesting: ['operator', 'day'],
    laboratories: 8,
    children: (random, depth) => (random.uniform() < 0.3 ? 1 : depth === 2 ? 2 : 3),
    spreads: [1, 0.6, 0.7, 0.5],
  },
  'nested, no inner component': {
    nesting: ['day'],
    laboratories: 8,
    children: between(1, 3),
    spreads: [1, 0, 0.5],
  },
  'nested, ties': {
    nesting: ['day'],
    laboratories: 8,
    children: between(1, 3),
    spreads: [1, 1, 1],
    decimals: 0,
  },
  staggered: {
    nesting: ['day'],
    laboratories: 20,
    children: (_, depth, place) => (depth === 0 ? 2 : 2 - place),
    spreads: [1, 0.7, 0.5],
  },
  'four levels deep': {
    nesting: ['operator', 'day', 'batch'],
    laboratories: 6,
    children: between(1, 3),
    spreads: [1, 0.8, 0.7, 0.6, 0.5],
  },
  'four levels deep, balanced': {
    nesting: ['operator', 'day', 'batch'],
    laboratories: 5,
    children: () => 2,
    spreads: [1, 0.8, 0.7, 0.6, 0.5],
  },
}

const DRAWS_OF_EACH = 4

export function drawStudies(): DrawnStudy[] {
  return Object.entries(SHAPES).flatMap(([kind, shape], place) =>
    Array.from({ length: DRAWS_OF_EACH }, (_, draw) =>
      drawStudy(`${kind} ${draw + 1}`, shape, randomSource(1000 * (place + 1) + draw)),
    ),
  )
}

function drawStudy(name: string, shape: Shape, random: Random): DrawnStudy {
  const nesting = shape.nesting ?? []
  const rows: { laboratory: string; groups: string[]; text: string }[] = []
  const fill = (path: string[], level: number): void => {
    const depth = path.length - 1
    if (depth === nesting.length) {
      const results = shape.children(random, depth, Number(path.at(-1)))
      for (let replicate = 0; replicate < results; replicate += 1) {
        const value = level + shape.spreads.at(-1)! * random.normal()
        const text = value.toFixed(shape.decimals ?? 4)
        rows.push({ laboratory: `L${path[0]}`, groups: path.slice(1), text })
      }
      return
    }
    const groups = shape.children(random, depth, 0)
    for (let group = 0; group < groups; group += 1) {
      fill([...path, String(group)], level + shape.spreads[depth + 1]! * random.normal())
    }
  }
  for (let laboratory = 1; laboratory <= shape.laboratories; laboratory += 1) {
    fill([String(laboratory)], (shape.level ?? 20) + shape.spreads[0]! * random.normal())
  }
  return { name, nesting, rows }
}
