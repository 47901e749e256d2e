import { leastWidth } from './least-width'
import { scaleTicks } from './scale-ticks'
import { SeriesMark, seriesHue } from './series-mark'

interface HalfWidthPlotProps {
  svgId: string
  /** Names of the curves, in the order of the half-widths of each point. */
  names: readonly string[]
  /** Half-widths as fractions of the value, by the number of laboratories. */
  points: readonly { laboratories: number; halfWidths: readonly number[] }[]
  /** The half-width wished for: a hairline. */
  within: number
  description: string
}

const width = 960
const height = 340
const margin = { top: 22, right: 216, bottom: 48, left: 70 }
const innerWidth = width - margin.left - margin.right
const innerHeight = height - margin.top - margin.bottom
const labelStep = 17
const dashes = ['', '7 3', '2 3', '10 3 2 3']

/** How narrowly each standard deviation will be known, by the number of laboratories. Curves are told apart by dash, mark and hue, and named at their end. */
export function HalfWidthPlot({ svgId, names, points, within, description }: HalfWidthPlotProps) {
  const first = points[0]?.laboratories ?? 0
  const last = points.at(-1)?.laboratories ?? first
  const high = Math.max(within, ...points.flatMap(({ halfWidths }) => halfWidths)) * 1.05
  const x = (laboratories: number) =>
    margin.left + ((laboratories - first) / Math.max(1, last - first)) * innerWidth
  const y = (halfWidth: number) => margin.top + (1 - halfWidth / high) * innerHeight
  const curveEnds = names.map((_, series) => y(points.at(-1)?.halfWidths[series] ?? 0))
  const [wishedAt = 0, ...namesAt] = spread([y(within), ...curveEnds])

  return (
    <div
      role="region"
      aria-label="Half-widths by number of laboratories"
      tabIndex={0}
      data-scrolls
      className="relative overflow-x-auto"
    >
      <svg
        id={svgId}
        viewBox={`0 0 ${width} ${height}`}
        role="img"
        aria-labelledby={`${svgId}-title ${svgId}-description`}
        className="mx-auto block w-full font-mono print:min-w-0!"
        style={{ minWidth: leastWidth(width), maxWidth: width * 1.15 }}
      >
        <title id={`${svgId}-title`}>Half-width of each standard deviation, by number of laboratories</title>
        <desc id={`${svgId}-description`}>{description}</desc>
        <Axes x={x} y={y} first={first} last={last} high={high} />
        <line
          x1={margin.left}
          x2={margin.left + innerWidth}
          y1={y(within)}
          y2={y(within)}
          stroke="var(--ink)"
          strokeWidth="0.8"
        />
        <text x={margin.left + innerWidth + 12} y={wishedAt + 4} fontSize="12" fill="var(--ink)">
          {`wished: ${percent(within)}`}
        </text>
        {names.map((name, series) => (
          <g key={name}>
            <polyline
              points={points
                .map(
                  ({ laboratories, halfWidths }) =>
                    `${round(x(laboratories))},${round(y(halfWidths[series] ?? 0))}`,
                )
                .join(' ')}
              fill="none"
              stroke={seriesHue(series)}
              strokeWidth="1.8"
              strokeDasharray={dashes[series % dashes.length]}
            />
            {points
              .filter(({ laboratories }) => laboratories === last || (laboratories - first) % 4 === 0)
              .map(({ laboratories, halfWidths }) => (
                <SeriesMark
                  key={laboratories}
                  series={series}
                  x={x(laboratories)}
                  y={y(halfWidths[series] ?? 0)}
                  radius={3.8}
                />
              ))}
            <SeriesMark
              series={series}
              x={margin.left + innerWidth + 20}
              y={namesAt[series] ?? 0}
              radius={3.8}
            />
            <text
              x={margin.left + innerWidth + 32}
              y={(namesAt[series] ?? 0) + 4}
              fontSize="13"
              fill="var(--ink)"
              fontFamily="var(--font-sans)"
            >
              {name}
            </text>
          </g>
        ))}
        {points.map(({ laboratories, halfWidths }) => (
          <rect
            key={laboratories}
            x={x(laboratories) - innerWidth / points.length / 2}
            y={margin.top}
            width={innerWidth / points.length}
            height={innerHeight}
            fill="transparent"
          >
            <title>
              {`${laboratories} laboratories: ${names
                .map((name, series) => `${name} ±${percent(halfWidths[series] ?? 0)}`)
                .join(', ')}`}
            </title>
          </rect>
        ))}
      </svg>
    </div>
  )
}

interface AxesProps {
  x: (laboratories: number) => number
  y: (halfWidth: number) => number
  first: number
  last: number
  high: number
}

function Axes({ x, y, first, last, high }: AxesProps) {
  const bottom = margin.top + innerHeight
  return (
    <g fontSize="12" fill="var(--ink-soft)">
      {scaleTicks({ low: 0, high, count: 5 }).map((tick) => (
        <g key={tick}>
          <line
            x1={margin.left}
            x2={margin.left + innerWidth}
            y1={y(tick)}
            y2={y(tick)}
            stroke="var(--rule)"
            strokeWidth="0.7"
          />
          <text x={margin.left - 10} y={y(tick) + 4} textAnchor="end">
            {percent(tick)}
          </text>
        </g>
      ))}
      {scaleTicks({ low: first, high: last, count: 8 }).map((tick) => (
        <g key={tick}>
          <line x1={x(tick)} x2={x(tick)} y1={bottom} y2={bottom + 5} stroke="var(--ink-soft)" />
          <text x={x(tick)} y={bottom + 19} textAnchor="middle">
            {tick}
          </text>
        </g>
      ))}
      <text x={margin.left + innerWidth / 2} y={height - 8} textAnchor="middle" fontFamily="var(--font-sans)">
        laboratories
      </text>
      <text
        transform={`translate(14 ${margin.top + innerHeight / 2}) rotate(-90)`}
        textAnchor="middle"
        fontFamily="var(--font-sans)"
      >
        half-width, % of the value
      </text>
    </g>
  )
}

/** Names stand at the ends of their curves, moved down as far as it takes not to touch. */
function spread(places: readonly number[]): number[] {
  const moved = [...places]
  const downwards = places.map((_, index) => index).sort((a, b) => places[a]! - places[b]!)
  downwards.forEach((index, order) => {
    const above = downwards[order - 1]
    if (above !== undefined) moved[index] = Math.max(moved[index]!, moved[above]! + labelStep)
  })
  return moved
}

const percent = (share: number) => `${Math.round(share * 100)}\u00a0%`
const round = (value: number) => Math.round(value * 10) / 10
