'use client'

import { DataTable } from '@/app/ui/primitives/data-table'
import { TextArea } from '@/app/ui/primitives/text-area'
import { splitLaboratoryLines } from '@/lib/domain/split-laboratory-lines'
import { ActionForm, type FormAnswer } from '../../forms/action-form'
import { inviteLinesAction } from './actions'
import { FormField } from '../../forms/form-field'

/** Many laboratories at once: pasted, shown as they were read, and only then put on the list. */
export function PasteForm({ studyId, isOpen }: { studyId: string; isOpen: boolean }) {
  return (
    <div className="border bg-sheet p-4" data-screen-only>
      <h3 className="mb-3 font-semibold">Or paste a whole list</h3>
      <ActionForm
        action={inviteLinesAction}
        hidden={{ studyId }}
        submit="Read the lines"
        pendingLabel="Reading…"
      >
        {(answer) => <Lines answer={answer} isOpen={isOpen} />}
      </ActionForm>
    </div>
  )
}

function Lines({ answer, isOpen }: { answer: FormAnswer; isOpen: boolean }) {
  const lines = answer.valueOf('lines')
  const isRead = answer.valueOf('step') === 'confirm' && Object.keys(answer.state.errors).length === 0
  return (
    <>
      <FormField
        answer={answer}
        name="lines"
        label="One line a laboratory"
        hint="Laboratory; town; country; contact; address; time zone. From a sheet, copy the six columns as they are."
      >
        {(wiring) => (
          <TextArea
            {...wiring}
            rows={4}
            defaultValue={lines}
            className="font-mono text-small"
            spellCheck={false}
          />
        )}
      </FormField>
      {isRead && <Preview lines={lines} isOpen={isOpen} />}
    </>
  )
}

function Preview({ lines, isOpen }: { lines: string; isOpen: boolean }) {
  const rows = splitLaboratoryLines(lines)
  const count = `${rows.length} ${rows.length === 1 ? 'laboratory' : 'laboratories'}`
  return (
    <div className="flex flex-col items-start gap-3">
      <p role="status">
        Read as {count}. Nothing is stored yet
        {isOpen ? '; putting them on the list sends their invitations at once' : ''}.
      </p>
      <div className="w-full">
        <DataTable
          caption="The lines as they were read"
          rows={rows}
          rowKey={({ line }) => String(line)}
          columns={[
            { key: 'line', header: 'Line', kind: 'figure', cell: ({ line }) => line },
            {
              key: 'laboratory',
              header: 'Laboratory',
              isRowHeader: true,
              cell: ({ laboratory }) => laboratory,
            },
            {
              key: 'place',
              header: 'Place',
              cell: ({ city, country }) => [city, country].filter(Boolean).join(', '),
            },
            { key: 'contact', header: 'Contact', cell: ({ contactName }) => contactName },
            { key: 'address', header: 'Address', cell: ({ address }) => address },
            { key: 'zone', header: 'Zone', cell: ({ zone }) => zone },
          ]}
        />
      </div>
      <button
        type="submit"
        name="step"
        value="confirm"
        className="inline-flex min-h-9 items-center rounded border border-verdigris bg-verdigris px-3 py-1 font-semibold text-paper hover:border-ink hover:bg-ink"
      >
        Put {count} on the list
      </button>
    </div>
  )
}
