import clsx from 'clsx'
import type { ReactNode } from 'react'
import { ToneShape, toneText, type Tone } from './tone'

/** A state in a word, with a shape before it. */
export function Status({ tone, children }: { tone: Tone; children: ReactNode }) {
  return (
    <span
      className={clsx(
        'inline-flex items-center gap-1.5 text-small',
        toneText[tone],
        (tone === 'warn' || tone === 'danger') && 'font-semibold',
      )}
    >
      <ToneShape tone={tone} />
      <span>{children}</span>
    </span>
  )
}
