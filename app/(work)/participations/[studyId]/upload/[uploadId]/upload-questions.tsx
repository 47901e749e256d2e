'use client'

import { useActionState } from 'react'
import { Button } from '@/app/ui/primitives/button'
import { Notice } from '@/app/ui/primitives/notice'
import type { CellQuestion } from '@/lib/spreadsheet/match-return'
import type { FormState } from '@/lib/web/form-state'
import { recheckUploadAction } from './actions'

interface UploadQuestionsProps {
  studyId: string
  uploadId: string
  questions: readonly CellQuestion[]
}

const untouched: FormState = { errors: {}, values: {} }
const mostShown = 20

/** Values that can be read in two ways, and the one question that settles them all. */
export function UploadQuestions({ studyId, uploadId, questions }: UploadQuestionsProps) {
  const [state, formAction] = useActionState(recheckUploadAction, untouched)
  const [first] = questions
  if (!first) return null
  const [asDecimal, asThousands] = first.readings
  const title =
    questions.length === 1
      ? 'One value can be read in two ways'
      : `${questions.length} values can be read in two ways`
  return (
    <Notice tone="warn" title={title}>
      <ul className="my-1.5">
        {questions.slice(0, mostShown).map((question) => (
          <li key={`${question.sheet}!${question.cell}`}>
            <span className="font-mono">
              {question.sheet}!{question.cell}
            </span>
            , {question.column}: “{question.found}” is {question.readings[0]} or {question.readings[1]}
          </li>
        ))}
      </ul>
      {questions.length > mostShown && <p>And {questions.length - mostShown} more.</p>}
      {state.message && <p role="alert">{state.message}</p>}
      <form action={formAction} className="mt-2 flex flex-wrap gap-2">
        <input type="hidden" name="studyId" value={studyId} />
        <input type="hidden" name="uploadId" value={uploadId} />
        <Button type="submit" name="decimalMark" value="comma">
          In this file the comma is the decimal mark: {asDecimal}
        </Button>
        <Button type="submit" name="decimalMark" value="point">
          In this file the point is: {asThousands}
        </Button>
      </form>
    </Notice>
  )
}
