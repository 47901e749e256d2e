/** What nobody knows before the study, and the plan is read under. Shares and half-width as fractions. */
export interface PlanAssumptions {
  /** σ_R/σ_r. */
  readonly ratio: number
  /** One for each inner level: its share of what lies beyond repeatability. */
  readonly shares: readonly number[]
  /** The half-width wished for. */
  readonly within: number
}

export interface ReadAssumptions {
  readonly assumptions: PlanAssumptions
  /** As they stand in the form: what was typed, else what was assumed. */
  readonly texts: Readonly<Record<string, string>>
  /** Words for what was typed and could not be used; what is assumed stands in its place. */
  readonly errors: Readonly<Record<string, string>>
}

type Query = Readonly<Record<string, string | readonly string[] | undefined>>

/** The name of the field in which the share of an inner level is typed. */
export const shareField = (level: number) => `share.${level}`

/**
 * The assumptions typed into the address, in per cent where people think in per cent. Until something is typed: σ_R twice
 * σ_r, what lies beyond repeatability in equal parts with the laboratories and each inner level, 30 % wished for.
 */
export function readPlanAssumptions(query: Query, innerLevels: number): ReadAssumptions {
  const errors: Record<string, string> = {}
  const texts: Record<string, string> = {}
  const read = (name: string, assumed: number, bounds: { least: number; most: number }) => {
    const typed = query[name]
    const text = typeof typed === 'string' ? typed.trim() : String(assumed)
    texts[name] = text
    const value = /^\d+([.,]\d+)?$/.test(text) ? Number(text.replace(',', '.')) : NaN
    if (value >= bounds.least && value <= bounds.most) return value
    errors[name] = `Give a number from ${bounds.least} to ${bounds.most}; until then ${assumed} is assumed.`
    return assumed
  }

  const ratio = read('ratio', 2, { least: 1, most: 100 })
  const within = read('within', 30, { least: 1, most: 100 })
  const equal = Math.floor(100 / (innerLevels + 1))
  const levels = Array.from({ length: innerLevels }, (_, level) => shareField(level))
  let shares = levels.map((name) => read(name, equal, { least: 0, most: 100 }))
  if (shares.reduce((sum, share) => sum + share, 0) > 100 + 1e-9) {
    errors[levels.at(-1)!] = `The shares come to more than 100 %; until then each is ${equal}.`
    shares = shares.map(() => equal)
  }
  return {
    assumptions: { ratio, shares: shares.map((share) => share / 100), within: within / 100 },
    texts,
    errors,
  }
}
