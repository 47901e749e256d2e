import { ButtonLink } from '@/app/ui/primitives/button'
import { DownloadLink } from '@/app/ui/primitives/download-link'
import { Progress } from '@/app/ui/primitives/progress'
import { showTime } from '@/lib/domain/show-time'
import type { ParticipationView } from '@/lib/use-cases/returns/read-participation'
import { paths } from '@/lib/web/paths'
import { participationPaths } from '../participation-paths'

/** The one thing to do now, what has been begun of it, and the two other ways to the same end. */
export function NextStep({ view }: { view: ParticipationView }) {
  const { studyId, draft, places, receipts } = view
  const filled = Object.values(draft?.entries ?? {}).filter((text) => text.trim() !== '').length
  return (
    <div className="flex flex-col gap-4 border bg-sheet px-5 py-5">
      {draft && (
        <div className="max-w-text">
          <Progress label={sayDraft(view)} done={filled} total={places} of="results" />
        </div>
      )}
      <p>
        <ButtonLink variant="primary" href={paths.resultSheet(studyId)} className="min-h-11 px-5">
          {draft
            ? 'Go on with the sheet'
            : receipts.length > 0
              ? 'Replace the return on the sheet'
              : 'Fill in the sheet'}
        </ButtonLink>
      </p>
      <div className="flex flex-wrap items-center gap-x-6 gap-y-2 text-small">
        <span className="text-ink-soft">Or work in a workbook:</span>
        <DownloadLink href={participationPaths.workbookHandler(studyId)} format="XLSX">
          Download it empty
        </DownloadLink>
        {(draft || receipts.length > 0) && (
          <DownloadLink href={participationPaths.filledWorkbookHandler(studyId)} format="XLSX">
            Download it as filled so far
          </DownloadLink>
        )}
        <a href={paths.resultUpload(studyId)} className="prose-link inline-flex min-h-6 items-center">
          Send a filled workbook
        </a>
      </div>
    </div>
  )
}

function sayDraft({ draft, zone }: ParticipationView): string {
  return draft ? `Draft kept ${showTime(draft.savedAt, zone).text}. Not submitted yet.` : ''
}
