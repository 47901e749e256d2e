import { useEffect, useState } from 'react'
import type { Place, ReturnLayout } from '@/lib/spreadsheet/layout'
import { namePlace } from '../../name-place'
import { describeEntry, type EntryWords } from './describe-entry'

interface SheetStatusProps {
  layout: ReturnLayout
  places: readonly Place[]
  entries: readonly string[]
  active: number
  /** What was last done to several cells at once, such as a paste. */
  announced: string
  isLive: boolean
}

/** The line under the sheet: where one stands and how the value there is read; faults are said aloud after a pause. */
export function SheetStatus({ layout, places, entries, active, announced, isLive }: SheetStatusProps) {
  const place = places[active]
  const measurand = layout.measurands.find(({ id }) => id === place?.measurandId)
  const said: EntryWords = measurand ? describeEntry(entries[active] ?? '', measurand) : { kind: 'empty' }
  const isWrong = said.kind === 'fault' || said.kind === 'question'
  const filled = entries.filter((text) => text.trim() !== '').length
  const spoken = usePause(isWrong ? said.words : '')
  if (!isLive || !place) return null
  return (
    <div className="sticky bottom-0 flex flex-wrap items-baseline justify-between gap-x-6 border-t bg-sheet px-3 py-2 text-small max-sm:hidden">
      <p>
        <span className="font-semibold">{namePlace(layout, place)}</span>{' '}
        <span className={isWrong ? 'text-madder' : 'text-ink-soft'}>
          {said.kind === 'empty' ? 'Empty.' : said.words}
        </span>
      </p>
      <p className="font-mono text-ink-soft">
        {filled} of {entries.length}
      </p>
      <p role="status" className="sr-only">
        {spoken || announced}
      </p>
    </div>
  )
}

const pauseMs = 700

/** A text that has stood still for a moment, so that nobody hears half a number judged. */
function usePause(text: string): string {
  const [settled, setSettled] = useState('')
  useEffect(() => {
    const timer = setTimeout(() => setSettled(text), pauseMs)
    return () => clearTimeout(timer)
  }, [text])
  return settled
}
