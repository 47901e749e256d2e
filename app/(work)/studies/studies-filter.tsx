import Form from 'next/form'
import Link from 'next/link'
import { Button } from '@/app/ui/primitives/button'
import { Field } from '@/app/ui/primitives/field'
import { Select } from '@/app/ui/primitives/select'
import { TextInput } from '@/app/ui/primitives/text-input'
import { stateWords, studyStates } from '@/lib/domain/study-states'
import type { StudiesWish } from '@/lib/domain/arrange-studies'
import { paths } from '@/lib/web/paths'

/** A filter that is an address: it can be kept, sent on, and works without scripts. */
export function StudiesFilter({ wish, shown, all }: { wish: StudiesWish; shown: number; all: number }) {
  return (
    <Form action={paths.studies()} className="flex flex-wrap items-end gap-x-4 gap-y-3" data-screen-only>
      <div className="min-w-0 grow sm:max-w-72">
        <Field name="q" label="Name or title">
          {({ required: _, ...wiring }) => (
            <TextInput {...wiring} type="search" defaultValue={wish.text} key={wish.text} />
          )}
        </Field>
      </div>
      <div className="min-w-44">
        <Field name="state" label="State">
          {({ required: _, ...wiring }) => (
            <Select
              {...wiring}
              key={wish.state}
              defaultValue={wish.state ?? ''}
              placeholder="Any"
              options={studyStates.map((state) => ({ value: state, label: stateWords(state) }))}
            />
          )}
        </Field>
      </div>
      <Button type="submit">Show</Button>
      <p role="status" className="basis-full text-small text-ink-soft">
        {shown === all ? `${all} in all` : `${shown} of ${all}`}
        {shown !== all && (
          <>
            {' · '}
            <Link href={paths.studies()} className="prose-link inline-block min-h-6">
              Show all
            </Link>
          </>
        )}
      </p>
    </Form>
  )
}
