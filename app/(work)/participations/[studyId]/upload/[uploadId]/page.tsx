import type { Metadata } from 'next'
import { MarginNote } from '@/app/ui/layout/margin'
import { ButtonLink } from '@/app/ui/primitives/button'
import { DownloadLink } from '@/app/ui/primitives/download-link'
import { Notice } from '@/app/ui/primitives/notice'
import { previewUpload, type UploadPreview } from '@/lib/use-cases/returns/preview-upload'
import { paths } from '@/lib/web/paths'
import { requestContext, requireActor } from '@/lib/web/request-context'
import { LaboratoryPage } from '../../../laboratory-page'
import { orNotFound } from '@/lib/web/or-not-found'
import { participationPaths } from '../../../participation-paths'
import { ClosedNotice } from '../../closed-notice'
import { UploadResult } from './upload-result'
import { UploadWatch } from './upload-watch'

export const metadata: Metadata = { title: 'What was read' }

export default async function UploadedPage({
  params,
}: {
  params: Promise<{ studyId: string; uploadId: string }>
}) {
  const actor = await requireActor()
  const { studyId, uploadId } = await params
  const preview = await orNotFound(previewUpload(await requestContext(), { studyId, uploadId }))
  const { view, upload } = preview
  return (
    <LaboratoryPage
      actor={actor}
      view={view}
      title={titleOf(preview)}
      lead={upload.fileName}
      margin={<FileNote preview={preview} />}
    >
      <ClosedNotice view={view} />
      {(upload.stage === 'waiting' || upload.stage === 'reading') && (
        <UploadWatch
          address={participationPaths.uploadHandler(studyId, uploadId)}
          stage={upload.stage}
          places={view.places}
        />
      )}
      {upload.stage === 'refused' && (
        <>
          <Notice tone="danger" title={upload.refusal?.message ?? 'The file could not be read.'}>
            <p>Nothing of it was taken, and earlier returns stand as they are.</p>
          </Notice>
          <p>
            <ButtonLink variant="primary" href={paths.resultUpload(studyId)}>
              Send another file
            </ButtonLink>
          </p>
        </>
      )}
      {upload.check && <UploadResult preview={preview} check={upload.check} />}
    </LaboratoryPage>
  )
}

function titleOf({ upload, returned }: UploadPreview): string {
  if (returned) return 'This file was returned'
  if (upload.stage === 'refused') return 'The file cannot be taken'
  return upload.stage === 'checked' ? 'What was read from the file' : 'The file is being read'
}

function FileNote({ preview: { view, upload } }: { preview: UploadPreview }) {
  return (
    <MarginNote title="The file">
      <p>Kept as it came, for your laboratory alone.</p>
      <p>
        <DownloadLink
          href={participationPaths.fileHandler(view.studyId, upload.uploadId)}
          format={`${Math.ceil(upload.size / 1024)} kB`}
        >
          {upload.fileName}
        </DownloadLink>
      </p>
      <p className="break-all">SHA-256 {upload.sha256}</p>
    </MarginNote>
  )
}
