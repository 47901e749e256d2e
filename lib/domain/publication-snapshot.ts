import type { AnalysisDocument } from '@/lib/statistics/analysis-document'

/**
 * What is published, frozen. No field here can hold a person's, a laboratory's or a file's name; a laboratory
 * is its code. Free texts are held against every name of the study before a snapshot is made of them.
 */
export interface PublicationSnapshot {
  readonly version: 1
  readonly study: {
    readonly shortName: string
    readonly title: string
    readonly method: string
    readonly purpose: string
    readonly organisation: string
    readonly limitFactor: string
  }
  readonly levels: readonly { readonly name: string; readonly count: number }[]
  readonly materials: readonly { readonly name: string; readonly description: string }[]
  readonly analysis: { readonly number: number; readonly engineVersion: string; readonly digest: string }
  readonly measurands: readonly PublishedMeasurand[]
}

export interface PublishedMeasurand {
  readonly name: string
  readonly unit: string
  readonly decimals: number
  readonly hasTrueZero: boolean
  readonly document: AnalysisDocument
  /** The coded results from which the document can be computed again. */
  readonly csv: string
  readonly exclusions: readonly {
    readonly code: string
    readonly material: string
    readonly reason: string
  }[]
}

/** An address part made of a study's short name: "HC-27" → "hc-27". */
export function slugOf(shortName: string): string {
  const slug = shortName
    .normalize('NFKD')
    .replace(/\p{M}/gu, '')
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .replace(/^-|-$/g, '')
  return slug || 'study'
}
