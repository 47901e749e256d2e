/** What an analysis is made from: plain results as they were reported. */
export type AnalysisInput = {
  results: readonly AnalysisResult[]
  /**
   * Results of the same laboratories for other measurands, which the document does not report. They are looked at where
   * a laboratory may have exchanged two measurands, and nowhere else.
   */
  otherMeasurands?: readonly AnalysisResult[]
  /** Names of the inner levels, outermost first, without the laboratory and the replicate. */
  nesting: readonly string[]
  settings: AnalysisSettings
  /** Digest of what was read, carried into the document unchanged. */
  sha256: string
  /** Version of the program that computes. */
  version: string
}

export type AnalysisResult = {
  laboratory: string
  material: string
  measurand: string | null
  /** One label for each inner level. */
  groups: readonly string[]
  /** Decimal text with a point, as reported; '' is a missing result. */
  text: string
  /** The result lies below or above the limit that `text` gives. */
  censored: null | '<' | '>'
  excluded: boolean
  /** Place in the run order of the laboratory. */
  order?: number | null
  /** Standard uncertainty the laboratory states. */
  uncertainty?: number | null
}

export type AnalysisSettings = {
  limitFactor: number
  /** `false` where the scale has no true zero, so that nothing is said in per cent. */
  trueZero?: boolean
  /** Accepted reference value and its standard uncertainty, by material. */
  references?: Readonly<Record<string, { value: string; uncertainty: number }>>
  /** Standard deviation for scores or for the check of homogeneity, by material. */
  sigmas?: Readonly<Record<string, number>>
  /** Materials for the two-sample plots; by default 1–2, 3–4, … in the order of the input. */
  pairs?: readonly (readonly [string, string])[]
  /** Decimals that were asked for, by material. */
  decimals?: Readonly<Record<string, number>>
  /** Other units results are often given in; multiplied by `factor` they are in the study's. */
  units?: readonly { name: string; factor: number }[]
  /** The laboratories are units of a material before shipping. */
  homogeneity?: boolean
  plan?: AskedPlan
}

/** A curve over numbers of laboratories, both ends included. */
export type AskedPlan = {
  from: number
  to: number
  n: number
  gamma: number
  /** Levels between laboratory and replicate, outermost first, with the share of γ² − 1 that each holds. */
  inner?: readonly { source: string; groups: number; share: number }[]
  /** With inner levels: the half-width for which the least number of laboratories is asked. */
  wished?: number
}
