import Link from 'next/link'
import { ButtonLink } from '@/app/ui/primitives/button'
import { DataTable, type Column } from '@/app/ui/primitives/data-table'
import { EmptyState } from '@/app/ui/primitives/empty-state'
import type { Sort } from '@/app/ui/primitives/sortable-header'
import { Status } from '@/app/ui/primitives/status'
import { Time } from '@/app/ui/primitives/time'
import type { Tone } from '@/app/ui/primitives/tone'
import type { StudiesWish, StudySort } from '@/lib/domain/arrange-studies'
import { showDistance, showTime } from '@/lib/domain/show-time'
import { stateWords, type StudyState } from '@/lib/domain/study-states'
import type { StudyListEntry } from '@/lib/use-cases/studies/list-studies'
import { paths } from '@/lib/web/paths'

interface StudiesTableProps {
  entries: readonly StudyListEntry[]
  wish: StudiesWish
  now: Date
  isAll: boolean
  mayCreate: boolean
}

export function StudiesTable({ entries, wish, now, isAll, mayCreate }: StudiesTableProps) {
  return (
    <DataTable
      caption="Studies"
      isCaptionHidden
      columns={columns(wish, now)}
      rows={entries}
      rowKey={({ study, as }) => `${study.studyId}.${as}`}
      empty={isAll ? <NoStudies mayCreate={mayCreate} /> : <NoMatch />}
    />
  )
}

function columns(wish: StudiesWish, now: Date): Column<StudyListEntry>[] {
  return [
    {
      key: 'name',
      header: 'Study',
      isRowHeader: true,
      sort: sortBy('name', wish),
      cell: (entry) => (
        <Link href={addressOf(entry)} className="group inline-block min-h-6 min-w-40 py-1">
          <span className="font-mono font-semibold text-verdigris underline underline-offset-[0.18em]">
            {entry.study.shortName}
          </span>{' '}
          <span className="group-hover:underline">{entry.study.title}</span>
        </Link>
      ),
    },
    {
      key: 'state',
      header: 'State',
      sort: sortBy('state', wish),
      cell: ({ study }) => <Status tone={tones[study.state]}>{stateWords(study.state)}</Status>,
    },
    {
      key: 'deadline',
      header: 'Deadline',
      sort: sortBy('deadline', wish),
      cell: ({ study }) => {
        const due = showTime(study.deadline.dueAt, study.deadline.zone)
        return (
          <>
            <Time at={due.iso} text={due.text} zone={due.zoneText} />
            {study.state === 'open' && (
              <span className="block text-ink-soft">
                {study.deadline.dueAt <= now ? 'passed ' : ''}
                {showDistance(now, study.deadline.dueAt)}
              </span>
            )}
          </>
        )
      },
    },
    { key: 'as', header: 'You', cell: ({ as }) => <span className="whitespace-nowrap">{capacity[as]}</span> },
  ]
}

const capacity = {
  coordinator: 'as coordinator',
  laboratory: 'for a laboratory',
  committee: 'on the committee',
} as const

const tones: Record<StudyState, Tone> = {
  draft: 'quiet',
  open: 'going',
  closed: 'info',
  'in-review': 'info',
  published: 'done',
}

function addressOf({ study, as }: StudyListEntry): string {
  if (as === 'laboratory') return paths.participation(study.studyId)
  return as === 'committee' ? paths.committee(study.studyId) : paths.study(study.studyId)
}

function sortBy(column: StudySort, { state, text, sort, isReversed }: StudiesWish): Sort {
  const isCurrent = sort === column
  const query = new URLSearchParams({ ...(state ? { state } : {}), ...(text ? { q: text } : {}) })
  query.set('sort', isCurrent && !isReversed ? `-${column}` : column)
  return {
    href: `${paths.studies()}?${query}`,
    ...(isCurrent ? { direction: isReversed ? ('descending' as const) : ('ascending' as const) } : {}),
  }
}

function NoStudies({ mayCreate }: { mayCreate: boolean }) {
  if (!mayCreate)
    return (
      <EmptyState title="No study yet">
        You are not named in any. If a mail invited you, open its link: accepting it brings the study here.
      </EmptyState>
    )
  return (
    <EmptyState
      title="No study yet"
      action={<ButtonLink href={paths.newStudy()}>Open a new study</ButtonLink>}
    >
      Open one as a draft: its plan, its materials, its laboratories. Nobody is written to until you say so.
    </EmptyState>
  )
}

function NoMatch() {
  return (
    <EmptyState
      title="None of your studies is like that"
      action={<ButtonLink href={paths.studies()}>Show all</ButtonLink>}
    >
      Look for a part of its short name or title, or leave the state open.
    </EmptyState>
  )
}
