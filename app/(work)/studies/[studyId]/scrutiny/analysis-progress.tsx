'use client'

import { useRouter } from 'next/navigation'
import { useEffect, useState } from 'react'
import { z } from 'zod'
import { Notice } from '@/app/ui/primitives/notice'

const progress = z.object({ done: z.boolean() })
const pollMs = 1500

/** Watches an analysis being computed and draws the page afresh when it is there. */
export function AnalysisProgress({ studyId }: { studyId: string }) {
  const router = useRouter()
  const [isUnreachable, setIsUnreachable] = useState(false)

  useEffect(() => {
    const ask = async () => {
      try {
        const answer = await fetch(`/api/studies/${studyId}/analysis`, { cache: 'no-store' })
        const { done } = progress.parse(await answer.json())
        setIsUnreachable(false)
        if (done) router.refresh()
      } catch {
        setIsUnreachable(true)
      }
    }
    const timer = setInterval(ask, pollMs)
    return () => clearInterval(timer)
  }, [studyId, router])

  return (
    <Notice tone="info" title="The statistics are being computed" isLive>
      {isUnreachable
        ? 'The server cannot be reached just now; this page goes on asking.'
        : 'This takes seconds. You can leave this page and come back; reload it if scripts are off.'}
    </Notice>
  )
}
