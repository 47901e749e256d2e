export type Limit = '5 %' | '1 %' | '0.5 %'

export interface ConsistencyCell {
  material: string
  value: number
  beyond: Limit | null
  note: string
}

export interface ConsistencyData {
  statistic: 'h' | 'k'
  materials: readonly string[]
  /** Cells in the order of the materials; null where a laboratory has none. */
  laboratories: readonly { code: string; cells: readonly (ConsistencyCell | null)[] }[]
  criticals: readonly { label: string; value: number }[]
  order: 'laboratory' | 'material'
}

export interface PlacedCell extends ConsistencyCell {
  code: string
  series: number
  laboratory: number
  /** Position along the axis, in drawing units from its left end. */
  x: number
  /** Which group of the axis it stands in: its laboratory or its material. */
  group: number
  /** Alone beyond a limit in its group, so that its label may lie flat. */
  isAlone: boolean
}

export interface ConsistencyLayout {
  width: number
  innerWidth: number
  cells: PlacedCell[]
  groups: { name: string; x: number; width: number }[]
  domain: { low: number; high: number }
  ticks: number[]
  limits: { label: string; value: number; isOuter: boolean }[]
}

export const consistencyMargin = { top: 34, right: 52, bottom: 46, left: 50 }
export const consistencyInnerHeight = 236

const leastInnerWidth = 898
const markStep = 11
// What a label needs above its mark: lying flat, and standing upright.
const flatLabel = 20
const uprightLabel = 46

/** Where everything of an h or k plot stands. Pure, so that server, browser and tests agree. */
export function layOutConsistency(data: ConsistencyData): ConsistencyLayout {
  const groupNames =
    data.order === 'laboratory' ? data.laboratories.map((laboratory) => laboratory.code) : data.materials
  const marksInGroup = data.order === 'laboratory' ? data.materials.length : data.laboratories.length
  const step = data.order === 'laboratory' ? markStep : markStep + 2
  const groupWidth = Math.max(marksInGroup * step + 14, leastInnerWidth / Math.max(1, groupNames.length))
  const innerWidth = groupWidth * Math.max(1, groupNames.length)
  const spread = Math.min(step + 4, (groupWidth - 14) / Math.max(1, marksInGroup))

  const cells = data.laboratories.flatMap((laboratory, laboratoryIndex) =>
    laboratory.cells.flatMap((cell, series): PlacedCell[] => {
      if (!cell) return []
      const group = data.order === 'laboratory' ? laboratoryIndex : series
      const place = data.order === 'laboratory' ? series : laboratoryIndex
      const x = (group + 0.5) * groupWidth + (place - (marksInGroup - 1) / 2) * spread
      return [
        { ...cell, code: laboratory.code, series, laboratory: laboratoryIndex, x, group, isAlone: false },
      ]
    }),
  )
  for (const cell of cells) {
    const beyondInGroup = cells.filter((other) => other.group === cell.group && other.beyond)
    cell.isAlone = groupWidth > 62 && beyondInGroup.length === 1
  }

  const domain = consistencyDomain(data, cells)
  return {
    width: innerWidth + consistencyMargin.left + consistencyMargin.right,
    innerWidth,
    cells,
    groups: groupNames.map((name, index) => ({ name, x: (index + 0.5) * groupWidth, width: groupWidth })),
    domain,
    ticks: wholeTicks(domain),
    limits: placeLimits(data),
  }
}

/** k starts at zero, where it means no spread at all; h is the same on both sides of zero. */
function consistencyDomain(data: ConsistencyData, cells: readonly PlacedCell[]) {
  const isTwoSided = data.statistic === 'h'
  const height = consistencyInnerHeight
  const reach = [
    ...cells.map((cell) => Math.abs(cell.value)),
    ...data.criticals.map((limit) => limit.value),
    1,
  ]
  const labelled = cells
    .filter((cell) => cell.beyond)
    .map((cell) => {
      const room = ((cell.isAlone ? flatLabel : uprightLabel) / height) * (isTwoSided ? 2 : 1)
      return Math.abs(cell.value) / (1 - room)
    })
  const high = Math.max(Math.max(...reach) * 1.06, ...labelled)
  return { low: isTwoSided ? -high : 0, high }
}

function wholeTicks({ low, high }: { low: number; high: number }): number[] {
  const step = high > 12 ? 5 : high > 6 ? 2 : 1
  const ticks: number[] = []
  for (let tick = Math.ceil(low / step) * step; tick <= high; tick += step) ticks.push(tick === 0 ? 0 : tick)
  return ticks
}

function placeLimits({ criticals, statistic }: ConsistencyData) {
  const outer = Math.max(...criticals.map((limit) => limit.value))
  return criticals.flatMap((limit) => {
    const above = { ...limit, isOuter: limit.value === outer }
    return statistic === 'h' ? [above, { ...above, value: -limit.value }] : [above]
  })
}
