import { paths } from '@/lib/web/paths'

/** Addresses that only the pages of a participating laboratory lead to. */
export const participationPaths = {
  check: (studyId: string) => `${paths.resultSheet(studyId)}/check`,
  sheetWithProblems: (studyId: string) => `${paths.resultSheet(studyId)}?look=problems`,
  upload: (studyId: string, uploadId: string) => `${paths.resultUpload(studyId)}/${uploadId}`,
  uploadRefused: (studyId: string, code: string) =>
    `${paths.resultUpload(studyId)}?problem=${encodeURIComponent(code)}`,
  draftHandler: (studyId: string) => `/api/participations/${studyId}/draft`,
  uploadsHandler: (studyId: string) => `/api/participations/${studyId}/uploads`,
  uploadHandler: (studyId: string, uploadId: string) => `/api/participations/${studyId}/uploads/${uploadId}`,
  fileHandler: (studyId: string, uploadId: string) =>
    `/api/participations/${studyId}/uploads/${uploadId}/file`,
  workbookHandler: (studyId: string) => `/api/participations/${studyId}/workbook`,
  filledWorkbookHandler: (studyId: string) => `/api/participations/${studyId}/workbook?filled=1`,
} as const
