'use client'

import clsx from 'clsx'
import { useRouter } from 'next/navigation'
import { useActionState, useMemo, useState, useTransition, type FormEvent, type MouseEvent } from 'react'
import { flushSync } from 'react-dom'
import { ErrorSummary } from '@/app/ui/primitives/error-summary'
import { Field } from '@/app/ui/primitives/field'
import { Notice } from '@/app/ui/primitives/notice'
import { SubmitButton } from '@/app/ui/primitives/submit-button'
import { TextArea } from '@/app/ui/primitives/text-area'
import { listPlaces, listRows, placeKey, type ReturnLayout } from '@/lib/spreadsheet/layout'
import type { FormState } from '@/lib/web/form-state'
import { entryName } from '../../entry-names'
import { namePlace } from '../../name-place'
import { participationPaths } from '../../participation-paths'
import { CommaChoice } from './comma-choice'
import { describeEntry } from './describe-entry'
import { DraftDifference } from './draft-difference'
import { DraftLine, sayDraft } from './draft-line'
import { MaterialSteps } from './material-steps'
import type { MaterialGroup } from './material-rows'
import { ResultTable } from './result-table'
import { SheetStatus } from './sheet-status'
import { focusEntry, useGrid } from './use-grid'
import { useIsLive } from './use-is-live'
import { useSheet } from './use-sheet'

interface SheetError {
  readonly field?: string
  readonly message: string
}

interface ResultSheetProps {
  studyId: string
  code: string
  zone: string
  returns: number
  layout: ReturnLayout
  entries: readonly string[]
  remark: string
  draftVersion: number
  draftSavedAt: string | null
  due: string
  /** Found by the server in what was sent, for whoever has no scripts. */
  problems: readonly SheetError[]
  action: (previous: FormState, form: FormData) => Promise<FormState>
}

/** The sheet of results: a plain form that also works without scripts, and behaves like a sheet with them. */
export function ResultSheet(props: ResultSheetProps) {
  const { studyId, code, zone, returns, layout, draftVersion, action } = props
  const [sent, formAction] = useActionState(action, untouched)
  const places = useMemo(() => listPlaces(layout), [layout])
  const groups = useMemo(() => groupByMaterial(layout), [layout])
  const [state, store] = useSheet({
    studyId,
    code,
    returns,
    keys: useMemo(() => places.map(placeKey), [places]),
    draftAddress: participationPaths.draftHandler(studyId),
    initial: {
      entries: props.entries.map((text, position) => textOf(sent.values[entryName(position)]) ?? text),
      remark: textOf(sent.values.remark) ?? props.remark,
      version: draftVersion,
      savedAt: props.draftSavedAt,
    },
  })
  const isLive = useIsLive()
  const router = useRouter()
  const [isLeaving, startLeaving] = useTransition()
  const [announced, announce] = useState('')
  const [shown, setShown] = useState(0)
  const [found, setFound] = useState<readonly SheetError[] | null>(null)
  const fromServer = useMemo(() => serverErrors(sent, props.problems), [sent, props.problems])
  const columns = layout.measurands.length
  const grid = useGrid({ rows: places.length / columns, columns, store, announce })

  function goToEntry(position: number): void {
    // On a narrow screen the cell may be on a material that is not shown; it cannot take the focus before it is.
    flushSync(() => setShown(groupOf(groups, Math.floor(position / columns))))
    focusEntry(position)
  }

  function followErrorLink(event: MouseEvent): void {
    const hash = event.target instanceof Element ? event.target.closest('a')?.hash : undefined
    const position = /^#field-entry-(\d+)$/.exec(hash ?? '')?.[1]
    if (position === undefined) return
    event.preventDefault()
    goToEntry(Number(position))
  }

  async function check(event: FormEvent): Promise<void> {
    event.preventDefault()
    const errors = findErrors(layout, places, state.entries)
    if (errors.length > 0) return setFound(errors)
    if (!(await store.keepNow())) return setFound([{ message: sayDraft(store.read().draft, zone) }])
    startLeaving(() => router.push(participationPaths.check(studyId)))
  }

  return (
    <form action={formAction} onSubmit={(event) => void check(event)} className="flex flex-col gap-5">
      <input type="hidden" name="studyId" value={studyId} />
      <input type="hidden" name="draftVersion" value={draftVersion} />
      <div onClick={followErrorLink} className="empty:hidden">
        <ErrorSummary errors={found ?? fromServer} />
      </div>
      {state.isRestored && (
        <Notice tone="info" title="What you typed before was still in this tab and is back" isLive />
      )}
      {state.draft.kind === 'changed-elsewhere' && (
        <DraftDifference
          mine={state}
          other={state.draft.other}
          nameOf={(position) => (places[position] ? namePlace(layout, places[position]) : '')}
          onKeepMine={store.keepMine}
          onTakeOther={store.takeOther}
        />
      )}
      <CommaChoice entries={state.entries} isLive={isLive} onSettle={store.settleCommas} />
      <MaterialSteps
        groups={groups}
        shown={shown}
        isLive={isLive}
        onShow={(index) => {
          void store.keepNow()
          flushSync(() => setShown(index))
        }}
      >
        <div
          {...grid.handlers}
          // One column of boxes across a wide page would put the name of each far from where it is typed.
          className={clsx(
            'border bg-sheet max-sm:border-0 max-sm:bg-transparent',
            columns === 1 && 'max-w-text',
          )}
        >
          <ResultTable
            layout={layout}
            groups={groups}
            entries={state.entries}
            active={grid.active}
            isLive={isLive}
            shown={shown}
            onText={grid.onText}
          />
          <SheetStatus
            layout={layout}
            places={places}
            entries={state.entries}
            active={grid.active}
            announced={announced}
            isLive={isLive}
          />
        </div>
      </MaterialSteps>
      <Field
        name="remark"
        label="Remark"
        hint="For the coordinator. Say here why a result is missing, if one is. Name no laboratory and no person."
        isOptional
      >
        {(wiring) => (
          <TextArea
            {...wiring}
            value={state.remark}
            onChange={(event) => store.setRemark(event.target.value)}
            rows={3}
            maxLength={2000}
            className="max-w-text"
          />
        )}
      </Field>
      <div className="flex flex-wrap items-center gap-x-5 gap-y-2">
        <SubmitButton pendingLabel="Keeping…" isPending={isLeaving}>
          Check before returning
        </SubmitButton>
        <DraftLine
          draft={state.draft}
          settled={state.settled}
          zone={zone}
          due={props.due}
          studyId={studyId}
        />
      </div>
    </form>
  )
}

const untouched: FormState = { errors: {}, values: {} }

function textOf(value: string | string[] | undefined): string | undefined {
  return typeof value === 'string' ? value : undefined
}

function serverErrors(sent: FormState, problems: readonly SheetError[]): SheetError[] {
  const fields = Object.entries(sent.errors).flatMap(([field, messages]) =>
    messages.map((message) => ({ field, message })),
  )
  return [...(sent.message ? [{ message: sent.message }] : []), ...fields, ...problems]
}

function findErrors(
  layout: ReturnLayout,
  places: ReturnType<typeof listPlaces>,
  entries: readonly string[],
): SheetError[] {
  if (entries.every((text) => text.trim() === ''))
    return [{ field: entryName(0), message: 'No result was entered yet.' }]
  return places.flatMap((place, position) => {
    const measurand = layout.measurands.find(({ id }) => id === place.measurandId)
    const said = measurand && describeEntry(entries[position] ?? '', measurand)
    if (said?.kind !== 'fault' && said?.kind !== 'question') return []
    return [{ field: entryName(position), message: `${namePlace(layout, place)}: ${said.words}` }]
  })
}

function groupByMaterial(layout: ReturnLayout): MaterialGroup[] {
  const rows = listRows(layout)
  return layout.materials.map(({ id, name }) => ({
    name,
    firstRow: rows.findIndex(({ materialId }) => materialId === id),
    rows: rows.filter(({ materialId }) => materialId === id),
  }))
}

function groupOf(groups: readonly MaterialGroup[], row: number): number {
  return groups.findIndex(({ firstRow, rows }) => row >= firstRow && row < firstRow + rows.length)
}
