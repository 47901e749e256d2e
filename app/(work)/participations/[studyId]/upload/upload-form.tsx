'use client'

import { useMemo, useState } from 'react'
import { Button } from '@/app/ui/primitives/button'
import { ErrorSummary } from '@/app/ui/primitives/error-summary'
import { Field } from '@/app/ui/primitives/field'

interface UploadFormProps {
  /** The handler the file goes to; not an action, whose body would be held as a whole before it could be counted. */
  action: string
  problem: string | undefined
}

const mostBytes = 5_000_000

/** The file on its way. With scripts, a file that is too large is not even sent. */
export function UploadForm({ action, problem }: UploadFormProps) {
  const [found, setFound] = useState<string | undefined>(undefined)
  const [isSending, setSending] = useState(false)
  const message = found ?? problem
  const errors = useMemo(() => (message ? [{ field: 'file', message }] : []), [message])
  return (
    <form
      method="post"
      action={action}
      encType="multipart/form-data"
      onSubmit={(event) => {
        const file = new FormData(event.currentTarget).get('file')
        const fault = file instanceof File ? faultOf(file) : undefined
        if (fault || isSending) event.preventDefault()
        setFound(fault)
        if (!fault) setSending(true)
      }}
      className="flex max-w-text flex-col items-start gap-4"
    >
      <ErrorSummary errors={errors} />
      <Field
        name="file"
        label="File of results"
        hint="A workbook (.xlsx) or a table (.csv), up to 5 MB."
        error={message}
      >
        {(wiring) => (
          <input
            {...wiring}
            type="file"
            accept=".xlsx,.csv,text/csv,application/vnd.openxmlformats-officedocument.spreadsheetml.sheet"
            className="block w-full max-w-full rounded border border-edge bg-sheet p-2 file:mr-3 file:min-h-8 file:rounded file:border file:border-verdigris file:bg-transparent file:px-3 file:font-semibold file:text-verdigris"
          />
        )}
      </Field>
      <Button type="submit" variant="primary" isPending={isSending}>
        <span aria-live="polite">{isSending ? 'Sending…' : 'Send and see what is read'}</span>
      </Button>
    </form>
  )
}

function faultOf({ name, size }: File): string | undefined {
  if (name === '') return 'Choose a file first.'
  if (size === 0) return 'The file is empty. Save the workbook and choose it again.'
  if (size > mostBytes)
    return 'The file is larger than 5 MB. Send the results alone, without pictures or other sheets.'
  return undefined
}
