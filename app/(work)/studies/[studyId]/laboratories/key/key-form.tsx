'use client'

import { useActionState } from 'react'
import { DataTable } from '@/app/ui/primitives/data-table'
import { EmptyState } from '@/app/ui/primitives/empty-state'
import { SubmitButton } from '@/app/ui/primitives/submit-button'
import { Tag } from '@/app/ui/primitives/tag'
import { revealKeyAction, type KeyState } from './actions'

const hidden: KeyState = { key: null }

export function KeyForm({ studyId, accepted }: { studyId: string; accepted: number }) {
  const [{ key }, formAction] = useActionState(revealKeyAction, hidden)
  if (accepted === 0)
    return (
      <EmptyState title="There is no code yet">
        A laboratory draws its code when it accepts its invitation.
      </EmptyState>
    )
  if (key)
    return (
      <div className="flex flex-col gap-3">
        <p role="status" className="text-small text-ink-soft">
          Read just now, and recorded. Leaving the page hides it again.
        </p>
        <DataTable
          caption="Which laboratory is which"
          isCaptionHidden
          rows={key}
          rowKey={({ code }) => code}
          columns={[
            { key: 'code', header: 'Code', isRowHeader: true, cell: ({ code }) => <Tag code={code} /> },
            { key: 'laboratory', header: 'Laboratory', cell: ({ laboratory }) => laboratory },
          ]}
        />
      </div>
    )
  return (
    <form action={formAction} className="flex flex-col items-start gap-3">
      <input type="hidden" name="studyId" value={studyId} />
      <p className="max-w-text">
        Pressing the button shows {accepted} {accepted === 1 ? 'code' : 'codes'} with their laboratories, and
        writes into the audit trail that you read them.
      </p>
      <SubmitButton pendingLabel="Reading…">Show which laboratory is which</SubmitButton>
    </form>
  )
}
