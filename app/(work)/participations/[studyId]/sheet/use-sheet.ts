import { useEffect, useState, useSyncExternalStore } from 'react'
import { localCopies } from './local-copy'
import { createSendDraft } from './send-draft'
import { createSheetStore, type SheetState, type SheetStore } from './sheet-store'

interface SheetSource {
  readonly studyId: string
  readonly code: string
  readonly returns: number
  readonly keys: readonly string[]
  readonly draftAddress: string
  readonly initial: { entries: readonly string[]; remark: string; version: number; savedAt: string | null }
}

/** The sheet of this page, taken up again from this tab's own copy where that is newer. */
export function useSheet({
  studyId,
  code,
  returns,
  keys,
  draftAddress,
  initial,
}: SheetSource): [SheetState, SheetStore] {
  const [store] = useState(() =>
    createSheetStore({
      initial,
      send: createSendDraft({ address: draftAddress, keys }),
      copies: localCopies({ studyId, code, returns }),
      jitter,
    }),
  )
  const state = useSyncExternalStore(store.subscribe, store.read, store.read)
  useEffect(() => {
    store.restore()
    const keepOnLeaving = () => {
      if (document.visibilityState === 'hidden') void store.keepNow()
    }
    document.addEventListener('visibilitychange', keepOnLeaving)
    return () => {
      document.removeEventListener('visibilitychange', keepOnLeaving)
      store.stop()
    }
  }, [store])
  return [state, store]
}

function jitter(): number {
  return (crypto.getRandomValues(new Uint8Array(1))[0] ?? 0) / 256
}
