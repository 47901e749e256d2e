interface ProgressProps {
  label: string
  done: number
  total: number
  /** What is counted: 'values', 'messages'. */
  of: string
}

/** How far something has come, as a bar and as a count. Drawn as SVG, since forced colours empty backgrounds. */
export function Progress({ label, done, total, of }: ProgressProps) {
  const share = total > 0 ? Math.min(1, Math.max(0, done / total)) : 0
  const count = `${done} of ${total} ${of}`
  return (
    <div>
      <div className="mb-1 flex flex-wrap justify-between gap-x-4 text-small">
        <span>{label}</span>
        <span className="font-mono">{count}</span>
      </div>
      <div
        role="progressbar"
        aria-label={label}
        aria-valuemin={0}
        aria-valuemax={total}
        aria-valuenow={done}
        aria-valuetext={count}
      >
        <svg
          viewBox="0 0 100 8"
          preserveAspectRatio="none"
          aria-hidden="true"
          className="block h-2 w-full text-verdigris"
        >
          <rect
            x="0"
            y="0"
            width="100"
            height="8"
            fill="none"
            stroke="var(--edge)"
            vectorEffect="non-scaling-stroke"
          />
          <rect x="0" y="0" width={100 * share} height="8" fill="currentColor" />
        </svg>
      </div>
    </div>
  )
}
