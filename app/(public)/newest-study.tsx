import clsx from 'clsx'
import Link from 'next/link'
import type { ReactNode } from 'react'
import { VarianceShares } from '@/app/ui/analysis/precision-plots'
import { PrecisionTable } from '@/app/ui/analysis/precision-table'
import { Section } from '@/app/ui/layout/section'
import { formatFigure } from '@/app/ui/primitives/format-figure'
import { withinSentence } from '@/app/ui/primitives/within-sentence'
import { showDay } from '@/lib/domain/show-time'
import type { Publication } from '@/lib/use-cases/publications/read-publications'
import { paths } from '@/lib/web/paths'

/** The question of the front page answered by what was published last: its own figures, none made for show. */
export function NewestStudy({ publication: { slug, snapshot, publishedOn } }: { publication: Publication }) {
  const { study } = snapshot
  const measurand = snapshot.measurands[0]
  if (!measurand) return null
  const { document, unit, hasTrueZero, name } = measurand
  const answer = document.materials.find(
    ({ rounded }) => rounded.repeatabilityLimit !== null && rounded.reproducibilityLimit !== null,
  )
  return (
    <Section
      title={`One answer: ${withinSentence(study.title)}`}
      note={`${study.shortName}, published ${showDay(publishedOn, 'UTC')} · ${document.input.laboratories} laboratories · ${name}, ${unit}`}
      actions={
        <Link href={paths.publication(slug)} className="prose-link inline-block min-h-6">
          Read the whole study
        </Link>
      }
    >
      <div
        className={clsx(
          'grid items-start gap-x-10 gap-y-6',
          answer && 'margin:grid-cols-[17rem_minmax(0,1fr)]',
        )}
      >
        {answer && (
          <dl className="flex flex-col gap-5 sm:max-margin:flex-row sm:max-margin:gap-10">
            <Limit value={answer.rounded.repeatabilityLimit ?? ''} unit={unit} where="within one laboratory">
              Two results of one laboratory for {answer.material} differ by more than this about once in
              twenty.
            </Limit>
            <Limit
              value={answer.rounded.reproducibilityLimit ?? ''}
              unit={unit}
              where="between two laboratories"
            >
              The same for two results from two laboratories.
            </Limit>
          </dl>
        )}
        <PrecisionTable document={document} unit={unit} hasTrueZero={hasTrueZero} />
      </div>
      <div className="mt-8">
        <VarianceShares document={document} />
      </div>
    </Section>
  )
}

function Limit({
  value,
  unit,
  where,
  children,
}: {
  value: string
  unit: string
  where: string
  children: ReactNode
}) {
  return (
    <div className="flex flex-col sm:max-margin:flex-1 border-t-[3px] border-verdigris pt-3">
      <dt className="order-2 font-semibold">{where}</dt>
      <dd className="order-1 font-heading text-figure font-bold">
        {formatFigure(value)} <span className="text-title font-medium">{unit}</span>
      </dd>
      <dd className="order-3 mt-1 text-small text-ink-soft">{children}</dd>
    </div>
  )
}
