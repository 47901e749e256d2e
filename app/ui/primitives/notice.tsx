import clsx from 'clsx'
import type { ReactNode } from 'react'
import { ToneShape, toneText, type Tone } from './tone'

type NoticeTone = Exclude<Tone, 'quiet' | 'going'>

interface NoticeProps {
  tone: NoticeTone
  /** Says the whole matter in a few words; the text below it says what to do. */
  title: ReactNode
  children?: ReactNode
  /** Stands for the tone, where its usual word would say too little: 'Verified'. */
  word?: string
  /** Announces itself: for what appears after an action, not for what stands on the page from the start. */
  isLive?: boolean
}

const washes: Record<NoticeTone, string> = {
  info: 'border-indigo bg-indigo-wash',
  done: 'border-moss bg-moss-wash',
  warn: 'border-ochre bg-ochre-wash',
  danger: 'border-madder bg-madder-wash',
}

const words: Record<NoticeTone, string> = { info: 'To know', done: 'Done', warn: 'Mind', danger: 'Stopped' }

export function Notice({ tone, title, word = words[tone], children, isLive = false }: NoticeProps) {
  return (
    <div
      role={isLive ? 'status' : undefined}
      data-kept-whole
      className={clsx('flex gap-3 border border-l-[3px] px-4 py-3', washes[tone])}
    >
      <span className={clsx('mt-[0.28em]', toneText[tone])}>
        <ToneShape tone={tone} size={13} />
      </span>
      <div className="min-w-0">
        <p className="font-semibold">
          <span className={toneText[tone]}>{word}: </span>
          {title}
        </p>
        {children && <div className="mt-1 max-w-text">{children}</div>}
      </div>
    </div>
  )
}
