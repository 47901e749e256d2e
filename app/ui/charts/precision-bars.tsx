interface PrecisionBarsProps {
  svgId: string
  materials: readonly PrecisionShares[]
  /** What stands between replicate and laboratory in the design, such as 'days'; unused where nothing does. */
  groupName?: string
}

export interface PrecisionShares {
  name: string
  /** Variances, in the square of the unit; null where the design has no such component. */
  within: number
  betweenGroups: number | null
  betweenLaboratories: number
}

interface Part {
  key: 'within' | 'groups' | 'laboratories'
  label: string
  /** Where it begins and how much it takes, both as a share of the whole. */
  from: number
  share: number
}

const width = 960
const left = 128
const barWidth = width - left - 24
const rowHeight = 40
const barHeight = 24
const top = 40

/**
 * How the reproducibility variance of each material splits up. The parts differ in lightness and in texture
 * before they differ in hue, and carry their share in figures.
 */
export function PrecisionBars({ svgId, materials, groupName = 'groups' }: PrecisionBarsProps) {
  const height = top + materials.length * rowHeight + 34
  const hasGroups = materials.some((material) => material.betweenGroups !== null)
  const legend: Pick<Part, 'key' | 'label'>[] = [
    { key: 'within', label: 'repeatability' },
    ...(hasGroups ? [{ key: 'groups' as const, label: `between ${groupName}` }] : []),
    { key: 'laboratories', label: 'between laboratories' },
  ]

  return (
    <div
      role="region"
      aria-label="Shares of variance"
      tabIndex={0}
      data-scrolls
      className="relative overflow-x-auto"
    >
      <svg
        id={svgId}
        viewBox={`0 0 ${width} ${height}`}
        role="img"
        aria-labelledby={`${svgId}-title ${svgId}-description`}
        className="mx-auto block w-full min-w-[620px] max-w-[1080px] font-mono print:min-w-0!"
      >
        <title id={`${svgId}-title`}>Shares of the reproducibility variance, by material</title>
        <desc id={`${svgId}-description`}>{materials.map(inWords(groupName)).join(' ')}</desc>
        <defs>
          <pattern
            id={`${svgId}-hatch`}
            width="6"
            height="6"
            patternUnits="userSpaceOnUse"
            patternTransform="rotate(45)"
          >
            <rect width="6" height="6" fill="var(--ochre-wash)" />
            <line x1="0" x2="0" y1="0" y2="6" stroke="var(--ochre)" strokeWidth="2" />
          </pattern>
        </defs>
        <g fontSize="13" fill="var(--ink)" fontFamily="var(--font-sans)">
          {legend.map((part, index) => (
            <g key={part.key}>
              <rect x={left + index * 180} y="11" width="16" height="12" {...dress(part.key, svgId)} />
              <text x={left + index * 180 + 23} y="21.5">
                {part.label}
              </text>
            </g>
          ))}
        </g>
        {materials.map((material, index) => (
          <Bar key={material.name} material={material} y={top + index * rowHeight} svgId={svgId} />
        ))}
        <PercentAxis y={top + materials.length * rowHeight} />
      </svg>
    </div>
  )
}

function Bar({ material, y, svgId }: { material: PrecisionShares; y: number; svgId: string }) {
  return (
    <g>
      <text
        x={left - 12}
        y={y + 17}
        textAnchor="end"
        fontSize="13"
        fill="var(--ink)"
        fontFamily="var(--font-sans)"
      >
        {material.name}
      </text>
      {partsOf(material).map((part) => {
        const start = left + part.from * barWidth
        const length = part.share * barWidth
        return (
          <g key={part.key}>
            <rect x={start} y={y} width={length} height={barHeight} {...dress(part.key, svgId)} />
            {length > 40 && (
              <text
                x={start + length / 2}
                y={y + 16.5}
                textAnchor="middle"
                fontSize="12"
                fontWeight="600"
                fill={part.key === 'within' ? 'var(--paper)' : 'var(--ink)'}
                {...(part.key === 'groups'
                  ? { stroke: 'var(--sheet)', strokeWidth: 4, paintOrder: 'stroke' }
                  : {})}
              >
                {percent(part.share)}
              </text>
            )}
          </g>
        )
      })}
    </g>
  )
}

function PercentAxis({ y }: { y: number }) {
  return (
    <g fontSize="12" fill="var(--ink-soft)">
      {[0, 0.25, 0.5, 0.75, 1].map((share) => (
        <g key={share}>
          <line
            x1={left + share * barWidth}
            x2={left + share * barWidth}
            y1={y - 8}
            y2={y - 3}
            stroke="var(--ink-soft)"
          />
          <text x={left + share * barWidth} y={y + 12} textAnchor="middle">
            {percent(share)}
          </text>
        </g>
      ))}
      <text x={left - 22} y={y + 12} textAnchor="end" fontFamily="var(--font-sans)">
        share of variance
      </text>
    </g>
  )
}

function partsOf({ within, betweenGroups, betweenLaboratories }: PrecisionShares): Part[] {
  const total = within + (betweenGroups ?? 0) + betweenLaboratories
  // A material whose every result is the same has no variance to share out.
  if (total <= 0) return []
  const withinShare = within / total
  const groupShare = (betweenGroups ?? 0) / total
  return [
    { key: 'within', label: 'within', from: 0, share: withinShare },
    ...(betweenGroups === null
      ? []
      : [{ key: 'groups' as const, label: 'groups', from: withinShare, share: groupShare }]),
    {
      key: 'laboratories',
      label: 'between laboratories',
      from: withinShare + groupShare,
      share: betweenLaboratories / total,
    },
  ]
}

function inWords(groupName: string) {
  return (material: PrecisionShares) => {
    const parts = partsOf(material)
    if (parts.length === 0) return `${material.name}: no variance.`
    const words = parts.map(
      (part) => `${part.key === 'groups' ? `between ${groupName}` : part.label} ${percent(part.share)}`,
    )
    return `${material.name}: ${words.join(', ')}.`
  }
}

function dress(key: Part['key'], svgId: string) {
  if (key === 'within') return { fill: 'var(--verdigris)', stroke: 'var(--ink)', strokeWidth: 1 }
  if (key === 'groups') return { fill: `url(#${svgId}-hatch)`, stroke: 'var(--ink)', strokeWidth: 1 }
  return { fill: 'var(--indigo-wash)', stroke: 'var(--ink)', strokeWidth: 1 }
}

const percent = (share: number) => `${Math.round(share * 100)}\u00a0%`
