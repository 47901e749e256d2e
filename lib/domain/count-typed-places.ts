import { counted } from './plural'
/** How many results a plan asks for while it is still being typed. */
export interface TypedPlaces {
  readonly measurands: number
  readonly materials: number
  readonly levels: readonly { readonly name: string; readonly count: number }[]
  /** Null until all three parts have something. */
  readonly places: number | null
}

/** @param typed the plan form's texts by field name, such as "levels.0.count" */
export function countTypedPlaces(typed: ReadonlyMap<string, string>): TypedPlaces {
  const measurands = countNamed(typed, 'measurands')
  const materials = countNamed(typed, 'materials')
  const levels = rowsOf(typed, 'levels').flatMap((row) => {
    const name = typed.get(`levels.${row}.name`)?.trim() ?? ''
    const count = Number(typed.get(`levels.${row}.count`) ?? '')
    return name && Number.isInteger(count) && count >= 1 ? [{ name, count }] : []
  })
  const isWhole = measurands > 0 && materials > 0 && levels.length > 0
  const places = isWhole
    ? measurands * materials * levels.reduce((product, { count }) => product * count, 1)
    : null
  return { measurands, materials, levels, places }
}

/** "This asks each laboratory for 60 results: 1 measurand × 5 materials × 4 days × 3 replicates." */
export function describeTypedPlaces({ measurands, materials, levels, places }: TypedPlaces): string {
  if (places === null)
    return 'Name a measurand, a material and a level, and the number of results asked stands here.'
  const factors = [
    counted(measurands, 'measurand'),
    counted(materials, 'material'),
    ...levels.map(({ name, count }) => counted(count, name)),
  ]
  return `This asks each laboratory for ${counted(places, 'result')}: ${factors.join(' × ')}.`
}

function countNamed(typed: ReadonlyMap<string, string>, list: string): number {
  return rowsOf(typed, list).filter((row) => typed.get(`${list}.${row}.name`)?.trim()).length
}

function rowsOf(typed: ReadonlyMap<string, string>, list: string): number[] {
  const rows = new Set<number>()
  for (const name of typed.keys()) {
    const row = new RegExp(`^${list}\\.(\\d+)\\.`).exec(name)?.[1]
    if (row !== undefined) rows.add(Number(row))
  }
  return [...rows].sort((a, b) => a - b)
}
