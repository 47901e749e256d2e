'use client'

import { useEffect } from 'react'
import { forgetLocalCopies } from '../../sheet/local-copy'

/** Once a return has its receipt, this tab keeps nothing of the sheet it came from. */
export function ForgetCopies({ studyId, isLatest }: { studyId: string; isLatest: boolean }) {
  useEffect(() => {
    if (isLatest) forgetLocalCopies(studyId)
  }, [studyId, isLatest])
  return null
}
