import { z } from 'zod'

const uuid = z.uuid()
const placeKeyed = z.record(z.string().max(200), z.string().max(200))

/** What the handlers of a participating laboratory take and give: they parse with these, and the document describes them. */
export const schemas = {
  studyParams: z.object({ studyId: uuid }),
  uploadParams: z.object({ studyId: uuid, uploadId: uuid }),

  /** PUT draft: every place by its key, as typed, faults and all. */
  draft: z.object({
    entries: placeKeyed,
    remark: z.string().max(2000),
    /** The version this page last saw; 0 when it saw none. */
    seenVersion: z.int().min(0),
  }),
  draftKept: z.object({ outcome: z.literal('kept'), version: z.int(), savedAt: z.iso.datetime() }),
  /** With status 409: what stands instead, for the person to choose. */
  draftChangedElsewhere: z.object({
    outcome: z.literal('changed-elsewhere'),
    version: z.int(),
    entries: placeKeyed,
    remark: z.string(),
  }),

  /** POST uploads: multipart, one field `file`, at most 5 MB. */
  uploadReceived: z.object({ uploadId: uuid, sha256: z.string() }),
  uploadState: z.object({
    uploadId: uuid,
    fileName: z.string(),
    size: z.int(),
    sha256: z.string(),
    stage: z.enum(['waiting', 'reading', 'checked', 'refused']),
    refusal: z.object({ code: z.string(), message: z.string() }).nullable(),
    counts: z.object({ values: z.int(), problems: z.int(), questions: z.int(), missing: z.int() }).nullable(),
  }),

  /** GET workbook: `filled=1` puts the draft, or else the last return, into it. */
  workbookQuery: z.object({ filled: z.literal('1').optional() }),
}
