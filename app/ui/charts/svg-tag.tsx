interface SvgTagProps {
  code: string
  x: number
  y: number
  isUpright?: boolean
}

/** The specimen tag inside a plot, centred on x with its top at y; upright where the marks stand too close. */
export function SvgTag({ code, x, y, isUpright = false }: SvgTagProps) {
  const width = tagWidth(code)
  const placed = isUpright
    ? `translate(${x - 9} ${y + width}) rotate(-90)`
    : `translate(${x - width / 2} ${y})`
  return (
    <g transform={placed}>
      <path
        d={`M6 0.5H${width - 0.5}V17.5H6L0.5 12V6Z`}
        fill="var(--sheet)"
        stroke="var(--ink)"
        strokeWidth="1"
      />
      <circle cx="7" cy="9" r="1.9" fill="none" stroke="var(--ink)" strokeWidth="1" />
      <text x="12" y="13" fontSize="11.5" fontWeight="600" fill="var(--ink)" fontFamily="var(--font-mono)">
        {code}
      </text>
    </g>
  )
}

/** Red Hat Mono advances 0.6 em a sign. */
function tagWidth(code: string): number {
  return 17 + code.length * 6.9
}
