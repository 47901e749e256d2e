import type { ReactNode } from 'react'

export type Tone = 'quiet' | 'going' | 'info' | 'done' | 'warn' | 'danger'

/** Text colour of each tone. Never the only sign: a shape and a word go with it. */
export const toneText: Record<Tone, string> = {
  quiet: 'text-ink-soft',
  going: 'text-verdigris',
  info: 'text-indigo',
  done: 'text-moss',
  warn: 'text-ochre',
  danger: 'text-madder',
}

/** The shape of each tone: ring, half disc, square, tick, triangle, diamond. */
export function ToneShape({ tone, size = 11 }: { tone: Tone; size?: number }) {
  return (
    <svg width={size} height={size} viewBox="0 0 12 12" aria-hidden="true" className="shrink-0">
      {shapes[tone]}
    </svg>
  )
}

const shapes: Record<Tone, ReactNode> = {
  quiet: <circle cx="6" cy="6" r="4.4" fill="none" stroke="currentColor" strokeWidth="1.6" />,
  going: (
    <>
      <circle cx="6" cy="6" r="4.6" fill="none" stroke="currentColor" strokeWidth="1.4" />
      <path d="M6 1.4a4.6 4.6 0 0 1 0 9.2Z" fill="currentColor" />
    </>
  ),
  info: <rect x="1.6" y="1.6" width="8.8" height="8.8" fill="currentColor" />,
  done: <path d="M1.2 6.4l3.3 3.3 6.2-7" fill="none" stroke="currentColor" strokeWidth="2.1" />,
  warn: <path d="M6 1L11.4 10.6H0.6Z" fill="currentColor" />,
  danger: <path d="M6 0.4L11.6 6L6 11.6L0.4 6Z" fill="currentColor" />,
}
