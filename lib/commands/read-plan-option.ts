import { isReservedLevel } from '@/lib/commands/reserved-levels'
import type { AskedPlan } from '@/lib/statistics'

type Fault = (found: string, expected: string) => void

/** A simulated curve takes some milliseconds a point. */
const MOST_NESTED_LABORATORIES = 1000
/** So that the degrees of freedom of a thousand laboratories stay within what the distributions take. */
const MOST_RESULTS = 100_000

/**
 * What `--plan` asks for: `p=8..30,n=2,gamma=2`, or with inner levels, outermost first, and the share of γ² − 1 that each
 * holds, `p=8..30,operator=2,day=2,n=2,gamma=2,share=0.4:0.2`. With inner levels `within=0.3` asks for the least
 * number of laboratories too. `null` after a fault.
 */
export function readPlanOption(text: string, fault: Fault): AskedPlan | null {
  const parts = text.split(',').map(partOf)
  const isNested = parts.some(({ key }) => !ONE_WAY.includes(key))
  return isNested ? nestedPlan(text, parts, fault) : oneWayPlan(text, fault)
}

type Part = { key: string; value: string; whole: string }

const ONE_WAY = ['p', 'n', 'gamma', '']
const KEYS = ['p', 'n', 'gamma', 'share', 'within']

function partOf(text: string): Part {
  const cut = text.indexOf('=')
  const key = (cut < 0 ? text : text.slice(0, cut)).trim()
  return {
    key: KEYS.includes(key.toLowerCase()) ? key.toLowerCase() : key,
    value: cut < 0 ? '' : text.slice(cut + 1).replaceAll(' ', ''),
    whole: text.trim(),
  }
}

function oneWayPlan(text: string, fault: Fault): AskedPlan | null {
  const found = /^p=(\d+)(?:\.\.(\d+))?,n=(\d+),gamma=([\d.]+)$/.exec(text.replaceAll(' ', ''))
  const from = Number(found?.[1])
  const to = Number(found?.[2] ?? found?.[1])
  const n = Number(found?.[3])
  const gamma = Number(found?.[4])
  if (found === null || !(from >= 2 && to >= from && to <= 10_000 && n >= 1 && gamma >= 1)) {
    fault(text, 'p=8..30,n=2,gamma=2 with p from 2, n from 1 and gamma from 1')
    return null
  }
  return { from, to, n, gamma }
}

/** Every part that is wrong is one fault. */
function nestedPlan(text: string, parts: readonly Part[], fault: Fault): AskedPlan | null {
  let isFaulty = false
  const refuse = (found: string, expected: string): void => {
    isFaulty = true
    fault(found, expected)
  }
  const one = (key: string, expected: string): Part | undefined => {
    const own = parts.filter((part) => part.key === key)
    if (own.length > 1) refuse(own[1]!.whole, `${key} once`)
    if (own.length === 0) refuse(text, expected)
    return own[0]
  }
  const figure = (key: string, expected: string, holds: (value: number) => boolean): number => {
    const part = one(key, expected)
    const value = decimalOf(part?.value)
    if (part !== undefined && !holds(value)) refuse(part.whole, expected)
    return value
  }

  const sizes = one('p', EXPECTED.p)
  const range = /^(\d+)(?:\.\.(\d+))?$/.exec(sizes?.value ?? '')
  const from = Number(range?.[1])
  const to = Number(range?.[2] ?? range?.[1])
  if (sizes !== undefined && !(from >= 2 && to >= from && to <= MOST_NESTED_LABORATORIES))
    refuse(sizes.whole, EXPECTED.p)
  const n = figure('n', EXPECTED.n, (value) => Number.isInteger(value) && value >= 1)
  const gamma = figure('gamma', EXPECTED.gamma, (value) => value >= 1 && value <= 1000)
  const isWishing = parts.some(({ key }) => key === 'within')
  const wished = isWishing ? figure('within', EXPECTED.within, (value) => value > 0) : undefined

  const levels = innerLevels(text, parts, refuse)
  const shares = sharesOf(levels, one('share', shareWords(levels)), refuse)
  if (levels.reduce((product, { groups }) => product * groups, n) > MOST_RESULTS)
    refuse(text, `${MOST_RESULTS} results of each laboratory at most`)

  if (isFaulty) return null
  const inner = levels.map((level, index) => ({ ...level, share: shares[index]! }))
  return { from, to, n, gamma, inner, ...(wished === undefined ? {} : { wished }) }
}

const EXPECTED = {
  p: `p=8..30, from 2 to ${MOST_NESTED_LABORATORIES} laboratories where levels are nested`,
  n: 'n=2, a whole number from 1',
  gamma: 'gamma=2, from 1 to 1000',
  within: 'within=0.3, a half-width above 0 as a fraction of the value',
  level: 'an inner level and its groups, such as day=2, from 2',
}

function innerLevels(
  text: string,
  parts: readonly Part[],
  refuse: Fault,
): { source: string; groups: number }[] {
  const own = parts.filter(({ key }) => !KEYS.includes(key))
  if (own.length === 0) refuse(text, EXPECTED.level)
  return own.map(({ key, value, whole }, index) => {
    const groups = /^\d{1,6}$/.test(value) ? Number(value) : 0
    if (key === '' || groups < 2) refuse(whole, EXPECTED.level)
    else if (isReservedLevel(key)) refuse(whole, 'inner levels only, neither laboratory nor replicate')
    else if (own.findIndex((other) => other.key === key) < index) refuse(whole, 'each level once')
    return { source: key, groups }
  })
}

/** One for each inner level, joined by colons. */
function sharesOf(levels: readonly { source: string }[], part: Part | undefined, refuse: Fault): number[] {
  if (part === undefined) return []
  const shares = part.value.split(':').map(decimalOf)
  const sum = shares.reduce((whole, share) => whole + share, 0)
  if (shares.length !== levels.length || !shares.every((share) => share >= 0) || !(sum <= 1 + 1e-9))
    refuse(part.whole, shareWords(levels))
  return shares
}

function shareWords(levels: readonly { source: string }[]): string {
  const example = levels.length > 1 ? levels.map(() => '0.2').join(':') : '0.4'
  const names = levels.map(({ source }) => source).join(', ') || 'each inner level'
  return `share=${example}, what ${names} holds of gamma² − 1, each from 0 and together 1 at most`
}

/** NaN, which no bound lets pass, where the text is no plain decimal number. */
function decimalOf(text: string | undefined): number {
  return /^(\d+\.?\d*|\.\d+)$/.test(text ?? '') ? Number(text) : NaN
}
