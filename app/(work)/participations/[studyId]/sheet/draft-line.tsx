import type { DraftStatus } from './sheet-store'
import { paths } from '@/lib/web/paths'

interface DraftLineProps {
  draft: DraftStatus
  settled: DraftStatus
  zone: string
  /** Until when, in words; the margin says it too where there is one beside the sheet. */
  due: string
  studyId: string
}

/** One line on where the draft stands. Said aloud once a save, and not while one is under way. */
export function DraftLine({ draft, settled, zone, due, studyId }: DraftLineProps) {
  return (
    <div className="text-small text-ink-soft">
      <p aria-hidden="true">{sayDraft(draft, zone)}</p>
      <p role="status" className="sr-only">
        {sayDraft(settled, zone)}
      </p>
      <p className="margin:hidden">{due}</p>
      {draft.kind === 'signed-out' && (
        <p className="mt-1">
          <a
            className="prose-link"
            href={paths.signIn(paths.resultSheet(studyId))}
            target="_blank"
            rel="noopener"
          >
            Sign in again in a second tab
          </a>
          , then go on here.
        </p>
      )}
    </div>
  )
}

export function sayDraft(draft: DraftStatus, zone: string): string {
  switch (draft.kind) {
    case 'untouched':
      return 'Nothing entered since this page was opened. What you type is kept by itself.'
    case 'changed':
    case 'keeping':
      return 'Keeping the draft…'
    case 'kept':
      return `Draft kept ${clockTime(draft.savedAt, zone)}. Not submitted yet.`
    case 'unreachable':
      return 'The server cannot be reached. What you typed is kept in this tab, and sent as soon as it answers.'
    case 'signed-out':
      return 'You have been signed out. What you typed is kept in this tab.'
    case 'refused':
      return `The draft was not kept: ${draft.message}`
    case 'changed-elsewhere':
      return 'The draft was changed on another page. Choose above which to keep.'
  }
}

function clockTime(instant: string, zone: string): string {
  return new Intl.DateTimeFormat('en-GB', { hour: '2-digit', minute: '2-digit', timeZone: zone }).format(
    new Date(instant),
  )
}
