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
  /** No other mark beyond a limit stands so near that flat labels would touch. */
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
export const consistencyInnerHeight = 272

const leastInnerWidth = 898
const markStep = 11
// What a label needs above its mark: lying flat, and standing upright.
const flatLabel = 20
const flatLabelWidth = 76
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
  const beyond = cells.filter((cell) => cell.beyond)
  for (const cell of beyond) {
    cell.isAlone = beyond.every((other) => other === cell || Math.abs(other.x - cell.x) > flatLabelWidth)
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

/** k starts at zero, where it means no spread at all; h has its limits on both sides of zero. */
function consistencyDomain(data: ConsistencyData, cells: readonly PlacedCell[]) {
  const above = cells.filter((cell) => cell.value >= 0)
  const below = cells.filter((cell) => cell.value < 0)
  const limits = data.criticals.map((limit) => limit.value)
  const upper = furthest([...above.map((cell) => cell.value), ...limits])
  if (data.statistic === 'k') return { low: 0, high: reachWithLabels(above, upper, 0) }

  const lower = furthest([...below.map((cell) => -cell.value), ...limits])
  const high = reachWithLabels(above, upper, lower)
  return { low: -reachWithLabels(below, lower, high), high }
}

function furthest(values: readonly number[]): number {
  return Math.max(1, ...values) * 1.06
}

/** How far one side of the axis must go so that the labels of its marks have room, given the other side. */
function reachWithLabels(cells: readonly PlacedCell[], least: number, otherSide: number): number {
  const needed = cells
    .filter((cell) => cell.beyond)
    .map((cell) => {
      const share = (cell.isAlone ? flatLabel : uprightLabel) / consistencyInnerHeight
      return (Math.abs(cell.value) + share * otherSide) / (1 - share)
    })
  return Math.max(least, ...needed)
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
