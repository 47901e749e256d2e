/** The published face of the numerical core. */
export { analyse } from '@/lib/statistics/analyse'
export type * from '@/lib/statistics/analysis-document'
export type { AnalysisInput, AnalysisResult, AnalysisSettings } from '@/lib/statistics/analysis-input'
export { type LaboratoryBias, laboratoryBias } from '@/lib/statistics/laboratory-bias'
export { type CheckedMean, type StabilityVerdict, stabilityVerdict } from '@/lib/statistics/stability'
export { NotComputable } from '@/lib/statistics/not-computable'
export { decimalToNumber, parseDecimal } from '@/lib/statistics/decimal'
export { repeatabilityPrecision, reproducibilityPrecision, biasPrecision } from '@/lib/statistics/planning'
