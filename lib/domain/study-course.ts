import type { StudyState } from './study-states'

export type CourseStationKey =
  | 'plan'
  | 'materials'
  | 'laboratories'
  | 'dispatch'
  | 'results'
  | 'scrutiny'
  | 'precision'
  | 'review'
  | 'report'

export interface CourseStation {
  readonly key: CourseStationKey
  readonly name: string
  /** A word or a count. */
  readonly state: string
  readonly phase: 'done' | 'open' | 'later'
}

/** What the course is told by; a study's view has all of it. */
export interface CourseFacts {
  readonly study: { readonly state: StudyState }
  readonly layout: { readonly materials: readonly unknown[] }
  readonly counts: {
    readonly invited: number
    readonly accepted: number
    readonly declined: number
    readonly returned: number
    readonly committee: number
  }
  readonly analysis: { readonly number: number; readonly upToDate: boolean } | null
  readonly computing: boolean
  readonly proposed: boolean
  readonly publishedAs: string | null
}

/** The nine stations of a study with how far each has come. */
export function courseOf(facts: CourseFacts): CourseStation[] {
  const { study, layout } = facts
  const isDraft = study.state === 'draft'
  const count = layout.materials.length
  return [
    {
      key: 'plan',
      name: 'Plan',
      ...(isDraft
        ? ({ state: 'draft', phase: 'open' } as const)
        : ({ state: 'settled', phase: 'done' } as const)),
    },
    {
      key: 'materials',
      name: 'Materials',
      state: `${count} even ${count === 1 ? 'lot' : 'lots'}`,
      phase: isDraft ? 'open' : 'done',
    },
    { key: 'laboratories', name: 'Laboratories', ...laboratories(facts) },
    { key: 'dispatch', name: 'Dispatch', state: 'outside Evenlot', phase: 'later' },
    { key: 'results', name: 'Results', ...results(facts) },
    { key: 'scrutiny', name: 'Scrutiny', ...scrutiny(facts) },
    { key: 'precision', name: 'Precision', ...precision(facts) },
    { key: 'review', name: 'Review', ...review(facts) },
    { key: 'report', name: 'Report', ...report(facts) },
  ]
}

type Progress = Pick<CourseStation, 'state' | 'phase'>

function laboratories({ study, counts: { invited, accepted, declined } }: CourseFacts): Progress {
  if (study.state === 'draft')
    return { state: invited === 0 ? 'none named yet' : `${invited} named`, phase: 'open' }
  const isAnswered = accepted + declined === invited
  return {
    state: `${accepted} of ${invited} accepted`,
    phase: study.state === 'open' && !isAnswered ? 'open' : 'done',
  }
}

function results({ study, counts: { accepted, returned } }: CourseFacts): Progress {
  if (study.state === 'draft') return { state: 'not open yet', phase: 'later' }
  return { state: `${returned} of ${accepted} returned`, phase: study.state === 'open' ? 'open' : 'done' }
}

function scrutiny({ study, counts, analysis, computing }: CourseFacts): Progress {
  if (study.state === 'draft' || counts.returned === 0) return { state: 'after returns', phase: 'later' }
  if (computing) return { state: 'being computed', phase: 'open' }
  if (!analysis) return { state: 'not computed yet', phase: 'open' }
  if (!analysis.upToDate) return { state: 'out of date', phase: 'open' }
  return { state: `analysis ${analysis.number}`, phase: isPastScrutiny(study.state) ? 'done' : 'open' }
}

function precision({ study, analysis }: CourseFacts): Progress {
  if (!analysis) return { state: 'after scrutiny', phase: 'later' }
  if (!analysis.upToDate) return { state: 'out of date', phase: 'open' }
  return { state: `from analysis ${analysis.number}`, phase: isPastScrutiny(study.state) ? 'done' : 'open' }
}

function isPastScrutiny(state: StudyState): boolean {
  return state === 'in-review' || state === 'published'
}

function review({ study, counts: { committee } }: CourseFacts): Progress {
  const members =
    committee === 0 ? 'no committee yet' : `${committee} ${committee === 1 ? 'member' : 'members'}`
  if (study.state === 'published') return { state: members, phase: 'done' }
  if (study.state === 'in-review') return { state: `with ${members}`, phase: 'open' }
  return { state: members, phase: 'later' }
}

function report({ publishedAs, proposed, study }: CourseFacts): Progress {
  if (publishedAs) return { state: 'published', phase: 'done' }
  if (proposed) return { state: 'proposal waiting', phase: 'open' }
  return { state: 'not proposed', phase: study.state === 'in-review' ? 'open' : 'later' }
}
