import Link from 'next/link'

interface MeasurandTabsProps {
  measurands: readonly { measurandId: string; name: string; unit: string }[]
  chosen: string
}

/** Chooses the measurand a page speaks of; nothing is drawn where there is one only. */
export function MeasurandTabs({ measurands, chosen }: MeasurandTabsProps) {
  if (measurands.length < 2) return null
  return (
    <nav aria-label="Measurand" data-screen-only>
      <ul className="flex flex-wrap gap-x-5 border-b">
        {measurands.map(({ measurandId, name, unit }) => (
          <li key={measurandId}>
            <Link
              href={`?measurand=${measurandId}`}
              aria-current={measurandId === chosen ? 'page' : undefined}
              className="-mb-px inline-flex min-h-9 items-center border-b-2 border-transparent aria-[current]:border-verdigris aria-[current]:font-semibold"
            >
              {name}, {unit}
            </Link>
          </li>
        ))}
      </ul>
    </nav>
  )
}
