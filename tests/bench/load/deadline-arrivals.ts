import type { RandomNumbers } from '@/db/seed/random-numbers'

export type ArrivalKind = 'sheet' | 'draft' | 'upload' | 'check' | 'submit'

/** One thing that a laboratory does, at a moment settled before the run and whatever the server does meanwhile. */
export interface Arrival {
  readonly atMs: number
  readonly kind: ArrivalKind
  readonly laboratory: number
}

/** The last ten minutes before one deadline: 500 laboratories, about 30 requests each, 25 a second in the mean. */
export const deadlineModel = {
  laboratories: 500,
  seconds: 600,
  perLaboratory: { sheet: 6, draft: 20, upload: 0.3 },
  /** The share of the returns that comes in the last so many seconds. */
  lastMinute: { seconds: 60, share: 0.4 },
} as const

/** How long before its return a laboratory looks at the page on which it is checked. */
const checkBeforeMs = { least: 4_000, most: 12_000 }
/** A laboratory that checks and returns does not type meanwhile, nor for a moment afterwards. */
const quietAfterMs = 10_000

/**
 * The arrivals of the last `seconds` before the deadline, at the model's own rates: a shorter run has fewer arrivals,
 * never thinner ones. The counts are the model's, the moments are drawn, so that two seeds ask for equally much.
 */
export function drawArrivals({
  seconds,
  random,
  model = deadlineModel,
}: {
  seconds: number
  random: RandomNumbers
  model?: typeof deadlineModel
}): Arrival[] {
  if (!(seconds > 0 && seconds <= model.seconds))
    throw new RangeError(`A run lasts from 1 to ${model.seconds} s.`)
  const returns = drawReturns({ seconds, random, model })
  const busy = new Map(returns.map((each) => [each.laboratory, each]))
  const others = (['sheet', 'draft', 'upload'] as const).flatMap((kind) => {
    const count = Math.round((model.laboratories * model.perLaboratory[kind] * seconds) / model.seconds)
    const nextFree = inTurn(shuffled(model.laboratories, random))
    return drawMoments({ count, fromMs: 0, toMs: seconds * 1000, random }).map((atMs) => ({
      atMs,
      kind,
      laboratory: nextFree((laboratory) => kind !== 'draft' || isFree(busy.get(laboratory), atMs)),
    }))
  })
  const pairs = returns.flatMap(({ checkMs, submitMs, laboratory }) => [
    { atMs: checkMs, kind: 'check' as const, laboratory },
    { atMs: submitMs, kind: 'submit' as const, laboratory },
  ])
  return [...others, ...pairs].sort((one, other) => one.atMs - other.atMs)
}

interface Return {
  readonly laboratory: number
  readonly checkMs: number
  readonly submitMs: number
}

function drawReturns({
  seconds,
  random,
  model,
}: {
  seconds: number
  random: RandomNumbers
  model: typeof deadlineModel
}): Return[] {
  const { lastMinute, laboratories } = model
  const late = Math.min(lastMinute.seconds, seconds)
  const early = seconds - late
  const lateReturns = Math.round((laboratories * lastMinute.share * late) / lastMinute.seconds)
  const earlyReturns = Math.round(
    (laboratories * (1 - lastMinute.share) * early) / (model.seconds - lastMinute.seconds),
  )
  const moments = [
    ...drawMoments({ count: earlyReturns, fromMs: 0, toMs: early * 1000, random }),
    ...drawMoments({ count: lateReturns, fromMs: early * 1000, toMs: seconds * 1000, random }),
  ]
  const order = shuffled(laboratories, random)
  return moments.map((submitMs, index) => {
    const before = checkBeforeMs.least + random.uniform() * (checkBeforeMs.most - checkBeforeMs.least)
    return { laboratory: order[index] ?? 0, checkMs: Math.max(0, submitMs - before), submitMs }
  })
}

/**
 * Moments with exponential gaps, stretched so that exactly so many fall in the span: what a stream of arrivals that
 * know nothing of each other looks like once its count is known.
 */
export function drawMoments({
  count,
  fromMs,
  toMs,
  random,
}: {
  count: number
  fromMs: number
  toMs: number
  random: RandomNumbers
}): number[] {
  const ends: number[] = []
  let sum = 0
  for (let gap = 0; gap <= count; gap += 1) {
    sum += -Math.log(1 - random.uniform())
    ends.push(sum)
  }
  return ends.slice(0, count).map((end) => fromMs + ((toMs - fromMs) * end) / sum)
}

function isFree(busy: Return | undefined, atMs: number): boolean {
  return !busy || atMs < busy.checkMs - 1000 || atMs > busy.submitMs + quietAfterMs
}

/** Gives the laboratories out one after the other, so that one does not save twice within its own typing pause. */
function inTurn(order: readonly number[]): (suits: (laboratory: number) => boolean) => number {
  const waiting = [...order]
  return (suits) => {
    const place = waiting.findIndex(suits)
    const [chosen] = waiting.splice(Math.max(0, place), 1)
    if (chosen === undefined) throw new RangeError('There is no laboratory to arrive.')
    waiting.push(chosen)
    return chosen
  }
}

function shuffled(count: number, random: RandomNumbers): number[] {
  const order = Array.from({ length: count }, (_, index) => index)
  for (let last = count - 1; last > 0; last -= 1) {
    const other = Math.floor(random.uniform() * (last + 1))
    const kept = order[last]!
    order[last] = order[other]!
    order[other] = kept
  }
  return order
}
