'use client'

import { useRouter } from 'next/navigation'
import { useEffect, useState } from 'react'
import { Progress } from '@/app/ui/primitives/progress'

type Stage = 'waiting' | 'reading' | 'checked' | 'refused'

interface UploadWatchProps {
  address: string
  stage: Stage
  places: number
}

const everyMs = 1200

const words: Record<Stage, string> = {
  waiting: 'The file has arrived and waits to be read.',
  reading: 'The file is being read, cell by cell.',
  checked: 'The file has been read.',
  refused: 'The file has been looked at.',
}

/** Follows the reading of a file, and shows the page afresh once it is done. One may leave and come back. */
export function UploadWatch({ address, stage: initial, places }: UploadWatchProps) {
  const router = useRouter()
  const [stage, setStage] = useState<Stage>(initial)
  useEffect(() => {
    let isWatched = true
    let timer: ReturnType<typeof setTimeout>
    async function look() {
      const next = await askStage(address)
      if (!isWatched) return
      if (next) setStage(next)
      if (next === 'checked' || next === 'refused') router.refresh()
      timer = setTimeout(() => void look(), everyMs)
    }
    timer = setTimeout(() => void look(), everyMs)
    return () => {
      isWatched = false
      clearTimeout(timer)
    }
  }, [address, router])
  const step = { waiting: 1, reading: 2, checked: 3, refused: 3 }[stage]
  return (
    <div className="flex max-w-text flex-col gap-3">
      <Progress label={words[stage]} done={step} total={3} of="steps" />
      <p role="status" className="sr-only">
        {words[stage]}
      </p>
      <p className="text-ink-soft">
        It is then compared with the {places} results that are asked. This takes a few seconds; you can leave
        the page and come back to it.
      </p>
      <noscript>
        <meta httpEquiv="refresh" content="3" />
        <p>The page shows itself afresh every three seconds.</p>
      </noscript>
    </div>
  )
}

/** Null when it cannot be told just now; the next look will. */
async function askStage(address: string): Promise<Stage | null> {
  try {
    const response = await fetch(address, { headers: { Accept: 'application/json' } })
    return response.ok ? ((await response.json()) as { stage: Stage }).stage : null
  } catch {
    return null
  }
}
