import { DataTable } from '@/app/ui/primitives/data-table'
import { Figure } from '@/app/ui/primitives/figure'
import { mostDecimals } from '@/app/ui/primitives/most-decimals'
import { Status } from '@/app/ui/primitives/status'
import type { Tone } from '@/app/ui/primitives/tone'
import { readReportedValue } from '@/lib/domain/reported-value'
import type { ReturnLayout } from '@/lib/spreadsheet/layout'
import type { PreviewedPlace, PreviewState } from '@/lib/use-cases/returns/preview-upload'
import { namePlace } from '../../../name-place'

interface PreviewTableProps {
  layout: ReturnLayout
  places: readonly PreviewedPlace[]
  hasEarlier: boolean
}

const states: Record<PreviewState, { tone: Tone; words: string }> = {
  new: { tone: 'going', words: 'new' },
  changed: { tone: 'warn', words: 'changed' },
  same: { tone: 'done', words: 'same as returned' },
  missing: { tone: 'quiet', words: 'no result' },
  faulty: { tone: 'danger', words: 'see above' },
}

/** Every place that is asked, in the order of the sheet, and what the file holds for it. */
export function PreviewTable({ layout, places, hasEarlier }: PreviewTableProps) {
  const read = mostDecimals(places.map(({ text }) => readAs(text)))
  const earlier = mostDecimals(places.map(({ before }) => readAs(before ?? '')))
  return (
    <DataTable
      caption="What was read for each place"
      isCaptionHidden
      rows={places}
      rowKey={({ key }) => key}
      isMarked={({ state }) => state === 'changed'}
      columns={[
        { key: 'place', header: 'Place', isRowHeader: true, cell: ({ place }) => namePlace(layout, place) },
        {
          key: 'read',
          header: 'Read',
          kind: 'figure',
          cell: ({ text }) => <Reported text={text} alignTo={read} />,
        },
        ...(hasEarlier
          ? [
              {
                key: 'before',
                header: 'Returned before',
                kind: 'figure' as const,
                cell: ({ before }: PreviewedPlace) => <Reported text={before ?? ''} alignTo={earlier} />,
              },
            ]
          : []),
        {
          key: 'state',
          header: 'State',
          cell: ({ state }) => <Status tone={states[state].tone}>{states[state].words}</Status>,
        },
        { key: 'cell', header: 'Cell', cell: ({ cell }) => <span className="font-mono">{cell ?? ''}</span> },
      ]}
    />
  )
}

function Reported({ text, alignTo }: { text: string; alignTo: number }) {
  if (text === '') return <span className="font-sans text-ink-soft">–</span>
  return <Figure value={readAs(text)} alignTo={alignTo} />
}

function readAs(text: string): string {
  const read = readReportedValue(text)
  return read.kind === 'number' ? read.decimal : read.kind === 'censored' ? read.mark + read.decimal : text
}
