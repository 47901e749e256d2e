import { readReportedValue } from '@/lib/domain/reported-value'
import type { LocalCopies } from './local-copy'
import type { SendDraft, SheetContent } from './send-draft'

export type DraftStatus =
  | { kind: 'untouched' }
  | { kind: 'changed' }
  | { kind: 'keeping' }
  | { kind: 'kept'; savedAt: string }
  | { kind: 'unreachable' }
  | { kind: 'signed-out' }
  | { kind: 'refused'; message: string }
  | { kind: 'changed-elsewhere'; version: number; other: SheetContent }

export interface SheetState extends SheetContent {
  readonly draft: DraftStatus
  /** The last status that is worth saying aloud: neither "changed" nor "keeping". */
  readonly settled: DraftStatus
  readonly isRestored: boolean
}

interface Parts {
  readonly initial: SheetContent & { version: number; savedAt: string | null }
  readonly send: SendDraft
  readonly copies: LocalCopies
  /** A fraction from 0 to 1, so that many sheets do not all save in the same moment. */
  readonly jitter: () => number
}

const quietMs = 2000
const jitterMs = 1500
const retryMs = 8000

export type SheetStore = ReturnType<typeof createSheetStore>

/**
 * The sheet as it is typed, apart from how it is drawn. Every change goes to this tab's own copy at once and to
 * the server after a quiet moment, one request at a time; the copy stays until the server has it.
 */
export function createSheetStore({ initial, send, copies, jitter }: Parts) {
  let version = initial.version
  const opening: DraftStatus = initial.savedAt
    ? { kind: 'kept', savedAt: initial.savedAt }
    : { kind: 'untouched' }
  let state: SheetState = {
    entries: initial.entries,
    remark: initial.remark,
    draft: opening,
    settled: opening,
    isRestored: false,
  }
  let isUnsaved = false
  let timer: ReturnType<typeof setTimeout> | undefined
  let sending: Promise<void> | null = null
  const listeners = new Set<() => void>()

  function set(change: Partial<SheetState>): void {
    const isPassing = change.draft?.kind === 'changed' || change.draft?.kind === 'keeping'
    state = { ...state, ...change, ...(change.draft && !isPassing ? { settled: change.draft } : {}) }
    for (const listener of listeners) listener()
  }

  function change(content: Partial<SheetContent>): void {
    isUnsaved = true
    const isHeld = state.draft.kind === 'changed-elsewhere' || state.draft.kind === 'signed-out'
    set({ ...content, ...(isHeld ? {} : { draft: { kind: 'changed' } }) })
    writeCopy()
    if (!isHeld) sendIn(quietMs)
  }

  function writeCopy(): void {
    copies.write({ entries: state.entries, remark: state.remark, version, isKept: !isUnsaved })
  }

  function sendIn(milliseconds: number): void {
    clearTimeout(timer)
    timer = setTimeout(() => void keepNow(), milliseconds + jitter() * jitterMs)
  }

  /** Resolves when what stands here now is kept, or cannot be. */
  async function keepNow(): Promise<boolean> {
    clearTimeout(timer)
    while (sending) await sending
    if (state.draft.kind === 'changed-elsewhere') return false
    if (!isUnsaved) return true
    sending = sendOnce()
    await sending
    return !isUnsaved
  }

  async function sendOnce(): Promise<void> {
    const { entries, remark } = state
    set({ draft: { kind: 'keeping' } })
    isUnsaved = false
    const reply = await send({ entries, remark }, version)
    sending = null
    if (reply.kind === 'kept') {
      version = reply.version
      set({ draft: isUnsaved ? { kind: 'changed' } : { kind: 'kept', savedAt: reply.savedAt } })
      writeCopy()
      if (isUnsaved) sendIn(quietMs)
      return
    }
    isUnsaved = true
    if (reply.kind === 'changed-elsewhere') {
      if (isEqual(reply.content, state)) {
        version = reply.version
        sendIn(0)
        return
      }
      set({ draft: { kind: 'changed-elsewhere', version: reply.version, other: reply.content } })
      return
    }
    set({ draft: reply })
    if (reply.kind !== 'refused') sendIn(retryMs)
  }

  return {
    subscribe(listener: () => void): () => void {
      listeners.add(listener)
      return () => listeners.delete(listener)
    },
    read: () => state,
    /** Takes up what this tab still holds; called once the page is live, since the server knows nothing of it. */
    restore(): void {
      const copy = copies.read()
      if (!copy || copy.entries.length !== state.entries.length || isEqual(copy, state)) return
      if (copy.isKept && copy.version <= version) return
      const content = { entries: copy.entries, remark: copy.remark }
      if (copy.version >= version) {
        version = copy.version
        isUnsaved = !copy.isKept
        set({ ...content, isRestored: isUnsaved })
        if (isUnsaved) sendIn(0)
        return
      }
      const other = { entries: state.entries, remark: state.remark }
      isUnsaved = true
      set({ ...content, draft: { kind: 'changed-elsewhere', version, other } })
    },
    setEntry(position: number, text: string): void {
      if (state.entries[position] === text) return
      change({ entries: state.entries.with(position, text) })
    },
    setEntries(texts: ReadonlyMap<number, string>): void {
      change({ entries: state.entries.map((text, position) => texts.get(position) ?? text) })
    },
    setRemark(remark: string): void {
      change({ remark })
    },
    /** Settles every value with a comma that could be read in two ways. */
    settleCommas(commaIs: 'decimal' | 'thousands'): void {
      change({ entries: state.entries.map((text) => settle(text, commaIs)) })
    },
    keepNow,
    keepMine(): void {
      if (state.draft.kind !== 'changed-elsewhere') return
      version = state.draft.version
      set({ draft: { kind: 'changed' } })
      void keepNow()
    },
    takeOther(): void {
      if (state.draft.kind !== 'changed-elsewhere') return
      version = state.draft.version
      isUnsaved = false
      set({ ...state.draft.other, draft: { kind: 'untouched' } })
      writeCopy()
    },
    stop(): void {
      clearTimeout(timer)
    },
  }
}

function settle(text: string, commaIs: 'decimal' | 'thousands'): string {
  const read = readReportedValue(text)
  return read.kind === 'ambiguous' ? read.readings[commaIs === 'decimal' ? 0 : 1] : text
}

function isEqual(one: SheetContent, other: SheetContent): boolean {
  return (
    one.remark === other.remark && one.entries.every((text, position) => text === other.entries[position])
  )
}
