type Texts = Readonly<Record<string, string>>

/** What the plan form begins with, every field as text. */
export interface BegunPlan {
  readonly shortName: string
  readonly title: string
  readonly method: string
  readonly purpose: string
  readonly limitFactor: string
  readonly localTime: string
  readonly zone: string
  readonly measurands: readonly Texts[]
  readonly materials: readonly Texts[]
  readonly levels: readonly Texts[]
}

interface PlannedStudy {
  readonly study: {
    readonly shortName: string
    readonly title: string
    readonly method: string
    readonly purpose: string
    readonly limitFactor: string
    readonly deadline: { readonly localTime: string; readonly zone: string }
  }
  readonly layout: {
    readonly measurands: readonly { name: string; unit: string; decimals: number; hasTrueZero: boolean }[]
    readonly materials: readonly { name: string; description: string }[]
    readonly levels: readonly { name: string; count: number }[]
  }
}

/** A new plan says nothing yet but what nearly every study has: replicates, and limits by 2.8. */
export const emptyPlan: BegunPlan = {
  shortName: '',
  title: '',
  method: '',
  purpose: '',
  limitFactor: '2.8',
  localTime: '',
  zone: '',
  measurands: [],
  materials: [],
  levels: [{ name: 'replicate', count: '' }],
}

/** The plan as it stands, to be changed. */
export function beginPlan({ study, layout }: PlannedStudy): BegunPlan {
  const { shortName, title, method, purpose, limitFactor, deadline } = study
  return {
    shortName,
    title,
    method,
    purpose,
    limitFactor,
    localTime: deadline.localTime,
    zone: deadline.zone,
    measurands: layout.measurands.map((row) => ({
      name: row.name,
      unit: row.unit,
      decimals: String(row.decimals),
      hasTrueZero: String(row.hasTrueZero),
    })),
    materials: layout.materials.map(({ name, description }) => ({ name, description })),
    levels: layout.levels.map(({ name, count }) => ({ name, count: String(count) })),
  }
}
