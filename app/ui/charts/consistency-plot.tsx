'use client'

import { ScatterPlot, type ScatterPlotCustomSvgLayer } from '@nivo/scatterplot'
import { useId, useMemo, useState } from 'react'
import { formatFigure } from '../primitives/format-figure'
import { Tag } from '../primitives/tag'
import { afterValue, cellKey, DrawingContext, type Datum } from './consistency-drawing'
import { Band, Grid, GroupAxis, Legend, Limits, Stems } from './consistency-layers'
import {
  consistencyInnerHeight,
  consistencyMargin as margin,
  layOutConsistency,
  type ConsistencyData,
  type PlacedCell,
} from './consistency-layout'
import { Marks } from './consistency-marks'
import { leastWidth } from './least-width'

interface ConsistencyPlotProps extends ConsistencyData {
  /** The id of the drawing, by which a ChartFrame finds it for a download. */
  svgId: string
}

const subject = { h: 'between laboratories', k: 'within laboratories' }
const height = consistencyInnerHeight + margin.top + margin.bottom
const layers: ScatterPlotCustomSvgLayer<Datum>[] = [Band, Grid, Limits, Stems, GroupAxis, Legend, Marks]

/** The h or k of every cell, by laboratory or by material, against the critical values. */
export function ConsistencyPlot({ svgId, ...data }: ConsistencyPlotProps) {
  const { statistic, materials, laboratories, criticals, order } = data
  const layout = useMemo(
    () => layOutConsistency({ statistic, materials, laboratories, criticals, order }),
    [statistic, materials, laboratories, criticals, order],
  )
  const [active, setActive] = useState<PlacedCell | null>(null)
  const [lastKey, setLastKey] = useState<string | null>(null)
  const labelId = useId()

  const series = materials.map((material, index) => ({
    id: `${index} ${material}`,
    data: layout.cells.filter((cell) => cell.series === index).map((cell) => ({ x: cell.x, y: cell.value })),
  }))
  const choose = (cell: PlacedCell | null) => {
    setActive(cell)
    if (cell) setLastKey(cellKey(cell))
  }
  const entry = layout.cells.find((cell) => cellKey(cell) === lastKey) ?? layout.cells[0]
  const beyond = layout.cells.filter((cell) => cell.beyond).length

  return (
    <DrawingContext value={{ data, layout, active, entry, choose }}>
      <div
        role="region"
        aria-label={`Plot of ${statistic}, ${subject[statistic]}, by ${order}`}
        tabIndex={0}
        data-scrolls
        className="relative overflow-x-auto"
      >
        <svg
          id={svgId}
          viewBox={`0 0 ${layout.width} ${height}`}
          role="group"
          aria-labelledby={`${labelId}-title`}
          aria-describedby={`${labelId}-description`}
          className="mx-auto block w-full font-mono print:min-w-0!"
          style={{ minWidth: leastWidth(layout.width), maxWidth: layout.width * 1.15 }}
        >
          <title id={`${labelId}-title`}>{`${statistic}, ${subject[statistic]}`}</title>
          <desc id={`${labelId}-description`}>
            {`${layout.cells.length} cells of ${laboratories.length} laboratories and ${materials.length} materials; ` +
              `${beyond} beyond a critical value. Arrow keys go from cell to cell.`}
          </desc>
          {/* nivo owns scales and frame; nested, its fixed-size drawing scales with the view box around it. */}
          <ScatterPlot<Datum>
            renderWrapper={false}
            width={layout.width}
            height={height}
            margin={margin}
            data={series}
            xScale={{ type: 'linear', min: 0, max: layout.innerWidth }}
            yScale={{ type: 'linear', min: layout.domain.low, max: layout.domain.high }}
            layers={layers}
            animate={false}
            isInteractive={false}
            role="presentation"
          />
        </svg>
      </div>
      <Reading data={data} cell={active} />
    </DrawingContext>
  )
}

/** The visible line under the plot that says what the mark under the pointer or the focus says. */
function Reading({ data, cell }: { data: ConsistencyData; cell: PlacedCell | null }) {
  return (
    <p className="flex min-h-8 flex-wrap items-center gap-x-2 border-t px-3 py-1 text-small" data-screen-only>
      {cell ? (
        <>
          <Tag code={cell.code} />
          <span>
            {`${cell.material}: ${data.statistic} = `}
            <span className="font-mono font-semibold">{formatFigure(cell.value.toFixed(2))}</span>
            {afterValue(data, cell)}
          </span>
        </>
      ) : (
        <span className="text-ink-soft">
          Point at a mark to read it; or press Tab to reach the marks and the arrow keys to go from one to the
          next.
        </span>
      )}
    </p>
  )
}
