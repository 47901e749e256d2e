/**
 * The document an analysis comes back as: one shape for the server, the
 * command and everybody who recomputes a published study.
 *
 * No key is ever missing. A quantity that cannot be computed, or was not asked
 * for, is `null`, and the object holding it says why in `reasons`, by key.
 */

type Quantity = number | null

/** The reason for each `null` of the object that carries it. */
export type Reasons = { reasons?: Record<string, string> }

export type Interval = { lower: Quantity; upper: Quantity; extended: boolean | null } & Reasons

export type SatterthwaiteInterval = { lower: Quantity; upper: Quantity; df: Quantity } & Reasons

/** h and k are judged at three levels. */
export type ConsistencyCriticalValues = { '0.005': Quantity; '0.01': Quantity; '0.05': Quantity }

/** Cochran and Grubbs are judged at two. */
export type OutlierCriticalValues = { '0.05': Quantity; '0.01': Quantity } & Reasons

export type OutlierLevel = 'none' | 'straggler' | 'outlier'

export type RepeatabilityBlock = {
  variance: Quantity
  sd: Quantity
  df: Quantity
  limit: Quantity
  ci95: Interval
  relative: Quantity
} & Reasons

export type BetweenLaboratoryBlock = {
  varianceRaw: Quantity
  variance: Quantity
  sd: Quantity
  ci95: Interval
  relative: Quantity
  satterthwaite95: SatterthwaiteInterval
} & Reasons

export type ReproducibilityBlock = {
  variance: Quantity
  sd: Quantity
  limit: Quantity
  ci95: Interval
  relative: Quantity
  satterthwaite95: SatterthwaiteInterval
  basis: 'components' | 'single results' | null
} & Reasons

export type IntermediateBlock = {
  /** The inner levels that vary, outermost first. */
  varies: string[]
  variance: Quantity
  sd: Quantity
  ci95: Interval
  relative: Quantity
  satterthwaite95: SatterthwaiteInterval
} & Reasons

export type ScoresBlock = { z: Quantity; zPrime: Quantity; zeta: Quantity; en: Quantity } & Reasons

export type CellBlock = {
  laboratory: string
  n: number
  mean: Quantity
  sd: Quantity
  h: Quantity
  k: Quantity
  df: number
  hPValue: Quantity
  kPValue: Quantity
  kCritical: ConsistencyCriticalValues & Reasons
  /** Δ_i = ȳ_i − μ. Its interval and the laboratory's component are not in the document: see `laboratoryBias`. */
  bias: Quantity
  generalisedCochran: { statistic: Quantity; pValue: Quantity } & Reasons
  scores: ScoresBlock
} & Reasons

export type CriticalBlock = {
  h: ConsistencyCriticalValues & Reasons
  /** By cell size; in a nested layout empty. */
  k: Record<string, ConsistencyCriticalValues & Reasons>
  kByDf: Record<string, ConsistencyCriticalValues & Reasons>
} & Reasons

export type GeneralisedCochranBlock = {
  laboratory: string | null
  statistic: Quantity
  critical: OutlierCriticalValues
  pValue: Quantity
  level: OutlierLevel | null
} & Reasons

export type CochranBlock = {
  laboratory: string | null
  statistic: Quantity
  critical: OutlierCriticalValues
  pValue: Quantity
  level: OutlierLevel | null
  /** The most frequent cell size; `null` in a nested layout, where `dfUsed` stands for it. */
  nUsed: Quantity
  dfUsed: Quantity
  laboratoriesUsed: Quantity
  generalised: GeneralisedCochranBlock
} & Reasons

export type GrubbsTestBlock = {
  laboratories: string[]
  statistic: Quantity
  critical: OutlierCriticalValues
  pValue: Quantity
  level: OutlierLevel | null
} & Reasons

/** Each of the four tests has a level of its own, as if it stood alone. */
export type GrubbsBlock = {
  high: GrubbsTestBlock
  low: GrubbsTestBlock
  pairHigh: GrubbsTestBlock
  pairLow: GrubbsTestBlock
  /**
   * What the tests propose when taken in the order of ISO 5725-2: where an end is beyond 1 %, that mean, and the other
   * end as tested on the means that remain; otherwise the single tests and the pairs. Empty where nothing is beyond 5 %.
   */
  proposed: GrubbsProposal[]
  /** Neither end is beyond 1 % by itself, and there are laboratories enough for a pair. */
  pairsConsulted: boolean
}

export type GrubbsProposal = {
  laboratories: string[]
  test: 'high' | 'low' | 'pairHigh' | 'pairLow'
  level: 'straggler' | 'outlier'
}

export type FDenominator = {
  ms: Quantity
  df: Quantity
  kind: 'exact' | 'Satterthwaite' | null
  weights: Record<string, number>
} & Reasons

export type AnovaRowBlock = {
  source: string
  df: number
  ss: Quantity
  ms: Quantity
  f: Quantity
  pValue: Quantity
  /** Coefficient of each variance component in the expected mean square. */
  ems: Record<string, number>
  /** `null` for the residual, which is tested against nothing. */
  denominator: FDenominator | null
} & Reasons

export type AnovaComponentBlock = {
  source: string
  varianceRaw: Quantity
  variance: Quantity
  sd: Quantity
} & Reasons

export type AnovaBlock = {
  rows: AnovaRowBlock[]
  components: AnovaComponentBlock[]
  /** The innermost named level where it cannot be told from the replicate and stands as `residual`. */
  confounded: string | null
} & Reasons

export type RemlBlock = {
  components: { source: string; variance: Quantity }[]
  /** −2 log restricted likelihood, (N − 1) log 2π included. */
  deviance: Quantity
  converged: boolean | null
  mean: Quantity
  meanStandardError: Quantity
  /** The components whose maximum lies at exactly 0. */
  boundary: string[]
} & Reasons

export type RobustBlock = {
  algorithmA: { mean: Quantity; sd: Quantity; meanStandardError: Quantity } & Reasons
  algorithmS: { sd: Quantity; generalised: boolean | null } & Reasons
  qHampel: { mean: Quantity; sd: Quantity } & Reasons
  reproducibility: { sd: Quantity; betweenLaboratory: { sd: Quantity } & Reasons } & Reasons
  qMethod: {
    reproducibility: { sd: Quantity } & Reasons
    repeatability: { sd: Quantity } & Reasons
  }
}

export type CensoredBlock = {
  results: number
  cells: { laboratory: string; below: number; above: number; quantified: number }[]
}

export type NestingLevelBlock = {
  source: string
  cells: ({ laboratory: string; df: number; ms: Quantity; k: Quantity; kPValue: Quantity } & Reasons)[]
  cochran: GeneralisedCochranBlock
}

export type TruenessBlock = {
  reference: Quantity
  referenceUncertainty: Quantity
  bias: Quantity
  standardUncertainty: Quantity
  df: Quantity
  ci95: Interval
} & Reasons

export type EqualityBlock = {
  f: Quantity
  df: [number, number] | null
  pValue: Quantity
  range: Quantity
  rangePValue: Quantity
  /** The curve slid under the averages: t with `df`, scaled by `scale`, for an average of `n` results. */
  reference: { df: Quantity; scale: Quantity; n: Quantity; halfWidth95: Quantity } & Reasons
} & Reasons

export type AssignedBlock = {
  value: Quantity
  uncertainty: Quantity
  source: 'reference' | 'algorithmA' | 'mean' | null
  sigma: Quantity
  sigmaSource: 'given' | 'cell mean' | null
} & Reasons

export type ProposalKind =
  | 'factor'
  | 'factorOneResult'
  | 'unit'
  | 'unitAllMaterials'
  | 'exchange'
  | 'digits'
  | 'offset'
  | 'proportion'
  | 'oneApart'

export type ProposalState = { h: Quantity; k: Quantity; surprise: Quantity } & Reasons

export type Proposal = {
  laboratory: string
  kind: ProposalKind
  detail: string
  cells: string[]
  before: ProposalState
  after: ProposalState
  price: number
  score: number
}

export type Noticed = {
  laboratory: string
  kind: 'identical' | 'coarse' | 'trend'
  /** Chance of the identical results, or p-value of the trend; `null` for a coarse step. */
  probability: Quantity
  /** For a coarse step: the step itself, and the share of s_r² it explains. */
  step: Quantity
  share: Quantity
} & Reasons

export type RoundedBlock = {
  mean: string | null
  repeatability: string | null
  betweenLaboratory: string | null
  /** In the order of the material's `intermediate`. */
  intermediate: (string | null)[]
  reproducibility: string | null
  repeatabilityLimit: string | null
  reproducibilityLimit: string | null
} & Reasons

export type MaterialAnalysis = {
  material: string
  measurand: string | null
  laboratories: number
  results: number
  mean: Quantity
  meanOfCellMeans: Quantity
  median: Quantity
  nBar: Quantity
  nHarmonic: Quantity
  repeatability: RepeatabilityBlock
  betweenLaboratory: BetweenLaboratoryBlock
  reproducibility: ReproducibilityBlock
  cells: CellBlock[]
  critical: CriticalBlock
  cochran: CochranBlock
  grubbs: GrubbsBlock
  anova: AnovaBlock
  reml: RemlBlock
  /** Empty without inner levels. */
  intermediate: IntermediateBlock[]
  robust: RobustBlock
  censored: CensoredBlock
  /** Empty without inner levels. */
  levels: NestingLevelBlock[]
  trueness: TruenessBlock | null
  equality: EqualityBlock
  assigned: AssignedBlock
  proposals: Proposal[] | null
  noticed: Noticed[] | null
  rounded: RoundedBlock
} & Reasons

export type RelationForms = {
  proportional: { b: Quantity; q: Quantity } & Reasons
  /** The standard's third fit. */
  linear: { a: Quantity; b: Quantity; q: Quantity } & Reasons
  linearConverged: { a: Quantity; b: Quantity } & Reasons
  /** log₁₀ s = c + d log₁₀ m. */
  power: { c: Quantity; d: Quantity; q: Quantity } & Reasons
  proposed: 'proportional' | 'linear' | 'power' | null
  /** Materials that a form needing a reciprocal or a logarithm had to leave out. */
  leftOut: string[]
} & Reasons

export type LevelRelation = { repeatability: RelationForms; reproducibility: RelationForms }

export type TwoSamplePlot = {
  x: string
  y: string
  laboratories: number
  mean: [Quantity, Quantity]
  median: [Quantity, Quantity]
  sd: [Quantity, Quantity]
  covariance: Quantity
  correlation: Quantity
  /** The ellipse: a further laboratory lies inside with 95 %. */
  factor: Quantity
  semiAxes: [Quantity, Quantity]
  angle: Quantity
  points: ({ laboratory: string; x: number; y: number; distance2: Quantity; pValue: Quantity } & Reasons)[]
} & Reasons

export type HomogeneityCheck = {
  material: string
  /** With fewer than 10 the check stands, and `reasons` says what it needs besides. */
  units: number
  portions: Quantity
  sx: Quantity
  sw: Quantity
  ssSquaredRaw: Quantity
  ss: Quantity
  f1: Quantity
  f2: Quantity
  target: Quantity
  basic: boolean | null
  expanded: boolean | null
  checkPrecise: boolean | null
  fPValue: Quantity
  cochran: GeneralisedCochranBlock
} & Reasons

export type Planning = {
  n: number
  gamma: number
  /** With γ below 1.5 `reasons` says, of `reproducibility`, how far the figures of a one-way plan are off. */
  points: PlanningPoint[]
  /** A nested plan alone has this and `least`, which is `null` where no half-width was wished for. */
  nested?: NestedPlanning
  least?: LeastPlan | null
} & Reasons

/** Half-widths of 95 % intervals with p laboratories, by `planning.ts` or, nested, by `nested-planning.ts`. */
export type PlanningPoint = {
  p: number
  repeatability: Quantity
  reproducibility: Quantity
  bias: Quantity
  /** A nested plan alone, in the order of a material's `intermediate`. */
  intermediate?: { varies: string[]; halfWidth: number }[]
} & Reasons

/** What was assumed and drawn. The laboratories hold the share that the inner levels leave. */
export type NestedPlanning = {
  inner: { source: string; groups: number; share: number }[]
  laboratoryShare: number
  draws: number
  seed: number
}

/** The least numbers of laboratories that bring each half-width down to the wished one. */
export type LeastPlan = {
  wished: number
  /** As far as was looked. */
  limit: number
  repeatability: Quantity
  intermediate: ({ varies: string[]; p: Quantity } & Reasons)[]
  reproducibility: Quantity
} & Reasons

export type MeasurandAnalysis = {
  measurand: string
  levelRelation: LevelRelation
  youden: TwoSamplePlot[]
}

export type AnalysisDocument = {
  engine: { name: 'evenlot'; version: string }
  input: {
    sha256: string
    /** Results in cells that take part: each counts in some statistic of its material, be it the median alone. */
    results: number
    /** Results that carry a number but lie in a cell that a censored one takes out. */
    besideCensored: number
    /** Rows set aside that hold a result; an empty one is missing, set aside or not. */
    excluded: number
    /** Results below or above a limit that were not set aside. */
    censored: number
    missing: number
    /** With a result or a limit that was not set aside; one whose rows are all set aside is not counted. */
    laboratories: number
    materials: number
    nesting: string[]
  }
  settings: { limitFactor: number }
  materials: MaterialAnalysis[]
  levelRelation: LevelRelation | null
  youden: TwoSamplePlot[] | null
  homogeneity: HomogeneityCheck[] | null
  planning: Planning | null
  measurands: MeasurandAnalysis[] | null
} & Reasons
