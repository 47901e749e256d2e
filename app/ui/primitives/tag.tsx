/**
 * A specimen tag: clipped corners, a punched hole, and a code. Its outline is a stroke and three borders
 * rather than a clipped background, so it is there in forced colours and on paper.
 */
export function Tag({ code, label }: { code: string; label?: string }) {
  return (
    <span className="inline-flex h-6 max-w-full items-stretch whitespace-nowrap align-middle font-mono text-small font-semibold leading-none text-ink">
      <svg width="15" height="24" viewBox="0 0 15 24" aria-hidden="true" className="shrink-0">
        <path d="M15 0.5H7.5L0.5 7.5V16.5L7.5 23.5H15" fill="var(--sheet)" stroke="currentColor" />
        <circle cx="9" cy="12" r="2.5" fill="none" stroke="currentColor" />
      </svg>
      <span className="flex items-center rounded-r-[1px] border border-l-0 border-current bg-sheet pl-0.5 pr-2">
        {label && <span className="sr-only">{label} </span>}
        {code}
      </span>
    </span>
  )
}
