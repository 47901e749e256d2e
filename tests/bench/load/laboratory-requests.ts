import { setTimeout as pause } from 'node:timers/promises'
import { participationPaths } from '@/app/(work)/participations/participation-paths'
import { paths } from '@/lib/web/paths'
import type { Arrival, ArrivalKind } from './deadline-arrivals'
import { timeOutMs, type Latencies } from './latencies'
import { askTimed, type Asking, type TimedAnswer } from './timed-request'

export const seriesNames = [
  'sheet, first byte',
  'sheet, whole',
  'draft kept',
  'check page',
  'submit, acknowledged',
  'receipt page',
  'submit, receipt drawn',
  'file taken',
  'file to preview',
] as const
export type Series = (typeof seriesNames)[number]

/** A contact of a laboratory at the sheet, with what the page in front of that person would know. */
export interface Sitter {
  readonly cookie: string
  /** As typed, by the key of each place. */
  readonly entries: Record<string, string>
  draftVersion: number
  /** What the check page offers to return; null before it was looked at. */
  checked: Readonly<Record<'submissionKey' | 'checked', string>> | null
  /** One request that writes at a time, as the page does it. */
  turn: Promise<void>
}

interface Desk {
  readonly base: string
  readonly studyId: string
  readonly submitActionId: string
  readonly sitters: readonly Sitter[]
  readonly files: readonly Buffer[]
  readonly latencies: Latencies<Series>
}

interface Acting {
  readonly sitter: Sitter
  readonly plannedMs: number
  readonly laboratory: number
}

type Fields = Readonly<Record<string, string>>

/** Not what was hoped for: counted among the errors under these words. */
class Failed extends Error {}

/** What each arrival asks of the product: the very requests that its pages send. */
export function createLaboratoryRequests(desk: Desk): (arrival: Arrival, plannedMs: number) => Promise<void> {
  const { studyId, latencies } = desk
  const acts: Record<ArrivalKind, (acting: Acting) => Promise<void>> = {
    sheet: (acting) => openSheet(desk, acting),
    draft: (acting) => inTurn(acting, () => keepDraft(desk, acting)),
    check: (acting) => inTurn(acting, () => openCheck(desk, acting)),
    submit: (acting) => inTurn(acting, () => submit(desk, acting)),
    upload: (acting) => upload(desk, acting),
  }
  return async ({ kind, laboratory }, plannedMs) => {
    const sitter = desk.sitters[laboratory]
    if (!sitter) throw new RangeError(`The study ${studyId} has no laboratory ${laboratory}.`)
    try {
      await acts[kind]({ sitter, plannedMs, laboratory })
    } catch (failure) {
      for (const series of seriesAtEnd(kind, laboratory)) latencies.fail(series, wordsOf(failure))
    }
  }
}

/** Where an arrival that failed is counted: once, and where its success would have been. */
function seriesAtEnd(kind: ArrivalKind, laboratory: number): Series[] {
  switch (kind) {
    case 'sheet':
      return ['sheet, first byte', 'sheet, whole']
    case 'draft':
      return ['draft kept']
    case 'check':
      return ['check page']
    case 'submit':
      return [isByScript(laboratory) ? 'submit, receipt drawn' : 'submit, acknowledged']
    case 'upload':
      return ['file to preview']
  }
}

async function inTurn({ sitter }: Acting, act: () => Promise<void>): Promise<void> {
  const mine = sitter.turn.then(act)
  sitter.turn = mine.catch(() => undefined)
  await mine
}

async function openSheet({ base, studyId, latencies }: Desk, { sitter: { cookie }, plannedMs }: Acting) {
  const answer = await ask({ base, cookie, path: paths.resultSheet(studyId) }, 200)
  latencies.add('sheet, first byte', answer.firstByteMs - plannedMs)
  latencies.add('sheet, whole', answer.lastByteMs - plannedMs)
}

async function keepDraft({ base, studyId, latencies }: Desk, { sitter, plannedMs }: Acting) {
  changeOneEntry(sitter.entries, plannedMs)
  const answer = await ask(
    {
      base,
      cookie: sitter.cookie,
      method: 'PUT',
      path: participationPaths.draftHandler(studyId),
      headers: { 'content-type': 'application/json' },
      body: JSON.stringify({ entries: sitter.entries, remark: '', seenVersion: sitter.draftVersion }),
    },
    200,
  )
  latencies.add('draft kept', answer.lastByteMs - plannedMs)
  sitter.draftVersion = (JSON.parse(answer.text()) as { version: number }).version
}

/** As somebody typing does: each save differs from the one before, so that none is for nothing. */
function changeOneEntry(entries: Record<string, string>, plannedMs: number): void {
  const keys = Object.keys(entries)
  const key = keys[Math.floor(plannedMs) % keys.length] ?? ''
  entries[key] = (Number(entries[key]) + 0.1).toFixed(1)
}

async function openCheck({ base, studyId, latencies }: Desk, { sitter, plannedMs }: Acting) {
  sitter.checked = null
  const answer = await ask({ base, cookie: sitter.cookie, path: participationPaths.check(studyId) }, 200)
  latencies.add('check page', answer.lastByteMs - plannedMs)
  const page = answer.text()
  sitter.checked = {
    submissionKey: hiddenField(page, 'submissionKey'),
    checked: hiddenField(page, 'checked'),
  }
}

function hiddenField(page: string, name: string): string {
  const value = new RegExp(`<input type="hidden" name="${name}" value="([^"]*)"`).exec(page)?.[1]
  if (value === undefined) throw new Failed(`the check page has no field ${name}`)
  const signs: Record<string, string> = { quot: '"', '#x27': "'", lt: '<', gt: '>', amp: '&' }
  return value.replaceAll(/&(quot|#x27|lt|gt|amp);/g, (found, sign: string) => signs[sign] ?? found)
}

/**
 * Returns what the check page showed. Every second laboratory does it as the page's script does, which draws the receipt
 * from the same answer; the others as a page without scripts, which is led to the receipt once the return is stored.
 */
async function submit(desk: Desk, { sitter, plannedMs, laboratory }: Acting) {
  const { studyId, latencies } = desk
  if (!sitter.checked) throw new Failed('the check page had not come')
  const fields = { studyId, ...sitter.checked, remark: '' }
  const byScript = isByScript(laboratory)
  const answer = await (byScript ? postByScript : postPlainly)(desk, sitter, fields)
  const [receipt] = String(answer.headers['x-action-redirect'] ?? answer.headers.location ?? '').split(';')
  if (!receipt?.includes('/receipts/')) throw new Failed('the answer leads to no receipt')
  latencies.add(byScript ? 'submit, receipt drawn' : 'submit, acknowledged', answer.lastByteMs - plannedMs)
  sitter.draftVersion = 0
  sitter.checked = null
  if (!byScript) await openReceipt(desk, sitter, receipt)
}

function isByScript(laboratory: number): boolean {
  return laboratory % 2 === 1
}

function postByScript({ base, studyId, submitActionId }: Desk, { cookie }: Sitter, fields: Fields) {
  const { headers, body } = multipart([
    ...Object.entries(fields).map(([name, value]) => [`_1_${name}`, value] as const),
    ['0', `[${untouched},"$K1"]`],
  ])
  return askTimed({
    base,
    cookie,
    method: 'POST',
    path: participationPaths.check(studyId),
    headers: { ...headers, 'next-action': submitActionId, accept: 'text/x-component' },
    body,
  })
}

function postPlainly({ base, studyId, submitActionId }: Desk, { cookie }: Sitter, fields: Fields) {
  const form = multipart([
    ['$ACTION_REF_1', ''],
    ['$ACTION_1:0', JSON.stringify({ id: submitActionId, bound: '$@1' })],
    ['$ACTION_1:1', `[${untouched}]`],
    ['$ACTION_KEY', 'k1'],
    ...Object.entries(fields),
  ])
  return askTimed({ base, cookie, method: 'POST', path: participationPaths.check(studyId), ...form })
}

/** The state of a form that was not sent before. */
const untouched = '{"errors":{},"values":{}}'

/** Nobody can ask for a receipt before its number came: this one counts from when it can be asked for. */
async function openReceipt({ base, latencies }: Desk, { cookie }: Sitter, path: string) {
  const askedMs = performance.now()
  try {
    latencies.add('receipt page', (await ask({ base, cookie, path }, 200)).lastByteMs - askedMs)
  } catch (failure) {
    latencies.fail('receipt page', wordsOf(failure))
  }
}

/** How often the preview looks whether a file was read. */
const lookEveryMs = 1200

/** Sends a file as the form does, and follows the preview as the page does until it shows what was read. */
async function upload(desk: Desk, { sitter: { cookie }, plannedMs, laboratory }: Acting) {
  const { base, studyId, files, latencies } = desk
  const form = multipart([], files[laboratory % files.length])
  const path = participationPaths.uploadsHandler(studyId)
  const taken = await ask({ base, cookie, method: 'POST', path, ...form }, 303)
  const preview = taken.headers.location ?? ''
  const uploadId = preview.split('/').at(-1) ?? ''
  if (!/^[0-9a-f-]{36}$/.test(uploadId)) throw new Failed('the file was not taken')
  latencies.add('file taken', taken.lastByteMs - plannedMs)
  let shown = await ask({ base, cookie, path: preview }, 200)
  if (!shown.text().includes('What was read from the file')) {
    await untilRead({ base, cookie, path: participationPaths.uploadHandler(studyId, uploadId) }, plannedMs)
    shown = await ask({ base, cookie, path: preview }, 200)
  }
  latencies.add('file to preview', shown.lastByteMs - plannedMs)
}

async function untilRead(asking: Asking, plannedMs: number): Promise<void> {
  for (;;) {
    await pause(lookEveryMs)
    const { stage } = JSON.parse((await ask(asking, 200)).text()) as { stage: string }
    if (stage === 'checked') return
    if (stage === 'refused') throw new Failed('the file was refused')
    if (performance.now() - plannedMs > timeOutMs) throw new Failed('timed out')
  }
}

async function ask(asking: Asking, status: number): Promise<TimedAnswer> {
  const answer = await askTimed(asking)
  if (answer.status !== status) throw new Failed(`status ${answer.status}`)
  return answer
}

function multipart(parts: readonly (readonly [string, string])[], file?: Buffer) {
  const boundary = 'a-boundary-of-the-bench'
  const texts = parts.map(
    ([name, value]) => `--${boundary}\r\nContent-Disposition: form-data; name="${name}"\r\n\r\n${value}\r\n`,
  )
  const head = `--${boundary}\r\nContent-Disposition: form-data; name="file"; filename="results.xlsx"\r\nContent-Type: application/octet-stream\r\n\r\n`
  const sent = file ? [Buffer.from(head), file, Buffer.from('\r\n')] : []
  return {
    headers: { 'content-type': `multipart/form-data; boundary=${boundary}` },
    body: Buffer.concat([Buffer.from(texts.join('')), ...sent, Buffer.from(`--${boundary}--\r\n`)]),
  }
}

function wordsOf(failure: unknown): string {
  if (failure instanceof Failed) return failure.message
  if (!(failure instanceof Error)) return 'unknown'
  if (failure.name === 'TimeoutError' || failure.name === 'AbortError') return 'timed out'
  return 'code' in failure ? String(failure.code) : failure.message
}
