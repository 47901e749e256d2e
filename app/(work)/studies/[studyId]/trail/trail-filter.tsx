import Form from 'next/form'
import { Button } from '@/app/ui/primitives/button'
import { Field } from '@/app/ui/primitives/field'
import { Select } from '@/app/ui/primitives/select'
import { paths } from '@/lib/web/paths'

interface TrailFilterProps {
  studyId: string
  chosen: string | null
  /** Those the trail really holds. */
  actions: readonly string[]
}

export function TrailFilter({ studyId, chosen, actions }: TrailFilterProps) {
  return (
    <Form
      action={paths.station(studyId, 'trail')}
      scroll={false}
      className="flex flex-wrap items-end gap-3"
      data-screen-only
    >
      <Field name="action" label="Action">
        {({ required: _, ...wiring }) => (
          <Select
            {...wiring}
            key={chosen}
            defaultValue={chosen ?? ''}
            placeholder="All"
            options={actions.map((action) => ({
              value: action,
              label: action.replace('.', ': ').replaceAll('-', ' '),
            }))}
          />
        )}
      </Field>
      <Button type="submit">Show</Button>
    </Form>
  )
}
