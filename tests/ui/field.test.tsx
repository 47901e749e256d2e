// @vitest-environment jsdom
import { renderToStaticMarkup } from 'react-dom/server'
import { describe, expect, it } from 'vitest'
import { Checkbox } from '@/app/ui/primitives/checkbox'
import { ErrorSummary } from '@/app/ui/primitives/error-summary'
import { Field } from '@/app/ui/primitives/field'
import { RadioGroup } from '@/app/ui/primitives/radio-group'
import { TextInput } from '@/app/ui/primitives/text-input'
import { parseMarkup } from './parse-markup'

describe('Field', () => {
  it('ties label, hint and error to its control', () => {
    const page = parseMarkup(
      renderToStaticMarkup(
        <Field name="materials.0.name" label="Name" hint="As on the kit." error="Give the material a name.">
          {(wiring) => <TextInput {...wiring} />}
        </Field>,
      ),
    )
    const input = page.querySelector('input')!

    expect(page.querySelector('label')!.getAttribute('for')).toBe(input.id)
    expect(input.name).toBe('materials.0.name')
    expect(input.getAttribute('aria-invalid')).toBe('true')
    expect(input.required).toBe(true)
    const described = input.getAttribute('aria-describedby')!.split(' ')
    expect(described.map((id) => page.getElementById(id)!.textContent)).toEqual([
      'As on the kit.',
      'Give the material a name.',
    ])
  })

  it('claims no description and no error where there is none', () => {
    const page = parseMarkup(
      renderToStaticMarkup(
        <Field name="remark" label="Remark" isOptional>
          {(wiring) => <TextInput {...wiring} />}
        </Field>,
      ),
    )
    const input = page.querySelector('input')!

    expect(input.hasAttribute('aria-describedby')).toBe(false)
    expect(input.hasAttribute('aria-invalid')).toBe(false)
    expect(input.required).toBe(false)
    expect(page.querySelector('label')!.textContent).toBe('Remark (optional)')
  })
})

describe('ErrorSummary', () => {
  const form = (
    <form>
      <ErrorSummary
        errors={[
          { field: 'materials.0.name', message: 'Give the material a name.' },
          { field: 'decision', message: 'Choose one.' },
          { field: 'read', message: 'Tick this to go on.' },
          { message: 'The study is closed.' },
        ]}
      />
      <Field name="materials.0.name" label="Name">
        {(wiring) => <TextInput {...wiring} />}
      </Field>
      <RadioGroup name="decision" legend="Decision" options={[{ value: 'keep', label: 'Keep' }]} />
      <Checkbox name="read" label="Read" />
    </form>
  )

  it('links each error to a control or a group that is there', () => {
    const page = parseMarkup(renderToStaticMarkup(form))
    const targets = Array.from(page.querySelectorAll('[role=alert] a')).map((link) =>
      page.getElementById(link.getAttribute('href')!.slice(1)),
    )
    expect(targets.map((target) => target?.tagName)).toEqual(['INPUT', 'FIELDSET', 'INPUT'])
  })

  it('lists an error of the whole form without a link, and counts it', () => {
    const page = parseMarkup(renderToStaticMarkup(form))
    expect(page.querySelector('[role=alert] h2')!.textContent).toBe('Not accepted yet: 4 things to mend')
    expect(page.querySelector('[role=alert] li:last-child')!.innerHTML).not.toContain('<a')
  })

  it('can take the focus, which it is given when it appears', () => {
    const page = parseMarkup(renderToStaticMarkup(form))
    expect(page.querySelector('[role=alert]')!.getAttribute('tabindex')).toBe('-1')
  })

  it('is not there when nothing is wrong', () => {
    expect(renderToStaticMarkup(<ErrorSummary errors={[]} />)).toBe('')
  })
})
