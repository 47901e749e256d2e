/** The product's sign: one bar cut into four equal pieces, one of them lifted a hair. */
export function Mark() {
  return (
    <svg width="34" height="18" viewBox="0 0 34 18" aria-hidden="true" focusable="false">
      <g fill="none" stroke="currentColor" strokeWidth="1.6">
        <rect x="1" y="6.2" width="7" height="10" />
        <rect x="9.3" y="6.2" width="7" height="10" />
        <rect x="17.6" y="2" width="7" height="10" fill="currentColor" />
        <rect x="26" y="6.2" width="7" height="10" />
      </g>
    </svg>
  )
}
