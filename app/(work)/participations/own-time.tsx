import { Time } from '@/app/ui/primitives/time'
import { showTime } from '@/lib/domain/show-time'

/** When something was received, in the laboratory's own time with its zone named. */
export function OwnTime({ at, zone }: { at: Date; zone: string }) {
  const shown = showTime(at, zone)
  return <Time at={shown.iso} text={shown.text} zone={shown.zoneText} />
}
