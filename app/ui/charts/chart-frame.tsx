import type { ReactNode } from 'react'
import { DownloadLink } from '../primitives/download-link'
import { DrawingDownload } from './drawing-download'

interface ChartFrameProps {
  title: ReactNode
  /** What the plot shows, in one or two sentences; it stands for the plot where it cannot be seen. */
  summary: ReactNode
  children: ReactNode
  /** The same figures as a table; folded, but always there. */
  table: ReactNode
  /** Address of the figures as CSV. */
  csv?: string
  /** The id given to the plot, for the downloads of the drawing. */
  svgId: string
  level?: 2 | 3
}

/** A plot with its heading, its summary, its table and its downloads. */
export function ChartFrame({ title, summary, children, table, csv, svgId, level = 2 }: ChartFrameProps) {
  const Heading = level === 2 ? 'h2' : 'h3'
  return (
    <figure className="min-w-0">
      <figcaption className="mb-2.5">
        <Heading className="font-heading text-lead font-bold">{title}</Heading>
        <p className="max-w-text text-small text-ink-soft">{summary}</p>
      </figcaption>
      <div className="border bg-sheet">{children}</div>
      <div className="mt-1.5 flex flex-wrap items-start justify-between gap-x-6 gap-y-1 text-small">
        <details data-table className="min-w-0 max-w-full grow basis-80">
          <summary className="min-h-6 w-fit text-verdigris underline underline-offset-[0.18em]">
            The figures as a table
          </summary>
          <div className="mt-2">{table}</div>
        </details>
        <div className="flex flex-wrap gap-x-4" data-screen-only>
          {csv && <DownloadLink href={csv}>CSV</DownloadLink>}
          <DrawingDownload svgId={svgId} />
        </div>
      </div>
    </figure>
  )
}
