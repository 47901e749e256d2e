import type { ReactNode } from 'react'
import { ChartFrame } from '@/app/ui/charts/chart-frame'
import { HalfWidthPlot } from '@/app/ui/charts/half-width-plot'
import { Section } from '@/app/ui/layout/section'
import { DataTable } from '@/app/ui/primitives/data-table'
import { readPlanAssumptions } from '@/lib/domain/read-plan-assumptions'
import {
  type ForeseenFigure,
  foreseePrecision,
  innerLevelsOf,
} from '@/lib/use-cases/studies/foresee-precision'
import type { StudyView } from '@/lib/use-cases/studies/read-study'
import { AssumptionsForm } from './assumptions-form'
import { sayAssumed } from './say-assumed'

interface ForeseenPrecisionProps {
  view: Pick<StudyView, 'layout' | 'counts' | 'study'>
  query: Readonly<Record<string, string | string[] | undefined>>
}

/** How well the plan, as it is kept, will know its standard deviations: the curve, and how many laboratories it takes. */
export function ForeseenPrecision({ view, query }: ForeseenPrecisionProps) {
  const { levels } = view.layout
  const inner = innerLevelsOf(levels)
  const read = readPlanAssumptions(query, inner.length)
  const { assumptions } = read
  const expected = view.counts.invited - view.counts.declined
  const foreseen = foreseePrecision({ levels, expected, assumptions })
  const { figures, points, draws } = foreseen
  const names = figures.map(nameOf)
  const withExpected = points.find(({ laboratories }) => laboratories === expected)
  const wish = percent(assumptions.within)

  return (
    <Section
      id="foreseen"
      title="How well will the figures be known?"
      note="Read from the plan as it was last saved."
    >
      <div className="flex flex-col gap-5">
        <AssumptionsForm
          studyId={view.study.studyId}
          levels={inner.map(({ name }) => name)}
          texts={read.texts}
          errors={read.errors}
        />
        <ul className="flex max-w-text flex-col gap-1">
          {figures.map((figure) => (
            <li key={nameOf(figure)}>
              {symbolOf(figure)} to ±{wish}
              {figure.least === null ? (
                ': not even with 1000 laboratories.'
              ) : (
                <>
                  : you need <strong className="whitespace-nowrap font-semibold">p ≥ {figure.least}</strong>{' '}
                  laboratories.
                </>
              )}
            </li>
          ))}
          {withExpected && (
            <li className="text-ink-soft">
              With the {expected} laboratories that are named and have not declined:{' '}
              {names
                .map((name, series) => `${name} ±${wholePercent(withExpected.halfWidths[series] ?? 0)}`)
                .join(', ')}
              .
            </li>
          )}
        </ul>
        <ChartFrame
          level={3}
          title="Half-widths by number of laboratories"
          summary={sayAssumed({ assumptions, inner, foreseen })}
          svgId="half-widths"
          table={
            <DataTable
              caption="Half-widths in per cent of the value, by number of laboratories"
              rows={points}
              rowKey={({ laboratories }) => String(laboratories)}
              columns={[
                {
                  key: 'p',
                  header: 'Laboratories',
                  kind: 'figure',
                  isRowHeader: true,
                  cell: ({ laboratories }) => String(laboratories),
                },
                ...names.map((name, series) => ({
                  key: name,
                  header: name,
                  kind: 'figure' as const,
                  cell: ({ halfWidths }: (typeof points)[number]) =>
                    (100 * (halfWidths[series] ?? 0)).toFixed(0),
                })),
              ]}
            />
          }
        >
          <HalfWidthPlot
            svgId="half-widths"
            names={names}
            points={points}
            within={assumptions.within}
            description={`${figures
              .map((figure, series) => `${names[series]}: ${leastInWords(figure)}`)
              .join('; ')}, for ±${wish}.${draws === null ? '' : ' Simulated.'}`}
          />
        </ChartFrame>
      </div>
    </Section>
  )
}

function nameOf({ kind, varies }: ForeseenFigure): string {
  return kind === 'intermediate' ? `${varies.join(' and ')} varying` : kind
}

function symbolOf({ kind, varies }: ForeseenFigure): ReactNode {
  if (kind === 'repeatability')
    return (
      <>
        Repeatability, s<sub>r</sub>,
      </>
    )
  if (kind === 'reproducibility')
    return (
      <>
        Reproducibility, s<sub>R</sub>,
      </>
    )
  return (
    <>
      Intermediate precision, s<sub>I</sub> with {varies.join(' and ')} varying,
    </>
  )
}

function leastInWords({ least }: ForeseenFigure): string {
  return least === null ? 'more than 1000 laboratories' : `${least} laboratories`
}

const percent = (share: number) => `${Number((share * 100).toFixed(1))}\u00a0%`
const wholePercent = (share: number) => `${(share * 100).toFixed(0)}\u00a0%`
