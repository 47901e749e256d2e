import { listReportedTexts, type ReceiptRecord } from '@/db/queries/returns'
import type { Context } from '@/lib/context'
import { readReportedValue } from '@/lib/domain/reported-value'
import { listPlaces, placeKey, type Place } from '@/lib/spreadsheet/layout'
import { readParticipation, type ParticipationView } from './read-participation'
import { readUpload, type UploadView } from './read-upload'

export type PreviewState = 'new' | 'changed' | 'same' | 'missing' | 'faulty'

export interface PreviewedPlace {
  readonly place: Place
  readonly key: string
  readonly state: PreviewState
  /** As read from the file; empty where nothing was. */
  readonly text: string
  readonly cell: string | null
  /** As the last return has it. */
  readonly before: string | null
}

export interface UploadPreview {
  readonly view: ParticipationView
  readonly upload: UploadView
  readonly places: readonly PreviewedPlace[]
  /** The return that already came of this file. */
  readonly returned: ReceiptRecord | null
}

/** An uploaded file beside what is asked and what was returned before; nothing of it counts until it is confirmed. */
export async function previewUpload(
  context: Context,
  { studyId, uploadId }: { studyId: string; uploadId: string },
): Promise<UploadPreview> {
  const [view, upload] = await Promise.all([
    readParticipation(context, { studyId }),
    readUpload(context, { studyId, uploadId }),
  ])
  const returned = view.receipts.find((receipt) => receipt.uploadId === uploadId) ?? null
  if (!upload.check) return { view, upload, places: [], returned }
  const last = view.receipts[0]
  const rows = last ? await listReportedTexts(context.db, { studyId, returnId: last.returnId }) : []
  const before = new Map(rows.map((row) => [placeKey(row), row.text]))
  const values = new Map(upload.check.values.map((value) => [value.key, value]))
  const missing = new Set(upload.check.missing)
  const places = listPlaces(view.layout).map((place): PreviewedPlace => {
    const key = placeKey(place)
    const value = values.get(key)
    const earlier = before.get(key) ?? null
    const state = value ? compare(value.text, earlier) : missing.has(key) ? 'missing' : 'faulty'
    return { place, key, state, text: value?.text ?? '', cell: value?.cell ?? null, before: earlier }
  })
  return { view, upload, places, returned }
}

/** By what is read, digits included, so that a comma in place of a point is no change and 1.10 in place of 1.1 is. */
function compare(text: string, earlier: string | null): PreviewState {
  if (earlier === null) return 'new'
  return JSON.stringify(plain(text)) === JSON.stringify(plain(earlier)) ? 'same' : 'changed'
}

function plain(text: string) {
  const read = readReportedValue(text)
  if (read.kind === 'number') return [read.decimal]
  return read.kind === 'censored' ? [read.mark, read.decimal] : [text]
}
