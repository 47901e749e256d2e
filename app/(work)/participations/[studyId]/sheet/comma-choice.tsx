import { Button } from '@/app/ui/primitives/button'
import { Notice } from '@/app/ui/primitives/notice'
import { RadioGroup } from '@/app/ui/primitives/radio-group'
import { readReportedValue } from '@/lib/domain/reported-value'

interface CommaChoiceProps {
  entries: readonly string[]
  isLive: boolean
  onSettle: (commaIs: 'decimal' | 'thousands') => void
}

/** Asks once for the whole sheet what the comma is in values that can be read in two ways; guesses nothing. */
export function CommaChoice({ entries, isLive, onSettle }: CommaChoiceProps) {
  const open = entries.flatMap((text) => {
    // Every key press asks this of every value; most have no comma at all.
    if (!text.includes(',')) return []
    const read = readReportedValue(text)
    return read.kind === 'ambiguous' ? [read] : []
  })
  const [first] = open
  if (!first) return null
  const [asDecimal, asThousands] = first.readings
  const title =
    open.length === 1
      ? `“${first.found}” can be read in two ways`
      : `${open.length} values, such as “${first.found}”, can be read in two ways`
  return (
    <Notice tone="warn" title={title}>
      {isLive ? (
        <div className="mt-2 flex flex-wrap gap-2">
          <Button onClick={() => onSettle('decimal')}>The comma is the decimal mark: {asDecimal}</Button>
          <Button onClick={() => onSettle('thousands')}>The comma groups thousands: {asThousands}</Button>
        </div>
      ) : (
        <RadioGroup
          name="commaIs"
          legend="In such values the comma is"
          isOptional
          options={[
            { value: 'decimal', label: `the decimal mark: ${asDecimal}` },
            { value: 'thousands', label: `the mark between thousands: ${asThousands}` },
          ]}
        />
      )}
    </Notice>
  )
}
