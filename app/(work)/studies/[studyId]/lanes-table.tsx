'use client'

import { DataTable, type Column } from '@/app/ui/primitives/data-table'
import { EmptyState } from '@/app/ui/primitives/empty-state'
import type { Sort } from '@/app/ui/primitives/sortable-header'
import { Status } from '@/app/ui/primitives/status'
import { Tag } from '@/app/ui/primitives/tag'
import { Time } from '@/app/ui/primitives/time'
import type { LaneAnswer, ReturnsAnswer } from '@/app/api/studies/[studyId]/returns/schema'
import { arrangeLanes, valuesOf, type LaneSort, type LanesWish } from '@/lib/domain/arrange-lanes'
import { describeLane } from '@/lib/domain/describe-lane'
import { showDay, showTime } from '@/lib/domain/show-time'

interface LanesTableProps {
  round: ReturnsAnswer
  wish: LanesWish
  /** Addresses that sort, by column; without them the order is fixed. */
  sorts?: Readonly<Record<LaneSort, Sort>>
}

/** The whole round at once: one row a laboratory, by its code, one column a stage. */
export function LanesTable({ round, wish, sorts }: LanesTableProps) {
  return (
    <DataTable
      caption="The round, laboratory by laboratory"
      isCaptionHidden
      columns={columns(round).map((column) => ({ ...column, sort: sorts?.[column.key as LaneSort] }))}
      rows={arrangeLanes(round.lanes, wish)}
      rowKey={({ code }) => code}
      empty={
        <EmptyState
          title={round.lanes.length === 0 ? 'No laboratory has accepted yet' : 'No laboratory stands there'}
        >
          {round.lanes.length === 0
            ? 'A lane appears here when a laboratory accepts its invitation and draws its code.'
            : 'Choose another state to see the others.'}
        </EmptyState>
      }
    />
  )
}

function columns(round: ReturnsAnswer): Column<LaneAnswer>[] {
  const { zone, places } = round
  return [
    {
      key: 'code',
      header: 'Laboratory',
      isRowHeader: true,
      cell: (lane) => (
        <>
          <Tag code={lane.code} label="Laboratory" />
          {/* On a narrow screen the column of states lies beyond the edge. */}
          <span aria-hidden="true" className="mt-0.5 block min-w-32 sm:hidden">
            <LaneStatus lane={lane} round={round} />
          </span>
        </>
      ),
    },
    { key: 'accepted', header: 'Accepted', cell: ({ acceptedAt }) => <Day at={acceptedAt} zone={zone} /> },
    { key: 'draft', header: 'Draft', cell: ({ draftSavedAt }) => <Day at={draftSavedAt} zone={zone} /> },
    {
      key: 'returned',
      header: 'Returned',
      cell: ({ returnedAt }) =>
        returnedAt ? <Time at={returnedAt} text={showTime(returnedAt, zone).text} /> : <Nothing />,
    },
    {
      key: 'values',
      header: 'Values',
      kind: 'figure',
      cell: (lane) => `${valuesOf(lane)} / ${places}`,
    },
    {
      key: 'state',
      header: 'State',
      cell: (lane) => <LaneStatus lane={lane} round={round} />,
    },
  ]
}

function LaneStatus({ lane, round }: { lane: LaneAnswer; round: ReturnsAnswer }) {
  const { tone, words } = describeLane(lane, round)
  return <Status tone={tone}>{words}</Status>
}

function Day({ at, zone }: { at: string | null; zone: string }) {
  return at ? <Time at={at} text={showDay(at, zone)} /> : <Nothing />
}

function Nothing() {
  return (
    <span className="text-ink-soft">
      <span aria-hidden="true">–</span>
      <span className="sr-only">not yet</span>
    </span>
  )
}
