import { Section } from '@/app/ui/layout/section'
import { ButtonLink } from '@/app/ui/primitives/button'
import { Notice } from '@/app/ui/primitives/notice'
import type { ReturnCheck } from '@/lib/spreadsheet/match-return'
import type { UploadPreview } from '@/lib/use-cases/returns/preview-upload'
import { paths } from '@/lib/web/paths'
import { ConfirmReturn } from '../../confirm-return'
import { submitUploadAction } from './actions'
import { PreviewTable } from './preview-table'
import { UploadProblems } from './upload-problems'
import { UploadQuestions } from './upload-questions'

interface UploadResultProps {
  preview: UploadPreview
  check: ReturnCheck
}

/** What was found in a file: first what keeps it from being taken, then what would be returned, then the button. */
export function UploadResult({ preview, check }: UploadResultProps) {
  const { view, upload, places, returned } = preview
  const { studyId } = view
  const isClean = check.problems.length === 0 && check.questions.length === 0
  const count = (state: string) => places.filter((place) => place.state === state).length
  return (
    <>
      {returned && (
        <Notice tone="done" title="These results are received">
          <a className="prose-link" href={paths.receipt(studyId, returned.number)}>
            See receipt {returned.receiptNumber}
          </a>
        </Notice>
      )}
      {!returned && isClean && (
        <Notice
          tone="info"
          title={`${check.values.length} of ${view.places} results were read. Nothing has been returned yet.`}
        >
          {view.receipts.length > 0 && (
            <p>
              Against receipt {view.receipts[0]?.receiptNumber}: {count('changed')} changed, {count('new')}{' '}
              new, {count('same')} the same.
            </p>
          )}
          {view.draft && (
            <p>There is a draft on the sheet too. Returning this file puts it in the draft’s place.</p>
          )}
        </Notice>
      )}
      <UploadProblems problems={check.problems} />
      <UploadQuestions studyId={studyId} uploadId={upload.uploadId} questions={check.questions} />
      {check.notices.length > 0 && (
        <Notice tone="info" title="Not read, because it is not part of what is asked">
          <ul className="list-disc pl-5">
            {check.notices.map((notice) => (
              <li key={notice}>{notice}</li>
            ))}
          </ul>
        </Notice>
      )}
      {check.missing.length > 0 && isClean && (
        <Notice
          tone="warn"
          title={
            check.missing.length === 1
              ? 'One result is missing; say why in the remark below'
              : `${check.missing.length} results are missing; say why in the remark below`
          }
        />
      )}
      <Section
        title="Place by place"
        note="As the sheet has them, with what was read from the file beside each."
      >
        <PreviewTable layout={view.layout} places={places} hasEarlier={view.receipts.length > 0} />
      </Section>
      {!returned && isClean && (
        <ConfirmReturn
          fields={{ studyId, uploadId: upload.uploadId }}
          remark=""
          missing={check.missing.length}
          canReturn={view.canReturn}
          back={{ href: paths.participation(studyId), words: 'Leave it, return nothing' }}
          action={submitUploadAction}
        />
      )}
      {!isClean && (
        <p>
          <ButtonLink variant="primary" href={paths.resultUpload(studyId)}>
            Send the mended file
          </ButtonLink>
        </p>
      )}
    </>
  )
}
