import { MarginNote } from '../layout/margin'

const parts = [
  ['precision', 'Precision'],
  ['intervals', '95 % intervals'],
  ['variance-shares', 'Where the variance comes from'],
  ['analysis-of-variance', 'Analysis of variance'],
  ['level', 'Precision against level'],
  ['means', 'Laboratory means'],
  ['h-plot', 'Between laboratories, h'],
  ['k-plot', 'Within laboratories, k'],
  ['outlier-tests', 'Outlier tests'],
  ['set-aside', 'Cells set aside'],
  ['recompute', 'Recompute it'],
] as const

/** A report is many screens long; whoever seeks one part of it need not pass all the others. */
export function ReportContents() {
  return (
    <nav aria-label="On this page">
      <MarginNote title="On this page">
        <ul className="flex flex-col">
          {parts.map(([id, name]) => (
            <li key={id}>
              <a href={`#${id}`} className="inline-block min-h-6">
                {name}
              </a>
            </li>
          ))}
        </ul>
      </MarginNote>
    </nav>
  )
}
