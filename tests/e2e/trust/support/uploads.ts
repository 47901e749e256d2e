import { expect } from '@playwright/test'
import { fromOurPage, send, type Answer } from './send'

interface File {
  readonly name: string
  readonly bytes: Buffer
}

interface Place {
  readonly studyId: string
  readonly cookie: string
}

export interface UploadState {
  readonly stage: 'waiting' | 'reading' | 'checked' | 'refused'
  readonly sha256: string
  readonly refusal: { code: string; message: string } | null
  readonly counts: { values: number; problems: number; questions: number } | null
}

/** Sends a file to the real address for files, as the page's form does. */
export function sendFile(
  { studyId, cookie }: Place,
  { name, bytes }: File,
  accept = 'application/json',
): Promise<Answer> {
  const boundary = 'a-boundary-of-the-tests'
  const head = `--${boundary}\r\nContent-Disposition: form-data; name="file"; filename="${name}"\r\nContent-Type: application/octet-stream\r\n\r\n`
  return send({
    method: 'POST',
    path: `/api/participations/${studyId}/uploads`,
    cookie,
    headers: { ...fromOurPage, accept, 'content-type': `multipart/form-data; boundary=${boundary}` },
    body: Buffer.concat([Buffer.from(head), bytes, Buffer.from(`\r\n--${boundary}--\r\n`)]),
  })
}

/** Sends a file and waits until it was read through. */
export async function uploadAndWait(place: Place, file: File): Promise<UploadState & { uploadId: string }> {
  const { status, text } = await sendFile(place, file)
  expect(status, text).toBe(200)
  const { uploadId } = JSON.parse(text) as { uploadId: string }
  const state = () => readState(place, uploadId)
  await expect
    .poll(async () => (await state()).stage, { timeout: 45_000, intervals: [200] })
    .toMatch(/checked|refused/)
  return { uploadId, ...(await state()) }
}

async function readState({ studyId, cookie }: Place, uploadId: string): Promise<UploadState> {
  const { text } = await send({ path: `/api/participations/${studyId}/uploads/${uploadId}`, cookie })
  return JSON.parse(text) as UploadState
}
