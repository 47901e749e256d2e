import type { ReactNode } from 'react'
import { Button } from '@/app/ui/primitives/button'
import { Field } from '@/app/ui/primitives/field'
import { TextInput } from '@/app/ui/primitives/text-input'
import { plural } from '@/lib/domain/plural'
import { shareField } from '@/lib/domain/read-plan-assumptions'
import { paths } from '@/lib/web/paths'

interface AssumptionsFormProps {
  studyId: string
  /** Inner levels, outermost first. */
  levels: readonly string[]
  texts: Readonly<Record<string, string>>
  errors: Readonly<Record<string, string>>
}

/** What nobody knows yet. It asks for another reading of the page and keeps nothing. */
export function AssumptionsForm({ studyId, levels, texts, errors }: AssumptionsFormProps) {
  const asked: { name: string; label: ReactNode; unit?: string }[] = [
    {
      name: 'ratio',
      label: (
        <>
          σ<sub>R</sub> over σ<sub>r</sub>
        </>
      ),
    },
    ...levels.map((level, index) => ({
      name: shareField(index),
      label: `Share between ${plural(level)}`,
      unit: '%',
    })),
    { name: 'within', label: 'Known to within', unit: '%' },
  ]
  return (
    <form
      method="get"
      action={`${paths.station(studyId, 'plan')}#foreseen`}
      className="flex flex-wrap items-end gap-3"
      data-screen-only
    >
      {asked.map(({ name, label, unit }) => (
        <div key={name} className="w-44">
          <Field name={name} label={label} {...(errors[name] ? { error: errors[name] } : {})}>
            {(wiring) => (
              <TextInput
                {...wiring}
                {...(unit ? { unit } : {})}
                isFigure
                inputMode="decimal"
                defaultValue={texts[name]}
              />
            )}
          </Field>
        </div>
      ))}
      <Button type="submit">Show the curve</Button>
    </form>
  )
}
