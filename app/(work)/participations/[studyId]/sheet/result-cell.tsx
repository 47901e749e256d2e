import clsx from 'clsx'
import { memo } from 'react'
import { fieldId } from '@/app/ui/primitives/field-id'
import type { Measurand } from '@/lib/spreadsheet/layout'
import { entryName } from '../../entry-names'
import { describeEntry } from './describe-entry'

interface ResultCellProps {
  position: number
  text: string
  /** What a reader of the screen hears: the place in words. */
  label: string
  measurand: Measurand
  /** The grid is one tab stop; without scripts every cell is one. */
  tabIndex: number | undefined
  isActive: boolean
  isLive: boolean
  onText: (position: number, text: string) => void
}

/** One place of the sheet: an ordinary input, with what is wrong with its value under it. */
export const ResultCell = memo(function ResultCell(props: ResultCellProps) {
  const { position, text, label, measurand, tabIndex, isActive, isLive, onText } = props
  const name = entryName(position)
  const id = fieldId(name)
  const said = describeEntry(text, measurand)
  const isWrong = said.kind === 'fault' || said.kind === 'question'
  return (
    <div className="flex flex-wrap items-center gap-x-2.5 gap-y-1">
      <span className="relative block max-sm:w-full">
        <input
          id={id}
          name={name}
          value={text}
          data-position={position}
          tabIndex={tabIndex}
          onChange={(event) => onText(position, event.target.value)}
          aria-label={label}
          aria-invalid={isWrong || undefined}
          aria-describedby={isWrong ? `${id}-words` : undefined}
          title={said.kind === 'fault' ? said.words : undefined}
          maxLength={200}
          autoComplete="off"
          autoCapitalize="off"
          spellCheck={false}
          className={clsx(
            'block h-9 w-32 scroll-mb-24 rounded border bg-sheet px-2.5 text-right font-mono text-ink max-sm:h-12 max-sm:w-full max-sm:pr-16 max-sm:text-left max-sm:text-title',
            isWrong ? 'border-2 border-madder' : 'border-edge',
          )}
        />
        <span
          aria-hidden="true"
          className="pointer-events-none absolute inset-y-0 right-3 hidden items-center font-mono text-ink-soft max-sm:flex"
        >
          {measurand.unit}
        </span>
      </span>
      {isWrong && (
        <span id={`${id}-words`} className="min-w-0 max-w-72 text-small text-madder">
          {said.words}
        </span>
      )}
      {said.kind === 'question' && isLive && (
        <span className="flex gap-1.5">
          {said.readings.map((reading) => (
            <button
              key={reading}
              type="button"
              onClick={() => {
                onText(position, reading)
                document.getElementById(id)?.focus()
              }}
              aria-label={`${label}: read as ${reading}`}
              className="min-h-7 rounded border border-verdigris px-2 font-mono text-small text-verdigris hover:bg-verdigris-wash"
            >
              {reading}
            </button>
          ))}
        </span>
      )}
      {said.kind === 'fine' && isActive && (
        <span className="text-small text-ink-soft sm:hidden">{said.words}</span>
      )}
    </div>
  )
})
