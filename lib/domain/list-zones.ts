import { timeZones } from './time-zones'

export interface ZoneGroup {
  readonly region: string
  readonly zones: readonly { readonly value: string; readonly label: string }[]
}

/** Every time zone known here, by region, as a list to choose from. */
export function listZones(): ZoneGroup[] {
  const groups = new Map<string, { value: string; label: string }[]>()
  for (const value of timeZones) {
    const [region = '', ...place] = value.split('/')
    const label = place.join(', ').replaceAll('_', ' ')
    const key = label ? region : 'Universal'
    groups.set(key, [...(groups.get(key) ?? []), { value, label: label || value }])
  }
  return [...groups].map(([region, zones]) => ({ region, zones }))
}
