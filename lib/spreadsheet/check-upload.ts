import { fork, type ChildProcess } from 'node:child_process'
import { join } from 'node:path'
import type { DecimalMark } from '@/lib/domain/reported-value'
import type { ReturnLayout } from '@/lib/spreadsheet/layout'
import type { ReturnCheck } from '@/lib/spreadsheet/match-return'
import { workbookLimits } from '@/lib/spreadsheet/workbook'

/*
 * Files from outside are read in a process of their own, with little memory, little time and none of this
 * process's settings: whatever a file does to its reader, the product goes on.
 */

export type UploadCheck =
  { outcome: 'checked'; check: ReturnCheck } | { outcome: 'refused'; code: string; message: string }

export type UploadToCheck = {
  bytes: Uint8Array
  fileName: string
  layout: ReturnLayout
  /** The mark a laboratory has said its texts use; without it, a text with two readings is asked about. */
  decimalMark?: DecimalMark
}

export type UploadLimits = {
  memoryMiB: number
  readingMs: number
  /** Until the reader stands ready, which takes long only on a machine that is short of everything. */
  startingMs: number
}

const uploadLimits: UploadLimits = { memoryMiB: 256, readingMs: 10_000, startingMs: 30_000 }

/** Found from the root of the project, as bundling moves this module but not the file it starts. */
const childFile = ['lib', 'spreadsheet', 'check-upload-child.ts']

const mostAtOnce = 2
const mostWaiting = 40
const waiting: (() => void)[] = []
let running = 0

/** Reads a file and compares it with what was asked for. Answers with a refusal where it cannot; never throws. */
export async function checkUpload(
  upload: UploadToCheck,
  limits: Partial<UploadLimits> = {},
): Promise<UploadCheck> {
  if (upload.bytes.length === 0) return refused('file-empty', 'This file is empty: it holds no bytes at all.')
  if (upload.bytes.length > workbookLimits.packedBytes) {
    const most = workbookLimits.packedBytes / 1_000_000
    return refused(
      'file-too-large',
      `This file is larger than ${most} MB. Send only the sheet with the results.`,
    )
  }
  if (waiting.length >= mostWaiting) {
    return refused(
      'upload-busy',
      'Many files are being read just now. Try again in a minute; nothing was stored.',
    )
  }
  if (running >= mostAtOnce) await new Promise<void>((resolve) => waiting.push(resolve))
  else running += 1
  try {
    return await readInChild(upload, { ...uploadLimits, ...limits })
  } finally {
    // A place is handed on rather than given back, so that nobody slips in between.
    const next = waiting.shift()
    if (next === undefined) running -= 1
    else next()
  }
}

function readInChild(upload: UploadToCheck, limits: UploadLimits): Promise<UploadCheck> {
  return new Promise((resolve) => {
    const child = startChild(limits)
    let timer = setTimeout(() => settle(notStarted()), limits.startingMs)
    let isReady = false

    function settle(answer: UploadCheck): void {
      clearTimeout(timer)
      child.removeAllListeners()
      child.on('error', () => undefined)
      child.kill('SIGKILL')
      resolve(answer)
    }

    child.on('error', () => settle(notStarted()))
    child.on('exit', () => settle(isReady ? tooComplex() : notStarted()))
    child.on('message', (message: 'ready' | UploadCheck) => {
      if (message !== 'ready') return settle(message)
      isReady = true
      clearTimeout(timer)
      timer = setTimeout(() => settle(tooComplex()), limits.readingMs)
      child.send(upload, (error) => {
        if (error !== null) settle(tooComplex())
      })
    })
  })
}

function startChild({ memoryMiB }: UploadLimits): ChildProcess {
  return fork(join(/* turbopackIgnore: true */ process.cwd(), ...childFile), {
    execArgv: ['--import', 'tsx', `--max-old-space-size=${memoryMiB}`],
    // No secrets, no settings: the reader needs none, and what it does not have it cannot give away.
    env: { NODE_ENV: process.env.NODE_ENV, PATH: process.env.PATH, TZ: 'UTC' },
    serialization: 'advanced',
    // A crash prints pages of memory figures that nobody would read.
    stdio: ['ignore', 'ignore', 'ignore', 'ipc'],
  })
}

function refused(code: string, message: string): UploadCheck {
  return { outcome: 'refused', code, message }
}

function tooComplex(): UploadCheck {
  return refused(
    'upload-too-complex',
    'This file is too large or too complex to read. Copy the results to a new workbook and send that.',
  )
}

function notStarted(): UploadCheck {
  return refused(
    'upload-reader-unavailable',
    'The file could not be read just now. Try again in a minute; nothing was stored.',
  )
}
