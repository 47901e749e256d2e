import {
  useCallback,
  useRef,
  useState,
  type ClipboardEvent,
  type FocusEvent,
  type KeyboardEvent,
  type MouseEvent,
} from 'react'
import { fieldId } from '@/app/ui/primitives/field-id'
import { entryName } from '../../entry-names'
import { gridMove, placeBlock, type GridSize } from './grid-move'
import { readPastedBlock } from './read-pasted-block'
import type { SheetStore } from './sheet-store'

interface Grid extends GridSize {
  store: SheetStore
  announce: (words: string) => void
}

/** Makes a table of inputs behave like a sheet: one tab stop, keys that move, blocks that can be pasted. */
export function useGrid({ rows, columns, store, announce }: Grid) {
  const [active, setActive] = useState(0)
  const editing = useRef(false)
  /** What the cell held when it was entered, for Escape. */
  const entered = useRef('')
  const isFreshClick = useRef(false)

  const onFocus = (event: FocusEvent) => {
    const cell = cellOf(event.target)
    if (!cell) return
    setActive(cell.position)
    editing.current = false
    entered.current = cell.input.value
    cell.input.select()
  }

  const onMouseDown = (event: MouseEvent) => {
    const cell = cellOf(event.target)
    // The first click chooses the cell as a whole, the second sets the caret in its text.
    isFreshClick.current = cell !== null && document.activeElement !== cell.input
    if (cell && !isFreshClick.current) editing.current = true
  }

  const onMouseUp = (event: MouseEvent) => {
    if (isFreshClick.current && cellOf(event.target)) event.preventDefault()
    isFreshClick.current = false
  }

  const onKeyDown = (event: KeyboardEvent) => {
    const cell = cellOf(event.target)
    if (!cell || event.nativeEvent.isComposing || event.altKey) return
    const { input, position } = cell
    if (event.key === 'F2') {
      event.preventDefault()
      editing.current = !editing.current
      if (editing.current) input.setSelectionRange(input.value.length, input.value.length)
      else input.select()
      return
    }
    if (event.key === 'Escape') {
      store.setEntry(position, entered.current)
      editing.current = false
      requestAnimationFrame(() => input.select())
      return
    }
    const target = gridMove(position, event, { rows, columns, isEditing: editing.current })
    if (target === null) return
    // Enter in an input would send the form.
    event.preventDefault()
    if (target !== position) focusEntry(target)
    else if (event.key === 'Enter') input.select()
  }

  const onPaste = (event: ClipboardEvent) => {
    const cell = cellOf(event.target)
    const block = cell && readPastedBlock(event.clipboardData.getData('text/plain'))
    if (!cell || !block) return
    event.preventDefault()
    const { texts, outside } = placeBlock(cell.position, block, { rows, columns })
    store.setEntries(texts)
    announce(sayPasted(texts.size, outside))
  }

  const onText = useCallback((position: number, text: string) => store.setEntry(position, text), [store])

  return { active, onText, handlers: { onFocus, onMouseDown, onMouseUp, onKeyDown, onPaste } }
}

export function focusEntry(position: number): void {
  document.getElementById(fieldId(entryName(position)))?.focus()
}

function cellOf(target: EventTarget): { input: HTMLInputElement; position: number } | null {
  if (!(target instanceof HTMLInputElement) || target.dataset.position === undefined) return null
  return { input: target, position: Number(target.dataset.position) }
}

function sayPasted(inside: number, outside: number): string {
  const pasted = inside === 1 ? 'One value pasted.' : `${inside} values pasted.`
  if (outside === 0) return pasted
  return `${pasted} Beyond the edge of the sheet, and left out: ${outside}.`
}
