import { NotComputable } from '@/lib/statistics/not-computable'
import type { Reasons } from '@/lib/statistics/analysis-document'

/** Computes one quantity of a block, or leaves `null` and notes the reason under its key. */
export type Attempt = <Value>(key: string, compute: () => Value) => Value | null

/**
 * Builds one block of the analysis document. This is the one place where a
 * statistic that does not exist turns into `null` and words.
 */
export function withReasons<Block extends object>(build: (attempt: Attempt) => Block): Block & Reasons {
  const reasons: Record<string, string> = {}
  const block = build((key, compute) => {
    try {
      return compute()
    } catch (error) {
      if (!(error instanceof NotComputable)) throw error
      reasons[key] = error.message
      return null
    }
  })
  const first = Object.values(reasons)[0]
  if (first === undefined) return block
  // One computation often gives several keys; they are missing for one reason.
  for (const [key, value] of Object.entries(block)) if (value === null) reasons[key] ??= first
  return { ...block, reasons }
}

/** For a quantity whose absence is known beforehand. */
export function notComputable(reason: string, words: string): never {
  throw new NotComputable(reason, words)
}

/** The value, or the failure that explains why another quantity that needs it is missing too. */
export function required<Value>(value: Value | null, words: string): Value {
  return value ?? notComputable('needs-another', words)
}
