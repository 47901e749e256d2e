import type { ScatterPlotLayerProps } from '@nivo/scatterplot'
import { createContext, useContext } from 'react'
import { formatFigure } from '../primitives/format-figure'
import type { ConsistencyData, ConsistencyLayout, PlacedCell } from './consistency-layout'

export type Datum = { x: number; y: number }
export type Scales = ScatterPlotLayerProps<Datum>

/** What the layers of one consistency plot share. nivo calls them with its scales alone. */
interface Drawing {
  data: ConsistencyData
  layout: ConsistencyLayout
  active: PlacedCell | null
  /** The one mark that Tab reaches; the arrow keys go on from there. */
  entry: PlacedCell | undefined
  choose: (cell: PlacedCell | null) => void
}

export const DrawingContext = createContext<Drawing | null>(null)

export function useDrawing(): Drawing {
  const drawing = useContext(DrawingContext)
  if (!drawing) throw new Error('A layer of the consistency plot was drawn outside of it.')
  return drawing
}

/** A cell in one sentence: its tag, its material, its value, the limit it lies beyond. */
export function describeCell(data: ConsistencyData, cell: PlacedCell): string {
  const value = formatFigure(cell.value.toFixed(2))
  return `${cell.code}, ${cell.material}: ${data.statistic} = ${value}${afterValue(data, cell)}`
}

export function afterValue(data: ConsistencyData, cell: PlacedCell): string {
  const limit = data.criticals.find((critical) => critical.label === cell.beyond)
  const beyond = cell.beyond ? `, beyond ${cell.beyond}${limit ? ` (${limit.value.toFixed(2)})` : ''}` : ''
  return `${beyond}${cell.note ? `. ${cell.note}` : ''}`
}

export function cellKey(cell: PlacedCell): string {
  return `${cell.laboratory}-${cell.series}`
}
