import type { ReturnLayout } from '@/lib/spreadsheet/layout'
import { listPlaces, placeKey } from '@/lib/spreadsheet/layout'
import type { RandomNumbers } from './random-numbers'

/** Where a twine's results lie and how far they scatter, per measurand: share of the value, not of a target. */
const twines: Readonly<Record<string, { force: number; density: number }>> = {
  sisal: { force: 412, density: 3.34 },
  hemp: { force: 655, density: 3.02 },
  jute: { force: 298, density: 2.61 },
  coir: { force: 176, density: 4.18 },
  flax: { force: 521, density: 2.27 },
}

const shares = { between: 0.024, day: 0.009, within: 0.016 }

/** How one laboratory departs from the others. */
export interface Habit {
  /** Its force lies this share off in every material. */
  readonly forceShare?: number
  /** One cell whose results scatter this many times as much. */
  readonly scatter?: { material: string; times: number }
  /** A material it could not test. */
  readonly missing?: string
  /** It reports a value below its limit in one place. */
  readonly censored?: { material: string; limit: string }
}

export const twineNames = Object.keys(twines)

/** One laboratory's invented results for a layout of twines, as typed text by place. */
export function inventResults(
  layout: ReturnLayout,
  numbers: RandomNumbers,
  habit: Habit = {},
): Record<string, string> {
  const entries: Record<string, string> = {}
  const shifts = new Map<string, number>()
  const shiftOf = (key: string, share: number) => {
    const known = shifts.get(key)
    if (known !== undefined) return known
    const drawn = share * numbers.normal()
    shifts.set(key, drawn)
    return drawn
  }
  for (const place of listPlaces(layout)) {
    const material = layout.materials.find(({ id }) => id === place.materialId)
    const measurand = layout.measurands.find(({ id }) => id === place.measurandId)
    const twine = material && twines[material.name]
    if (!twine || !measurand) throw new Error('the layout asks for a twine that is not invented')
    const isForce = measurand.unit === 'N'
    const cell = `${place.measurandId} ${material.name}`
    const between = shiftOf(cell, isForce ? shares.between : shares.between / 2)
    const day = place.groups.length > 1 ? shiftOf(`${cell} ${place.groups[0]}`, shares.day) : 0
    const times = isForce && habit.scatter?.material === material.name ? habit.scatter.times : 1
    const within = times * (isForce ? shares.within : shares.within / 3) * numbers.normal()
    const value =
      (isForce ? twine.force : twine.density) *
      (1 + between + day + within + (isForce ? (habit.forceShare ?? 0) : 0))
    if (habit.missing === material.name) continue
    const isCensored =
      habit.censored?.material === material.name && isForce && place.groups.every((group) => group === 1)
    entries[placeKey(place)] = isCensored ? `<${habit.censored?.limit}` : value.toFixed(measurand.decimals)
  }
  return entries
}
