import { counted } from '@/lib/domain/plural'
import type { PublicationSnapshot, PublishedMeasurand } from '@/lib/domain/publication-snapshot'
import { Section } from '../layout/section'
import { DownloadLink } from '../primitives/download-link'
import { withinSentence } from '../primitives/within-sentence'
import { ConsistencyPlots } from './consistency-plots'
import { OutlierTests } from './outlier-tests'
import { PrecisionReport } from './precision-report'
import { SetAsideTable } from './set-aside-table'

interface PublishedStudyProps {
  snapshot: PublicationSnapshot
  /** Where the published files lie; a preview has none. */
  files?: string
  /** Index of the measurand shown. */
  chosen?: number
}

/** A frozen study as everyone reads it. */
export function PublishedStudy({ snapshot, files, chosen = 0 }: PublishedStudyProps) {
  const measurand = snapshot.measurands[chosen]
  if (!measurand) return null
  return (
    <div className="flex min-w-0 flex-col gap-8">
      <Statement snapshot={snapshot} measurand={measurand} />
      <PrecisionReport measurand={measurand} />
      <ConsistencyPlots document={measurand.document} />
      <Section
        id="outlier-tests"
        title="Outlier tests"
        note="A test proposes; a person decides. Pairs are consulted only where neither end alone is an outlier."
      >
        <OutlierTests document={measurand.document} />
      </Section>
      <Section
        id="set-aside"
        title="Cells set aside"
        note="By code, with the reason; their results are in the coded data."
      >
        <SetAsideTable cells={measurand.exclusions} />
      </Section>
      <Section
        id="recompute"
        title="Recompute it"
        note={`Analysis ${snapshot.analysis.number} by engine ${snapshot.analysis.engineVersion}.`}
      >
        <p className="mb-3 max-w-text">
          The coded results give these figures again by the product’s own command. Laboratories appear by
          codes drawn for this study alone; a laboratory that tells others one of its results can be
          recognised by it.
        </p>
        <pre className="mb-3 overflow-x-auto border bg-sheet px-3 py-2 font-mono text-small" tabIndex={0}>
          {analyseCommand(
            measurand,
            `${files ? `${files.split('/').at(-1)}-` : ''}results-${chosen + 1}.csv`,
          )}
        </pre>
        {files && (
          <p className="flex flex-wrap gap-5">
            <DownloadLink href={`${files}/results-${chosen + 1}.csv`} format="CSV">
              Coded results
            </DownloadLink>
            <DownloadLink href={`${files}/analysis-${chosen + 1}.json`} format="JSON">
              The analysis
            </DownloadLink>
          </p>
        )}
      </Section>
    </div>
  )
}

function Statement({
  snapshot,
  measurand,
}: {
  snapshot: PublicationSnapshot
  measurand: PublishedMeasurand
}) {
  const { input } = measurand.document
  const returned = countReturned(measurand.csv)
  const layout = snapshot.levels.map(({ name, count }) => counted(count, name)).join(' × ')
  return (
    <Section title="Precision statement">
      <div className="flex max-w-text flex-col gap-3">
        <p>
          {returned.laboratories} laboratories tested {snapshot.materials.length} materials by{' '}
          {snapshot.study.method}, {layout} in each cell, and returned {returned.results} results for{' '}
          {withinSentence(measurand.name)}.
          {input.excluded > 0
            ? ` ${input.excluded} of them were set aside, with the reasons given below.`
            : ' None was set aside.'}
          {input.censored > 0 ? ` ${input.censored} lay below or above a limit and carry no number.` : ''}
        </p>
        <p>
          The limits r and R are{' '}
          {snapshot.study.limitFactor === '2.77' ? '1.96·√2' : snapshot.study.limitFactor} times the
          repeatability and reproducibility standard deviations. They describe the agreement between results
          and are no specification.
        </p>
      </div>
    </Section>
  )
}

/** The command that makes this document from these results; the factor in full, so that every digit agrees. */
function analyseCommand({ document, hasTrueZero }: PublishedMeasurand, file: string): string {
  const inner = document.input.nesting.slice(1, -1)
  const { limitFactor } = document.settings
  return [
    `npm run --silent analyse -- ${file}`,
    ...(inner.length > 0 ? [`--nest "${inner.join(',')}"`] : []),
    ...(limitFactor === 2.8 ? [] : [`--factor ${limitFactor}`]),
    ...(hasTrueZero ? [] : ['--no-true-zero']),
  ].join(' ')
}

/** What came back, before anything was set aside. */
function countReturned(csv: string): { results: number; laboratories: number } {
  const lines = csv.trim().split('\n').slice(1)
  return { results: lines.length, laboratories: new Set(lines.map((line) => line.split(',')[0])).size }
}
