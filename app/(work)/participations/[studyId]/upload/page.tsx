import type { Metadata } from 'next'
import { MarginNote } from '@/app/ui/layout/margin'
import { DownloadLink } from '@/app/ui/primitives/download-link'
import { readParticipation } from '@/lib/use-cases/returns/read-participation'
import { paths } from '@/lib/web/paths'
import { requestContext, requireActor } from '@/lib/web/request-context'
import { LaboratoryPage } from '../../laboratory-page'
import { orNotFound } from '@/lib/web/or-not-found'
import { participationPaths } from '../../participation-paths'
import { ClosedNotice } from '../closed-notice'
import { uploadProblem } from './upload-problem'
import { UploadForm } from './upload-form'

export const metadata: Metadata = { title: 'Send a workbook' }

interface PageProps {
  params: Promise<{ studyId: string }>
  searchParams: Promise<{ problem?: string }>
}

export default async function UploadPage({ params, searchParams }: PageProps) {
  const actor = await requireActor()
  const { studyId } = await params
  const { problem } = await searchParams
  const view = await orNotFound(readParticipation(await requestContext(), { studyId }))
  return (
    <LaboratoryPage
      actor={actor}
      view={view}
      title="Send a workbook"
      lead="The file is read and shown to you first. Nothing in it counts as a result until you confirm."
      margin={
        <MarginNote title="The workbook of this study">
          <p>
            It has a place for each of the {view.places} results. Your own table will do too, if it has the
            same titles.
          </p>
          <p>
            <DownloadLink href={participationPaths.workbookHandler(studyId)} format="XLSX">
              Download it empty
            </DownloadLink>
          </p>
          {view.canReturn && (
            <p>
              Or <a href={paths.resultSheet(studyId)}>fill in the sheet on screen</a>.
            </p>
          )}
        </MarginNote>
      }
    >
      <ClosedNotice view={view} />
      {view.canReturn && (
        <UploadForm action={participationPaths.uploadsHandler(studyId)} problem={uploadProblem(problem)} />
      )}
    </LaboratoryPage>
  )
}
