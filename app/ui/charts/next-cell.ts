import type { PlacedCell } from './consistency-layout'

/**
 * Where an arrow key leads from a cell: left and right along the axis as drawn, up and down to the same
 * material's mark in the laboratory before or after; Home and End to the ends.
 */
export function nextCell({
  cells,
  from,
  key,
}: {
  cells: readonly PlacedCell[]
  from: PlacedCell
  key: string
}): PlacedCell | undefined {
  const alongAxis = [...cells].sort((a, b) => a.x - b.x)
  const ofSameSeries = alongAxis.filter((cell) => cell.series === from.series)
  const step = (list: readonly PlacedCell[], by: number) => list[list.indexOf(from) + by]

  switch (key) {
    case 'ArrowRight':
      return step(alongAxis, 1)
    case 'ArrowLeft':
      return step(alongAxis, -1)
    case 'ArrowDown':
      return step(ofSameSeries, 1)
    case 'ArrowUp':
      return step(ofSameSeries, -1)
    case 'Home':
      return alongAxis[0]
    case 'End':
      return alongAxis[alongAxis.length - 1]
    default:
      return undefined
  }
}
