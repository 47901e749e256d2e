type MarkFill = 'open' | 'faint' | 'full'

interface SeriesMarkProps {
  /** Which series: it decides shape and hue together, so that either alone tells the series. */
  series: number
  x: number
  y: number
  fill?: MarkFill
  radius?: number
}

const hues = ['var(--verdigris)', 'var(--ochre)', 'var(--indigo)', 'var(--madder)', 'var(--moss)']

/** The hue of a series. There are fewer hues than shapes, on purpose: their pairs repeat only after 35. */
export function seriesHue(series: number): string {
  return hues[series % hues.length] ?? 'var(--ink)'
}

/** The mark of one cell. Open lies within the limits, faint beyond the first, full beyond the second. */
export function SeriesMark({ series, x, y, fill = 'open', radius = 4.6 }: SeriesMarkProps) {
  const hue = seriesHue(series)
  const outline = outlines[series % outlines.length] ?? outlines[0]
  return (
    <g transform={`translate(${round(x)} ${round(y)}) scale(${radius / 4.6})`} strokeWidth="1.5" stroke={hue}>
      <path d={outline} fill={fill === 'full' ? hue : 'var(--sheet)'} />
      {fill === 'faint' && <path d={outline} fill={hue} fillOpacity="0.45" />}
    </g>
  )
}

// Areas are about equal, so that no material looks heavier than another.
const outlines = [
  'M-4.4 0a4.4 4.4 0 1 0 8.8 0a4.4 4.4 0 1 0 -8.8 0Z',
  'M-4 -4H4V4H-4Z',
  'M0 -5.2L5.3 4.1H-5.3Z',
  'M0 -5.7L5.7 0L0 5.7L-5.7 0Z',
  'M0 5.2L5.3 -4.1H-5.3Z',
  'M-4.9 0L-2.45 -4.25H2.45L4.9 0L2.45 4.25H-2.45Z',
  'M-1.7 -5H1.7V-1.7H5V1.7H1.7V5H-1.7V1.7H-5V-1.7H-1.7Z',
]

const round = (value: number) => Math.round(value * 100) / 100
