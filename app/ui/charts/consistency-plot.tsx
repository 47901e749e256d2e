'use client'

import { ScatterPlot, type ScatterPlotCustomSvgLayer, type ScatterPlotLayerProps } from '@nivo/scatterplot'
import { createContext, useContext, useId, useMemo, useState, type KeyboardEvent } from 'react'
import { Tag } from '../primitives/tag'
import { formatFigure } from '../primitives/format-figure'
import {
  consistencyInnerHeight,
  consistencyMargin as margin,
  layOutConsistency,
  type ConsistencyData,
  type ConsistencyLayout,
  type PlacedCell,
} from './consistency-layout'
import { leastWidth } from './least-width'
import { nextCell } from './next-cell'
import { SeriesMark, seriesHue } from './series-mark'
import { SvgTag } from './svg-tag'

interface ConsistencyPlotProps extends ConsistencyData {
  /** The id of the drawing, by which a ChartFrame finds it for a download. */
  svgId: string
}

type Datum = { x: number; y: number }
type Layer = ScatterPlotCustomSvgLayer<Datum>
type Scales = ScatterPlotLayerProps<Datum>

interface Drawing {
  data: ConsistencyData
  layout: ConsistencyLayout
  active: PlacedCell | null
  /** The one mark that Tab reaches; the arrow keys go on from there. */
  entry: PlacedCell | undefined
  choose: (cell: PlacedCell | null) => void
}

const DrawingContext = createContext<Drawing | null>(null)

const subject = { h: 'between laboratories', k: 'within laboratories' }
const height = consistencyInnerHeight + margin.top + margin.bottom
const layers: Layer[] = [Band, Grid, Limits, Stems, GroupAxis, Legend, Marks]

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

function useDrawing(): Drawing {
  const drawing = useContext(DrawingContext)
  if (!drawing) throw new Error('A layer of the consistency plot was drawn outside of it.')
  return drawing
}

/** The column that is being read, in a wash behind everything. */
function Band({ innerHeight }: Scales) {
  const { layout, active } = useDrawing()
  const group = active && layout.groups[active.group]
  if (!group) return null
  return (
    <rect
      data-transient
      x={group.x - group.width / 2}
      y="0"
      width={group.width}
      height={innerHeight}
      fill="var(--verdigris-wash)"
    />
  )
}

function Grid({ yScale, innerWidth, innerHeight }: Scales) {
  const { data, layout } = useDrawing()
  const y = yScale as (value: number) => number
  return (
    <g fontSize="12" fill="var(--ink-soft)">
      {layout.ticks.map((tick) => (
        <g key={tick}>
          <line
            x1="0"
            x2={innerWidth}
            y1={y(tick)}
            y2={y(tick)}
            stroke={tick === 0 ? 'var(--ink-soft)' : 'var(--rule)'}
            strokeWidth={tick === 0 ? 1 : 0.7}
          />
          <text x="-10" y={y(tick) + 4} textAnchor="end">
            {formatFigure(String(tick))}
          </text>
        </g>
      ))}
      <text
        transform={`translate(-36 ${innerHeight / 2}) rotate(-90)`}
        textAnchor="middle"
        fontFamily="var(--font-sans)"
      >
        {`${data.statistic} (no unit)`}
      </text>
    </g>
  )
}

/** Critical values as hairlines, named at their end; names that would touch are moved apart. */
function Limits({ yScale, innerWidth }: Scales) {
  const { layout } = useDrawing()
  const y = yScale as (value: number) => number
  const lines = layout.limits.map((limit) => ({ ...limit, y: y(limit.value) })).sort((a, b) => a.y - b.y)
  const labelsAt = apart(lines.map((line) => line.y + 4))
  return (
    <g fontSize="12" fill="var(--ink)">
      {lines.map((line, index) => (
        <g key={`${line.label} ${line.value}`}>
          <line
            x1="0"
            x2={innerWidth}
            y1={line.y}
            y2={line.y}
            stroke="var(--ink)"
            strokeDasharray={line.isOuter ? '7 3' : '1.5 4'}
          />
          <text x={innerWidth + 8} y={labelsAt[index]}>
            {line.label}
          </text>
        </g>
      ))}
    </g>
  )
}

/** Baselines from the top down, each at least a line below the one before. */
function apart(baselines: readonly number[]): number[] {
  return baselines.reduce<number[]>(
    (placed, baseline) => [...placed, Math.max(baseline, (placed[placed.length - 1] ?? -Infinity) + 13)],
    [],
  )
}

function Stems({ yScale }: Scales) {
  const { layout } = useDrawing()
  const y = yScale as (value: number) => number
  return (
    <g strokeOpacity="0.6">
      {layout.cells.map((cell) => (
        <line
          key={cellKey(cell)}
          x1={cell.x}
          x2={cell.x}
          y1={y(0)}
          y2={y(cell.value)}
          stroke={seriesHue(cell.series)}
        />
      ))}
    </g>
  )
}

function GroupAxis({ innerHeight }: Scales) {
  const { data, layout } = useDrawing()
  if (data.order === 'laboratory') {
    return layout.groups.map((group) => (
      <SvgTag
        key={group.name}
        code={group.name}
        x={group.x}
        y={innerHeight + 14}
        isUpright={group.width < 48}
      />
    ))
  }
  return (
    <g textAnchor="middle" fill="var(--ink)">
      {layout.cells.map((cell) => (
        <text
          key={cellKey(cell)}
          transform={`translate(${cell.x + 3.5} ${innerHeight + 8}) rotate(-90)`}
          textAnchor="end"
          fontSize="10"
          fill="var(--ink-soft)"
        >
          {cell.code}
        </text>
      ))}
      {layout.groups.map((group, index) => (
        <g key={group.name}>
          {index > 0 && (
            <line
              x1={group.x - group.width / 2}
              x2={group.x - group.width / 2}
              y1="0"
              y2={innerHeight + 40}
              stroke="var(--rule)"
            />
          )}
        </g>
      ))}
    </g>
  )
}

/** The materials by name, each beside its mark: over the plot, or over its own group. */
function Legend() {
  const { data, layout } = useDrawing()
  const step = Math.min(130, layout.innerWidth / Math.max(1, data.materials.length))
  return (
    <g fontSize="13" fill="var(--ink)" fontFamily="var(--font-sans)">
      {data.materials.map((material, index) => {
        const group = layout.groups[index]
        const x = data.order === 'material' && group ? group.x - group.width / 2 + 12 : 6 + index * step
        return (
          <g key={material}>
            <SeriesMark series={index} x={x} y={-20} />
            <text x={x + 11} y="-15.5">
              {material}
            </text>
          </g>
        )
      })}
    </g>
  )
}

function Marks({ yScale }: Scales) {
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
          aria-label={describe(data, cell)}
          tabIndex={cell === entry ? 0 : -1}
          onFocus={() => choose(cell)}
          onBlur={() => choose(null)}
          onMouseEnter={() => choose(cell)}
          onMouseLeave={() => choose(null)}
          onKeyDown={(event) => onKeyDown(event, cell)}
          className="outline-none"
        >
          <title>{describe(data, cell)}</title>
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
const halo = { fill: 'var(--ink)', stroke: 'var(--sheet)', strokeWidth: 3, paintOrder: 'stroke' } as const

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

function describe(data: ConsistencyData, cell: PlacedCell): string {
  const value = formatFigure(cell.value.toFixed(2))
  return `${cell.code}, ${cell.material}: ${data.statistic} = ${value}${afterValue(data, cell)}`
}

function afterValue(data: ConsistencyData, cell: PlacedCell): string {
  const limit = data.criticals.find((critical) => critical.label === cell.beyond)
  const beyond = cell.beyond ? `, beyond ${cell.beyond}${limit ? ` (${limit.value.toFixed(2)})` : ''}` : ''
  return `${beyond}${cell.note ? `. ${cell.note}` : ''}`
}

function cellKey(cell: PlacedCell): string {
  return `${cell.laboratory}-${cell.series}`
}
