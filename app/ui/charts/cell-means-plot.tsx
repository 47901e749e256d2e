'use client'

import { useId, useState } from 'react'
import { formatFigure } from '../primitives/format-figure'
import { leastWidth } from './least-width'
import { scaleTicks, tickDecimals } from './scale-ticks'
import { SvgTag } from './svg-tag'

export interface CellMean {
  code: string
  mean: number
  /** The standard deviation of the cell, or null when it holds a single result. */
  sd: number | null
  count: number
  /** Left out of the precision by a decision; still drawn, open and dashed. */
  isSetAside?: boolean
}

interface CellMeansPlotProps {
  svgId: string
  material: string
  unit: string
  cells: readonly CellMean[]
  grandMean: number
  /** The curve that means of equal laboratories would follow: a t density of this scale and these degrees of freedom. */
  reference: { scale: number; degreesOfFreedom: number }
  /** Half the width of the central 95 % of the curve, in the unit; its bounds are drawn when it is given. */
  halfWidth?: number
  /** Decimals of the values read out. */
  decimals: number
}

const height = 330
const margin = { top: 18, right: 116, bottom: 46, left: 74 }
const innerHeight = height - margin.top - margin.bottom
const curveWidth = 84

/**
 * Cell means with ± s, and beside them the curve that means of equal laboratories would follow: a t density
 * as wide as what lies within the laboratories makes it. Slid along the axis it asks of any place: could these cells share this mean?
 */
export function CellMeansPlot(props: CellMeansPlotProps) {
  const { svgId, material, unit, cells, grandMean, halfWidth, decimals } = props
  const labelId = useId()
  const [centre, setCentre] = useState(grandMean)
  const { scale } = props.reference
  const slot = Math.max(44, 810 / Math.max(1, cells.length))
  const innerWidth = slot * cells.length
  const width = innerWidth + margin.left + margin.right

  const ends = cells.flatMap((cell) => [cell.mean - (cell.sd ?? 0), cell.mean + (cell.sd ?? 0)])
  const reach = [...ends, grandMean - 4 * scale, grandMean + 4 * scale]
  // Results without any scatter still need an axis with a length.
  const pad = (Math.max(...reach) - Math.min(...reach)) * 0.06 || Math.abs(grandMean) * 0.01 || 1
  const low = Math.min(...reach) - pad
  const high = Math.max(...reach) + pad
  const y = (value: number) => margin.top + ((high - value) / (high - low)) * innerHeight
  const x = (index: number) => margin.left + (index + 0.5) * slot
  const ticks = scaleTicks({ low, high, count: 6 })
  const spell = (value: number) => `${formatFigure(value.toFixed(decimals))}\u00a0${unit}`

  return (
    <div>
      <div
        role="region"
        aria-label={`Cell means, ${material}`}
        tabIndex={0}
        data-scrolls
        className="relative overflow-x-auto"
      >
        <svg
          id={svgId}
          viewBox={`0 0 ${width} ${height}`}
          role="group"
          aria-labelledby={`${labelId}-title`}
          aria-describedby={`${labelId}-description`}
          className="mx-auto block w-full font-mono print:min-w-0!"
          style={{ minWidth: leastWidth(width), maxWidth: width * 1.15 }}
        >
          <title id={`${labelId}-title`}>{`Cell means with ± s, ${material}`}</title>
          <desc id={`${labelId}-description`}>
            {`${cells.length} laboratories; mean of the cell means ${spell(grandMean)}. The curve shows how means would spread ` +
              'if laboratories differed by the scatter within them alone.'}
          </desc>
          <Axis ticks={ticks} y={y} right={margin.left + innerWidth} unit={unit} material={material} />
          {halfWidth !== undefined && (
            <rect
              x={margin.left}
              width={innerWidth}
              y={y(centre + halfWidth)}
              height={y(centre - halfWidth) - y(centre + halfWidth)}
              fill="var(--verdigris)"
              fillOpacity="0.1"
            />
          )}
          <line
            x1={margin.left}
            x2={margin.left + innerWidth + curveWidth}
            y1={y(centre)}
            y2={y(centre)}
            stroke="var(--verdigris)"
            strokeDasharray="7 3"
          />
          {cells.map((cell, index) => (
            <Cell
              key={cell.code}
              cell={cell}
              x={x(index)}
              y={y}
              spell={spell}
              tagAt={margin.top + innerHeight + 14}
            />
          ))}
          <path
            d={densityPath({
              centre,
              scale,
              degreesOfFreedom: props.reference.degreesOfFreedom,
              y,
              base: margin.left + innerWidth,
              low,
              high,
            })}
            fill="var(--verdigris)"
            fillOpacity="0.14"
            stroke="var(--verdigris)"
            strokeWidth="1.5"
          />
        </svg>
      </div>
      <div
        className="flex flex-wrap items-center gap-x-4 gap-y-1 border-t px-3 py-1.5 text-small"
        data-screen-only
      >
        <label htmlFor={`${labelId}-centre`}>Slide the reference curve</label>
        <input
          id={`${labelId}-centre`}
          type="range"
          min={low}
          max={high}
          step={(high - low) / 400}
          value={centre}
          aria-valuetext={spell(centre)}
          onChange={(event) => setCentre(event.target.valueAsNumber)}
          className="h-6 min-w-48 flex-1"
        />
        <output htmlFor={`${labelId}-centre`} className="font-mono">
          {centre === grandMean ? `at the mean of the cell means, ${spell(centre)}` : `at ${spell(centre)}`}
          {halfWidth !== undefined &&
            `; ${countWithin(cells, centre, halfWidth)} of ${cells.length} means in the shaded zone`}
        </output>
      </div>
    </div>
  )
}

function countWithin(cells: readonly CellMean[], centre: number, halfWidth: number): number {
  return cells.filter((cell) => Math.abs(cell.mean - centre) <= halfWidth).length
}

interface AxisProps {
  ticks: readonly number[]
  y: (value: number) => number
  right: number
  unit: string
  material: string
}

function Axis({ ticks, y, right, unit, material }: AxisProps) {
  const decimals = tickDecimals(ticks)
  return (
    <g fontSize="12" fill="var(--ink-soft)">
      {ticks.map((tick) => (
        <g key={tick}>
          <line
            x1={margin.left}
            x2={right}
            y1={y(tick)}
            y2={y(tick)}
            stroke="var(--rule)"
            strokeWidth="0.7"
          />
          <text x={margin.left - 10} y={y(tick) + 4} textAnchor="end">
            {formatFigure(tick.toFixed(decimals))}
          </text>
        </g>
      ))}
      <text
        transform={`translate(14 ${margin.top + innerHeight / 2}) rotate(-90)`}
        textAnchor="middle"
        fontFamily="var(--font-sans)"
      >
        {`cell mean, ${material} (${unit})`}
      </text>
    </g>
  )
}

interface CellProps {
  cell: CellMean
  x: number
  y: (value: number) => number
  spell: (value: number) => string
  tagAt: number
}

function Cell({ cell, x, y, spell, tagAt }: CellProps) {
  const spread = cell.sd === null ? 'one result' : `± ${spell(cell.sd)}, ${cell.count} results`
  const words = `${cell.code}: ${spell(cell.mean)} ${spread}${cell.isSetAside ? '; set aside' : ''}`
  return (
    <g role="img" aria-label={words}>
      <title>{words}</title>
      <rect x={x - 14} y={margin.top} width="28" height={innerHeight} fill="transparent" />
      {cell.sd !== null && (
        <path
          d={`M${x} ${y(cell.mean + cell.sd)}V${y(cell.mean - cell.sd)}M${x - 4} ${y(cell.mean + cell.sd)}h8M${x - 4} ${y(cell.mean - cell.sd)}h8`}
          fill="none"
          stroke="var(--ink)"
          strokeDasharray={cell.isSetAside ? '3 2.5' : undefined}
        />
      )}
      <circle
        cx={x}
        cy={y(cell.mean)}
        r="4.4"
        fill={cell.isSetAside ? 'var(--sheet)' : 'var(--ink)'}
        stroke="var(--ink)"
        strokeWidth="1.5"
      />
      <SvgTag code={cell.code} x={x} y={tagAt} />
    </g>
  )
}

interface DensityProps {
  centre: number
  scale: number
  degreesOfFreedom: number
  y: (value: number) => number
  base: number
  low: number
  high: number
}

/** The t density on its side, its peak always the same height: its width is what is to be compared. */
function densityPath({ centre, scale, degreesOfFreedom, y, base, low, high }: DensityProps): string {
  const reach = 5
  const points = Array.from({ length: 101 }, (_, index) => {
    const t = -reach + (2 * reach * index) / 100
    const density = (1 + (t * t) / degreesOfFreedom) ** (-(degreesOfFreedom + 1) / 2)
    return { value: centre + t * scale, x: base + curveWidth * density }
  }).filter((point) => point.value >= low && point.value <= high)
  const [first] = points
  const last = points[points.length - 1]
  if (!first || !last) return ''
  const line = points.map((point) => `L${point.x.toFixed(1)} ${y(point.value).toFixed(1)}`).join('')
  return `M${base} ${y(first.value).toFixed(1)}${line}L${base} ${y(last.value).toFixed(1)}Z`
}
