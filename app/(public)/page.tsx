import type { Metadata } from 'next'
import Link from 'next/link'
import { PageShell } from '@/app/ui/layout/page-shell'
import { Section } from '@/app/ui/layout/section'
import { ButtonLink } from '@/app/ui/primitives/button'
import { showDay } from '@/lib/domain/show-time'
import { listPublications, type Publication } from '@/lib/use-cases/publications/read-publications'
import { paths } from '@/lib/web/paths'
import { readerContext } from '@/lib/web/reader-context'
import { FourPieces } from './four-pieces'
import { NewestStudy } from './newest-study'
import { PublicTopBar } from './public-top-bar'

export const metadata: Metadata = { title: { absolute: 'Evenlot: interlaboratory studies' } }

const steps = [
  [
    'One even lot',
    'A coordinator splits a lot of each material into identical specimens and says what is asked, of whom and until when.',
  ],
  [
    'Every single result',
    'Laboratories return each result, on screen or in their own workbook, under a code that only the coordinators can read.',
  ],
  [
    'Scrutiny by code',
    'Variances by nested analysis of variance, h and k, outlier tests. A test proposes; a person decides, with a written reason.',
  ],
  [
    'A statement for everyone',
    'A committee reads it by code, two people publish it, and anyone can recompute it from the coded results.',
  ],
] as const

export default async function HomePage() {
  const [newest, ...others] = await listPublications(readerContext(null))
  const earlier = others.slice(0, 3)
  return (
    <PageShell
      top={<PublicTopBar />}
      title="How far may two results differ?"
      lead="Evenlot runs an interlaboratory study from the plan to the published precision statement: repeatability within a laboratory, reproducibility between laboratories, and no laboratory named."
      actions={
        <>
          <ButtonLink variant="primary" href={paths.signIn()}>
            Sign in
          </ButtonLink>
          <ButtonLink href={paths.published()}>Read published studies</ButtonLink>
        </>
      }
    >
      <FourPieces steps={steps} />
      {newest ? <NewestStudy publication={newest} /> : <NothingPublished />}
      {earlier.length > 0 && <EarlierStudies publications={earlier} />}
    </PageShell>
  )
}

function NothingPublished() {
  return (
    <Section title="Published studies">
      <p className="text-ink-soft">
        Nothing yet. A study appears here once a second person has confirmed it.
      </p>
    </Section>
  )
}

function EarlierStudies({ publications }: { publications: readonly Publication[] }) {
  return (
    <Section title="Published before">
      <ul className="divide-y border bg-sheet">
        {publications.map(({ slug, snapshot, publishedOn }) => (
          <li key={slug} className="flex flex-wrap items-baseline justify-between gap-x-6 px-4 py-3">
            <Link href={paths.publication(slug)} className="prose-link inline-block min-h-6 font-semibold">
              {snapshot.study.title}
            </Link>
            <span className="text-small text-ink-soft">
              {snapshot.study.shortName} · {snapshot.measurands[0]?.document.input.laboratories} laboratories
              · {showDay(publishedOn, 'UTC')}
            </span>
          </li>
        ))}
      </ul>
    </Section>
  )
}
