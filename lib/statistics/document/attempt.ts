import { NotComputable } from '@/lib/statistics/not-computable'
import type { Reasons } from '@/lib/statistics/analysis-document'

/** Computes one quantity of a block, or leaves `null` and notes the reason under its key. */
export type Attempt = <Value>(key: string, compute: () => Value) => Value | null

/** For a figure that no double holds, wherever that comes to light. */
export const OUT_OF_RANGE = 'The results are too large or too small to be squared; change their unit.'

/**
 * Builds one block of the analysis document. This is the one place where a
 * statistic that does not exist turns into `null` and words.
 */
export function withReasons<Block extends object>(build: (attempt: Attempt) => Block): Block & Reasons {
  let reasons: Record<string, string> | undefined
  const block: Block & Reasons = build((key, compute) => {
    try {
      return compute()
    } catch (error) {
      if (!(error instanceof NotComputable)) throw error
      reasons ??= {}
      reasons[key] = error.message
      return null
    }
  })
  for (const key in block) {
    const value: unknown = block[key as keyof Block]
    if (typeof value !== 'number' || Number.isFinite(value)) continue
    reasons ??= {}
    reasons[key] = OUT_OF_RANGE
    Object.assign(block, { [key]: null })
  }
  if (reasons === undefined) return block
  // One computation often gives several keys; they are missing for one reason.
  const [first] = Object.values(reasons)
  for (const key in block) if (block[key as keyof Block] === null) reasons[key] ??= first!
  block.reasons = reasons
  return block
}

/**
 * For a quantity whose absence is known beforehand.
 *
 * @throws {NotComputable} with the given code, always.
 */
export function notComputable(reason: string, words: string): never {
  throw new NotComputable(reason, words)
}

/**
 * The value, or the failure that explains why another quantity that needs it is missing too.
 *
 * @throws {NotComputable} `needs-another` for `null`.
 */
export function required<Value>(value: Value | null, words: string): Value {
  return value ?? notComputable('needs-another', words)
}

/** Computes at most once; every later call gives the same value, or the same failure. */
export function once<Value>(compute: () => Value): () => Value {
  let outcome: { value: Value } | { failure: unknown } | undefined
  return () => {
    if (outcome === undefined) {
      try {
        outcome = { value: compute() }
      } catch (failure) {
        outcome = { failure }
      }
    }
    if ('failure' in outcome) throw outcome.failure
    return outcome.value
  }
}
