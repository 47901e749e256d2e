import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import type { LocalCopies, LocalCopy } from '@/app/(work)/participations/[studyId]/sheet/local-copy'
import type {
  DraftReply,
  SendDraft,
  SheetContent,
} from '@/app/(work)/participations/[studyId]/sheet/send-draft'
import { createSheetStore } from '@/app/(work)/participations/[studyId]/sheet/sheet-store'

beforeEach(() => void vi.useFakeTimers())
afterEach(() => void vi.useRealTimers())

function keptInMemory(copy: LocalCopy | null = null): LocalCopies & { copy: LocalCopy | null } {
  return {
    copy,
    read() {
      return this.copy
    },
    write(next) {
      this.copy = next
    },
  }
}

/** A server that answers in turn, and remembers what it was sent. */
function answering(...replies: DraftReply[]) {
  const sent: { content: SheetContent; version: number }[] = []
  const send: SendDraft = async (content, version) => {
    sent.push({ content, version })
    return replies.shift() ?? { kind: 'kept', version: version + 1, savedAt: '2027-03-01T14:02:00.000Z' }
  }
  return { sent, send }
}

function makeSheet({
  send,
  copies = keptInMemory(),
  version = 0,
}: {
  send: SendDraft
  copies?: LocalCopies
  version?: number
}) {
  return createSheetStore({
    initial: { entries: ['', '', ''], remark: '', version, savedAt: null },
    send,
    copies,
    jitter: () => 0.5,
  })
}

describe('keeping the draft', () => {
  it('waits for a quiet moment and then sends once, whatever was typed in it', async () => {
    const { sent, send } = answering()
    const store = makeSheet({ send })
    for (const text of ['4', '41', '412']) {
      store.setEntry(0, text)
      await vi.advanceTimersByTimeAsync(500)
    }
    expect(sent).toEqual([])
    await vi.advanceTimersByTimeAsync(3000)
    expect(sent).toEqual([{ content: { entries: ['412', '', ''], remark: '' }, version: 0 }])
    expect(store.read().draft).toEqual({ kind: 'kept', savedAt: '2027-03-01T14:02:00.000Z' })
  })

  it('sends what was typed meanwhile after the answer, with the version the answer gave', async () => {
    let answer: (reply: DraftReply) => void = () => undefined
    const versions: number[] = []
    const store = makeSheet({
      send: (_content, version) => {
        versions.push(version)
        return new Promise((resolve) => (answer = resolve))
      },
    })
    store.setEntry(0, '1')
    await vi.advanceTimersByTimeAsync(3000)
    store.setEntry(1, '2')
    await vi.advanceTimersByTimeAsync(6000)
    expect(versions).toEqual([0])
    answer({ kind: 'kept', version: 8, savedAt: '2027-03-01T14:02:00.000Z' })
    await vi.advanceTimersByTimeAsync(6000)
    expect(versions).toEqual([0, 8])
  })

  it('leaves the copy of this tab as it was typed until the server has it', async () => {
    const copies = keptInMemory()
    const { send } = answering({ kind: 'unreachable' }, { kind: 'signed-out' })
    const store = makeSheet({ send, copies })
    store.setEntry(2, '7')
    expect(copies.copy).toEqual({ entries: ['', '', '7'], remark: '', version: 0, isKept: false })
    await vi.advanceTimersByTimeAsync(3000)
    expect(store.read().draft.kind).toBe('unreachable')
    await vi.advanceTimersByTimeAsync(9000)
    expect(store.read().draft.kind).toBe('signed-out')
    expect(copies.copy).toMatchObject({ isKept: false })
    await vi.advanceTimersByTimeAsync(9000)
    expect(store.read().draft.kind).toBe('kept')
    expect(copies.copy).toEqual({ entries: ['', '', '7'], remark: '', version: 1, isKept: true })
  })

  it('says aloud once a save: neither that a change is unsaved, nor that it is being saved', async () => {
    const { send } = answering()
    const store = makeSheet({ send })
    const said: string[] = []
    store.subscribe(() => {
      const { kind } = store.read().settled
      if (said.at(-1) !== kind) said.push(kind)
    })
    store.setEntry(0, '1')
    await vi.advanceTimersByTimeAsync(4000)
    expect(said).toEqual(['untouched', 'kept'])
  })
})

describe('a draft that another page changed', () => {
  const other = { entries: ['9', '', ''], remark: '' }
  const changed: DraftReply = { kind: 'changed-elsewhere', version: 5, content: other }

  it('is shown beside this one, and nothing is sent before the person chose', async () => {
    const { sent, send } = answering(changed)
    const store = makeSheet({ send })
    store.setEntry(0, '1')
    await vi.advanceTimersByTimeAsync(3000)
    expect(store.read().draft).toEqual({ kind: 'changed-elsewhere', version: 5, other })
    store.setEntry(1, '2')
    await vi.advanceTimersByTimeAsync(60_000)
    expect(sent).toHaveLength(1)
    expect(await store.keepNow()).toBe(false)
  })

  it('gives way when the person keeps this one', async () => {
    const { sent, send } = answering(changed)
    const store = makeSheet({ send })
    store.setEntry(0, '1')
    await vi.advanceTimersByTimeAsync(3000)
    store.keepMine()
    await vi.advanceTimersByTimeAsync(0)
    expect(sent.at(-1)).toEqual({ content: { entries: ['1', '', ''], remark: '' }, version: 5 })
    expect(store.read().draft.kind).toBe('kept')
  })

  it('takes the place of this one when the person takes it', async () => {
    const { send } = answering(changed)
    const store = makeSheet({ send })
    store.setEntry(0, '1')
    await vi.advanceTimersByTimeAsync(3000)
    store.takeOther()
    expect(store.read().entries).toEqual(['9', '', ''])
  })

  it('is no question when it says the same', async () => {
    const { send } = answering({ ...changed, content: { entries: ['1', '', ''], remark: '' } })
    const store = makeSheet({ send })
    store.setEntry(0, '1')
    await vi.advanceTimersByTimeAsync(6000)
    expect(store.read().draft.kind).toBe('kept')
  })
})

describe('coming back to the sheet', () => {
  const copy = { entries: ['1', '2', ''], remark: 'half', version: 3, isKept: false }

  it('finds what the server never got, and sends it', async () => {
    const { sent, send } = answering()
    const store = makeSheet({ send, copies: keptInMemory(copy), version: 3 })
    store.restore()
    expect(store.read()).toMatchObject({ entries: ['1', '2', ''], remark: 'half', isRestored: true })
    await vi.advanceTimersByTimeAsync(3000)
    expect(sent).toEqual([{ content: { entries: ['1', '2', ''], remark: 'half' }, version: 3 }])
  })

  it('asks when the server has a newer draft than the copy grew from', () => {
    const store = makeSheet({ send: answering().send, copies: keptInMemory(copy), version: 4 })
    store.restore()
    expect(store.read().draft).toMatchObject({
      kind: 'changed-elsewhere',
      version: 4,
      other: { entries: ['', '', ''] },
    })
  })

  it('takes the server’s draft when the copy held nothing of its own', () => {
    const store = makeSheet({
      send: answering().send,
      copies: keptInMemory({ ...copy, isKept: true }),
      version: 4,
    })
    store.restore()
    expect(store.read().entries).toEqual(['', '', ''])
  })

  it('is not fooled by a page from the history that is older than the copy', () => {
    const store = makeSheet({
      send: answering().send,
      copies: keptInMemory({ ...copy, isKept: true }),
      version: 2,
    })
    store.restore()
    expect(store.read()).toMatchObject({ entries: ['1', '2', ''], isRestored: false })
  })
})

it('settles a comma once for all values in which it is open, and in no other', () => {
  const store = makeSheet({ send: answering().send })
  store.setEntries(
    new Map([
      [0, '1,234'],
      [1, '12,5'],
      [2, '<2,000'],
    ]),
  )
  store.settleCommas('decimal')
  expect(store.read().entries).toEqual(['1.234', '12,5', '<2.000'])
})
