import { setTimeout as pause } from 'node:timers/promises'
import { participationPaths } from '@/app/(work)/participations/participation-paths'
import { paths } from '@/lib/web/paths'
import type { Arrival, ArrivalKind } from './deadline-arrivals'
import { timeOutMs, type Latencies } from './latencies'
import { askTimed, type Asking, type TimedAnswer } from './timed-request'

export const seriesNames = {
  'sheet, first byte': 'sheet',
  'sheet, whole': 'sheet',
  'draft kept': 'draft',
  'check page': 'check',
  'submit, receipt shown': 'submit',
  'receipt page': 'submit',
  'file taken': 'upload',
  'file to preview': 'upload',
} as const satisfies Record<string, ArrivalKind>
export type Series = keyof typeof seriesNames

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

/** Not what was hoped for: counted among the errors under these words. */
class Failed extends Error {}

/** What each arrival asks of the product: the very requests that its pages send. */
export function createLaboratoryRequests(desk: Desk): (arrival: Arrival, plannedMs: number) => Promise<void> {
  const { studyId, latencies } = desk
  const acts: Record<ArrivalKind, (sitter: Sitter, plannedMs: number, laboratory: number) => Promise<void>> =
    {
      sheet: (sitter, plannedMs) => openSheet(desk, sitter, plannedMs),
      draft: (sitter, plannedMs) => inTurn(sitter, () => keepDraft(desk, sitter, plannedMs)),
      check: (sitter, plannedMs) => inTurn(sitter, () => openCheck(desk, sitter, plannedMs)),
      submit: (sitter, plannedMs) => inTurn(sitter, () => submit(desk, sitter, plannedMs)),
      upload: (sitter, plannedMs, laboratory) => upload(desk, { sitter, plannedMs, laboratory }),
    }
  return async ({ kind, laboratory }, plannedMs) => {
    const sitter = desk.sitters[laboratory]
    if (!sitter) throw new RangeError(`The study ${studyId} has no laboratory ${laboratory}.`)
    try {
      await acts[kind](sitter, plannedMs, laboratory)
    } catch (failure) {
      for (const series of unfinished(kind)) latencies.fail(series, wordsOf(failure))
    }
  }
}

/** A failed arrival counts once, in the series that its end would have gone to. */
function unfinished(kind: ArrivalKind): Series[] {
  const last: Record<ArrivalKind, Series> = {
    sheet: 'sheet, whole',
    draft: 'draft kept',
    check: 'check page',
    submit: 'submit, receipt shown',
    upload: 'file to preview',
  }
  return kind === 'sheet' ? ['sheet, first byte', last.sheet] : [last[kind]]
}

async function inTurn(sitter: Sitter, act: () => Promise<void>): Promise<void> {
  const mine = sitter.turn.then(act)
  sitter.turn = mine.catch(() => undefined)
  await mine
}

async function openSheet({ base, studyId, latencies }: Desk, { cookie }: Sitter, plannedMs: number) {
  const answer = await ask({ base, cookie, path: paths.resultSheet(studyId) }, 200)
  latencies.add('sheet, first byte', answer.firstByteMs - plannedMs)
  latencies.add('sheet, whole', answer.lastByteMs - plannedMs)
}

async function keepDraft({ base, studyId, latencies }: Desk, sitter: Sitter, plannedMs: number) {
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

async function openCheck({ base, studyId, latencies }: Desk, sitter: Sitter, plannedMs: number) {
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

/** Returns what the check page showed, by the page's own action, and opens the receipt to which that leads. */
async function submit(desk: Desk, sitter: Sitter, plannedMs: number) {
  const { base, studyId, submitActionId, latencies } = desk
  if (!sitter.checked) throw new Failed('the check page had not come')
  const fields = { studyId, ...sitter.checked, remark: '' }
  const form = multipart([
    ...Object.entries(fields).map(([name, value]) => [`_1_${name}`, value] as const),
    ['0', '[{"errors":{},"values":{}},"$K1"]'],
  ])
  const answer = await ask(
    {
      base,
      cookie: sitter.cookie,
      method: 'POST',
      path: participationPaths.check(studyId),
      headers: { ...form.headers, 'next-action': submitActionId, accept: 'text/x-component' },
      body: form.body,
    },
    303,
  )
  const [receipt] = String(answer.headers['x-action-redirect'] ?? '').split(';')
  if (!receipt?.includes('/receipts/')) throw new Failed('the answer leads to no receipt')
  latencies.add('submit, receipt shown', answer.lastByteMs - plannedMs)
  sitter.draftVersion = 0
  sitter.checked = null
  // Nobody can ask for a receipt before its number came: this one counts from when it can be asked for.
  const askedMs = performance.now()
  try {
    const shown = await ask({ base, cookie: sitter.cookie, path: receipt }, 200)
    latencies.add('receipt page', shown.lastByteMs - askedMs)
  } catch (failure) {
    latencies.fail('receipt page', wordsOf(failure))
  }
}

/** How often the preview looks whether a file was read. */
const lookEveryMs = 1200

/** Sends a file as the form does, and follows the preview as the page does until it shows what was read. */
async function upload(
  desk: Desk,
  { sitter: { cookie }, plannedMs, laboratory }: { sitter: Sitter; plannedMs: number; laboratory: number },
) {
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
