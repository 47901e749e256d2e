import { Section } from '@/app/ui/layout/section'
import { Tag } from '@/app/ui/primitives/tag'
import type { ReturnsView } from '@/lib/use-cases/returns/watch-returns'

/** What laboratories wrote beside their results. */
export function RemarksSection({ lanes }: Pick<ReturnsView, 'lanes'>) {
  const remarked = lanes.filter(({ remark }) => remark.trim() !== '')
  if (remarked.length === 0) return null
  return (
    <Section title="Remarks" note="As the laboratories wrote them. They are not shown to the committee.">
      <ul className="border bg-sheet">
        {remarked.map(({ code, remark }) => (
          <li
            key={code}
            className="flex flex-wrap items-start gap-x-4 gap-y-1 border-b px-4 py-3 last:border-b-0"
          >
            <Tag code={code} label="Laboratory" />
            <p className="min-w-0 max-w-text flex-1 basis-60 whitespace-pre-line">{remark}</p>
          </li>
        ))}
      </ul>
    </Section>
  )
}
