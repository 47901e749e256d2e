import { studyStates, type StudyState } from './study-states'

const studySorts = ['need', 'name', 'deadline', 'state'] as const
export type StudySort = (typeof studySorts)[number]

export interface StudiesWish {
  readonly state: StudyState | null
  readonly text: string
  readonly sort: StudySort
  readonly isReversed: boolean
}

interface ListedStudy {
  readonly study: {
    readonly shortName: string
    readonly title: string
    readonly state: StudyState
    readonly deadline: { readonly dueAt: Date }
  }
  readonly as: 'coordinator' | 'laboratory' | 'committee'
}

/** What an address such as "?state=open&q=twine&sort=-deadline" wishes to see; what it cannot mean is left out. */
export function readStudiesWish(query: Readonly<Record<string, string | string[] | undefined>>): StudiesWish {
  const text = (key: string) => [query[key]].flat()[0] ?? ''
  const sort = text('sort')
  const name = sort.replace(/^-/, '')
  return {
    state: studyStates.find((state) => state === text('state')) ?? null,
    text: text('q').trim().slice(0, 100),
    sort: studySorts.find((each) => each === name) ?? 'need',
    isReversed: sort.startsWith('-'),
  }
}

export function arrangeStudies<Entry extends ListedStudy>(
  entries: readonly Entry[],
  wish: StudiesWish & { now: Date },
): Entry[] {
  const sought = wish.text.toLocaleLowerCase('en')
  const shown = entries
    .filter(({ study }) => !wish.state || study.state === wish.state)
    .filter(({ study }) => `${study.shortName} ${study.title}`.toLocaleLowerCase('en').includes(sought))
    .sort((a, b) => compare(a, b, wish) || a.study.shortName.localeCompare(b.study.shortName, 'en'))
  return wish.isReversed ? shown.reverse() : shown
}

/** How soon a study needs the person, the smaller the sooner. */
function needOf({ study, as }: ListedStudy, now: Date): number {
  const isOver = study.deadline.dueAt <= now
  if (study.state === 'open' && isOver) return as === 'laboratory' ? 1 : 0
  if (study.state === 'open') return as === 'committee' ? 5 : 2
  if (study.state === 'in-review') return as === 'laboratory' ? 6 : 1
  if (study.state === 'closed') return as === 'coordinator' ? 3 : 6
  return study.state === 'draft' ? 4 : 7
}

function compare(a: ListedStudy, b: ListedStudy, { sort, now }: { sort: StudySort; now: Date }): number {
  const due = a.study.deadline.dueAt.getTime() - b.study.deadline.dueAt.getTime()
  if (sort === 'need') return needOf(a, now) - needOf(b, now) || due
  if (sort === 'deadline') return due
  if (sort === 'state') return studyStates.indexOf(a.study.state) - studyStates.indexOf(b.study.state)
  return 0
}
