/** The published face of the numerical core. */
export { analyse } from '@/lib/statistics/analyse'
export type * from '@/lib/statistics/analysis-document'
export type {
  AnalysisInput,
  AnalysisResult,
  AnalysisSettings,
  AskedPlan,
} from '@/lib/statistics/analysis-input'
export { equalProposals } from '@/lib/statistics/equal-proposals'
export { planningBlock } from '@/lib/statistics/document/planning-block'
export { flaggedCells } from '@/lib/statistics/document/flagged-cells'
export { type LaboratoryBias, laboratoryBias } from '@/lib/statistics/laboratory-bias'
export { type CheckedMean, type StabilityVerdict, stabilityVerdict } from '@/lib/statistics/stability'
export { NotComputable } from '@/lib/statistics/not-computable'
export { decimalToNumber, parseDecimal } from '@/lib/statistics/decimal'
export { repeatabilityPrecision, reproducibilityPrecision, biasPrecision } from '@/lib/statistics/planning'
