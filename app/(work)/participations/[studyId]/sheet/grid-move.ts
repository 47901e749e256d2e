export interface GridSize {
  readonly rows: number
  readonly columns: number
}

interface Key {
  readonly key: string
  readonly shiftKey: boolean
  readonly ctrlKey: boolean
  readonly metaKey: boolean
}

/**
 * Where a key leads from a place in the grid, or null when the key is not the grid's. While the text of a cell is
 * being edited, the keys that move a caret along a line stay with the text.
 */
export function gridMove(
  position: number,
  key: Key,
  { rows, columns, isEditing }: GridSize & { isEditing: boolean },
): number | null {
  const row = Math.floor(position / columns)
  const column = position % columns
  const at = (r: number, c: number) => clamp(r, rows) * columns + clamp(c, columns)
  const isFar = key.ctrlKey || key.metaKey
  switch (key.key) {
    case 'ArrowUp':
      return at(isFar ? 0 : row - 1, column)
    case 'ArrowDown':
      return at(isFar ? rows - 1 : row + 1, column)
    case 'Enter':
      return at(row + (key.shiftKey ? -1 : 1), column)
    case 'ArrowLeft':
      return isEditing || key.shiftKey ? null : at(row, isFar ? 0 : column - 1)
    case 'ArrowRight':
      return isEditing || key.shiftKey ? null : at(row, isFar ? columns - 1 : column + 1)
    case 'Home':
      return isEditing || key.shiftKey ? null : isFar ? 0 : at(row, 0)
    case 'End':
      return isEditing || key.shiftKey ? null : isFar ? at(rows - 1, columns - 1) : at(row, columns - 1)
    default:
      return null
  }
}

function clamp(index: number, count: number): number {
  return Math.max(0, Math.min(count - 1, index))
}

/** Which places a pasted block fills from a place on, and how many of its cells find none. */
export function placeBlock(
  position: number,
  block: readonly (readonly string[])[],
  { rows, columns }: GridSize,
) {
  const row = Math.floor(position / columns)
  const column = position % columns
  const texts = new Map<number, string>()
  let outside = 0
  block.forEach((cells, down) =>
    cells.forEach((text, across) => {
      if (row + down < rows && column + across < columns)
        texts.set((row + down) * columns + column + across, text)
      else outside += 1
    }),
  )
  return { texts, outside }
}
