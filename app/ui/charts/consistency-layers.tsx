'use client'

import { formatFigure } from '../primitives/format-figure'
import { cellKey, useDrawing, type Scales } from './consistency-drawing'
import { SeriesMark, seriesHue } from './series-mark'
import { SvgTag } from './svg-tag'

/** The column that is being read, in a wash behind everything. */
export function Band({ innerHeight }: Scales) {
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

export function Grid({ yScale, innerWidth, innerHeight }: Scales) {
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
export function Limits({ yScale, innerWidth }: Scales) {
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

export function Stems({ yScale }: Scales) {
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

export function GroupAxis({ innerHeight }: Scales) {
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
export function Legend() {
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
