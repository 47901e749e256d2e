interface TimeProps {
  /** The instant, in ISO 8601 with its offset. */
  at: string
  /** As it is read: '14 Mar 2027, 17:00'. */
  text: string
  /** The zone it is read in: 'Lisbon', 'your time'. */
  zone?: string
}

export function Time({ at, text, zone }: TimeProps) {
  return (
    <time dateTime={at} className="whitespace-nowrap">
      {text}
      {zone && <span className="text-ink-soft"> {zone}</span>}
    </time>
  )
}
