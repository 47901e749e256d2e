import type { FieldWiring } from '@/app/ui/primitives/field'
import { controlLook } from '@/app/ui/primitives/control-look'
import type { ZoneGroup } from '@/lib/domain/list-zones'

interface ZoneSelectProps {
  wiring: FieldWiring
  /** Handed down from the server, since a browser may know other zones. */
  zones: readonly ZoneGroup[]
  defaultValue: string
}

/** All time zones by region; the browser finds a place by its first letters. */
export function ZoneSelect({ wiring, zones, defaultValue }: ZoneSelectProps) {
  return (
    <select {...wiring} defaultValue={defaultValue} className={`${controlLook} h-9`}>
      <option value="">Choose a time zone</option>
      {zones.map(({ region, zones: places }) => (
        <optgroup key={region} label={region}>
          {places.map(({ value, label }) => (
            <option key={value} value={value}>
              {label}
            </option>
          ))}
        </optgroup>
      ))}
    </select>
  )
}
