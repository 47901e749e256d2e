'use client'

import type { KeyboardEvent } from 'react'
import { formatFigure } from '../primitives/format-figure'
import { cellKey, describeCell, useDrawing, type Scales } from './consistency-drawing'
import type { PlacedCell } from './consistency-layout'
import { nextCell } from './next-cell'
import { SeriesMark } from './series-mark'

/** The marks, each of them to be pointed at or focused, the ones beyond a limit filled and labelled. */
export function Marks({ yScale }: Scales) {
  const { data, layout, active, entry, choose } = useDrawing()
  const y = yScale as (value: number) => number

  const onKeyDown = (event: KeyboardEvent<SVGGElement>, cell: PlacedCell) => {
    const next = nextCell({ cells: layout.cells, from: cell, key: event.key })
    if (!next) return
    event.preventDefault()
    const marks = event.currentTarget.parentElement?.querySelectorAll<SVGGElement>('[data-cell]') ?? []
    Array.from(marks)
      .find((mark) => mark.dataset.cell === cellKey(next))
      ?.focus()
  }

  return (
    <g>
      {layout.cells.map((cell) => (
        <g
          key={cellKey(cell)}
          data-cell={cellKey(cell)}
          role="img"
          aria-label={describeCell(data, cell)}
          tabIndex={cell === entry ? 0 : -1}
          onFocus={() => choose(cell)}
          onBlur={() => choose(null)}
          onMouseEnter={() => choose(cell)}
          onMouseLeave={() => choose(null)}
          onKeyDown={(event) => onKeyDown(event, cell)}
          className="outline-none"
        >
          <title>{describeCell(data, cell)}</title>
          <circle cx={cell.x} cy={y(cell.value)} r="9" fill="transparent" />
          {active === cell && (
            <circle
              data-transient
              cx={cell.x}
              cy={y(cell.value)}
              r="9.5"
              fill="none"
              stroke="var(--verdigris)"
              strokeWidth="2"
            />
          )}
          <SeriesMark
            series={cell.series}
            x={cell.x}
            y={y(cell.value)}
            fill={cell.beyond === null ? 'open' : cell.beyond === '5 %' ? 'faint' : 'full'}
          />
          {cell.beyond && (
            <BeyondLabel cell={cell} y={y(cell.value)} isByMaterial={data.order === 'material'} />
          )}
        </g>
      ))}
    </g>
  )
}

function BeyondLabel({ cell, y, isByMaterial }: { cell: PlacedCell; y: number; isByMaterial: boolean }) {
  const { layout } = useDrawing()
  const value = formatFigure(cell.value.toFixed(2))
  const isBelow = cell.value < 0
  if (cell.isAlone) {
    const text = `${isByMaterial ? cell.code : cell.material} ${value}`
    const half = text.length * 3.4
    const x = Math.min(Math.max(cell.x, half), layout.innerWidth - half)
    return (
      <text x={x} y={y + (isBelow ? 19 : -10)} textAnchor="middle" fontSize="11" fontWeight="600" {...halo}>
        {text}
      </text>
    )
  }
  return (
    <text
      transform={`translate(${cell.x + 4} ${y + (isBelow ? 10 : -10)}) rotate(-90)`}
      textAnchor={isBelow ? 'end' : 'start'}
      fontSize="11"
      fontWeight="600"
      {...halo}
    >
      {value}
    </text>
  )
}

// A rim in the colour of the sheet keeps a label legible where it crosses a hairline or a stem.
const halo = {
  fill: 'var(--ink)',
  stroke: 'var(--sheet)',
  strokeWidth: 6,
  strokeLinejoin: 'round',
  paintOrder: 'stroke',
} as const
