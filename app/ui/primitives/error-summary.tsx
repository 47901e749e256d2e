'use client'

import { useEffect, useRef } from 'react'
import { fieldId } from './field-id'

interface ErrorSummaryProps {
  /** In the order of the form. One without a field concerns the whole form. */
  errors: readonly { field?: string; message: string }[]
}

/** What keeps a form from being accepted, at its top, each line a link to its field. Takes the focus when it appears. */
export function ErrorSummary({ errors }: ErrorSummaryProps) {
  const box = useRef<HTMLDivElement>(null)
  // A fresh answer is a fresh array, even when it says the same again: the focus returns then too.
  useEffect(() => {
    if (errors.length > 0) box.current?.focus()
  }, [errors])

  if (errors.length === 0) return null
  return (
    <div
      ref={box}
      role="alert"
      tabIndex={-1}
      aria-labelledby="error-summary-title"
      className="border border-l-[3px] border-madder bg-madder-wash px-4 py-3"
    >
      <h2 id="error-summary-title" className="font-heading text-lead font-bold">
        {errors.length === 1
          ? 'Not accepted yet: one thing to mend'
          : `Not accepted yet: ${errors.length} things to mend`}
      </h2>
      <ul className="mt-1.5 flex flex-col">
        {errors.map((error, index) => (
          <li key={index} className="text-madder">
            {error.field === undefined ? (
              <span className="inline-block py-0.5 font-semibold">{error.message}</span>
            ) : (
              <a
                href={`#${fieldId(error.field)}`}
                className="inline-block py-0.5 font-semibold underline underline-offset-[0.18em]"
              >
                {error.message}
              </a>
            )}
          </li>
        ))}
      </ul>
    </div>
  )
}
