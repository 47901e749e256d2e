import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { NotFound, Refusal } from '@/lib/domain/errors'
import { checkboxField } from '@/lib/web/checkbox-field'
import { listFormErrors } from '@/lib/web/list-form-errors'
import { runForm } from '@/lib/web/run-form'

const study = z.object({
  title: z.string().trim().min(1, 'Give the study a title.').max(10),
  levels: z.array(z.object({ name: z.string().min(1), count: z.coerce.number().int().min(1) })).optional(),
  materials: z.array(z.string()).optional(),
})

function form(...fields: [string, string][]): FormData {
  const data = new FormData()
  for (const [name, value] of fields) data.append(name, value)
  return data
}

const echo = <T>(value: T) => Promise.resolve(value)

describe('a form', () => {
  it('is read by its schema, rows and repeated names too', async () => {
    const sent = form(
      ['title', ' Flour '],
      ['levels.0.name', 'Day'],
      ['levels.0.count', '2'],
      ['levels.1.name', 'Portion'],
      ['levels.1.count', '3'],
      ['materials', 'a'],
      ['materials', 'b'],
    )
    expect(await runForm({ form: sent, input: study, run: echo })).toEqual({
      kind: 'done',
      result: {
        title: 'Flour',
        levels: [
          { name: 'Day', count: 2 },
          { name: 'Portion', count: 3 },
        ],
        materials: ['a', 'b'],
      },
    })
  })

  it('reads one ticked box, or none, as the list the schema wants', async () => {
    const input = z.object({
      chosen: z.array(z.string()),
      rows: z.array(z.object({ days: z.array(z.string()) })),
    })
    const sent = form(['chosen', 'a'], ['rows.0.days', 'Monday'])
    expect(await runForm({ form: sent, input, run: echo })).toMatchObject({
      result: { chosen: ['a'], rows: [{ days: ['Monday'] }] },
    })
    expect(await runForm({ form: form(), input, run: echo })).toMatchObject({
      result: { chosen: [], rows: [] },
    })
  })

  it('reads a tick box as yes or no', async () => {
    const input = z.object({ sure: checkboxField() })
    expect(await runForm({ form: form(['sure', 'on']), input, run: echo })).toMatchObject({
      result: { sure: true },
    })
    expect(await runForm({ form: form(), input, run: echo })).toMatchObject({ result: { sure: false } })
  })

  it('comes back with each fault at its field and everything typed', async () => {
    const sent = form(['title', ''], ['levels.0.name', 'Day'], ['levels.0.count', 'two'], ['note', 'kept'])
    const outcome = await runForm({ form: sent, input: study, run: echo })
    expect(outcome).toEqual({
      kind: 'again',
      state: {
        errors: { title: ['Give the study a title.'], 'levels.0.count': ['Give a number.'] },
        values: { title: '', 'levels.0.name': 'Day', 'levels.0.count': 'two', note: 'kept' },
      },
    })
  })

  it('names the row as it was typed when rows before it were taken out', async () => {
    const sent = form(
      ['title', 'Flour'],
      ['levels.2.name', 'Day'],
      ['levels.2.count', '1'],
      ['levels.10.name', ''],
      ['levels.10.count', '1'],
    )
    const outcome = await runForm({ form: sent, input: study, run: echo })
    expect(outcome).toMatchObject({ state: { errors: { 'levels.10.name': ['Fill this in.'] } } })
  })

  it('gives words of its own where a schema has none', async () => {
    const outcome = await runForm({ form: form(['title', 'much too long']), input: study, run: echo })
    expect(outcome).toMatchObject({ state: { errors: { title: ['Use at most 10 characters.'] } } })
  })

  it('turns a refusal into an error at its field, or of the whole form, and keeps what was typed', async () => {
    const refuse = (field?: string) => () =>
      Promise.reject(new Refusal('taken', 'This name is taken.', field))
    const sent = form(['title', 'Flour'])
    expect(await runForm({ form: sent, input: study, run: refuse('title') })).toEqual({
      kind: 'again',
      state: { errors: { title: ['This name is taken.'] }, values: { title: 'Flour' } },
    })
    expect(await runForm({ form: sent, input: study, run: refuse() })).toEqual({
      kind: 'again',
      state: { errors: {}, message: 'This name is taken.', values: { title: 'Flour' } },
    })
  })

  it('lets anything else rise, untouched', async () => {
    const missing = new NotFound('study')
    await expect(
      runForm({ form: form(['title', 'x']), input: study, run: () => Promise.reject(missing) }),
    ).rejects.toBe(missing)
  })

  it('lists its faults for the summary, the whole form’s first', () => {
    const state = { message: 'Not now.', errors: { a: ['One.', 'Two.'], b: ['Three.'] }, values: {} }
    expect(listFormErrors(state)).toEqual([
      { message: 'Not now.' },
      { field: 'a', message: 'One.' },
      { field: 'a', message: 'Two.' },
      { field: 'b', message: 'Three.' },
    ])
  })
})

describe('what a form has no business sending', () => {
  it('is dropped: fields no one asked for, whatever they are called', async () => {
    const sent = form(
      ['title', 'Flour'],
      ['role', 'administrator'],
      ['excluded', 'true'],
      ['code', 'K47'],
      ['submittedAt', '2020-01-01'],
      ['studyId', 'another'],
      ['$ACTION_ID_x', ''],
    )
    expect(await runForm({ form: sent, input: study, run: echo })).toEqual({
      kind: 'done',
      result: { title: 'Flour' },
    })
  })

  it('cannot reach behind an object', async () => {
    const names = [
      '__proto__',
      '__proto__.role',
      'constructor',
      'constructor.prototype.role',
      'levels.__proto__.role',
      'levels.0.__proto__.role',
      'a.prototype',
    ]
    const loose = z.looseObject({ title: z.string() })
    const outcome = await runForm({
      form: form(['title', 'x'], ...names.map((name): [string, string] => [name, 'administrator'])),
      input: loose,
      run: echo,
    })
    expect(outcome).toEqual({ kind: 'done', result: { title: 'x' } })
    expect(({} as { role?: string }).role).toBeUndefined()
    expect(([] as { role?: string }).role).toBeUndefined()
  })

  it('does not make a list as long as a number says', async () => {
    const input = z.looseObject({ rows: z.unknown() })
    const outcome = await runForm({ form: form(['rows.9999', 'a']), input, run: echo })
    expect(outcome).toMatchObject({ result: { rows: ['a'] } })
    const far = await runForm({ form: form(['rows.4294967294', 'a']), input, run: echo })
    expect(far).toMatchObject({ result: { rows: { 4294967294: 'a' } } })
  })

  it('does not turn one field into two kinds of thing', async () => {
    const input = z.looseObject({})
    expect(await runForm({ form: form(['a', '1'], ['a.b', '2']), input, run: echo })).toMatchObject({
      result: { a: '1' },
    })
    expect(await runForm({ form: form(['a.b', '2'], ['a', '1']), input, run: echo })).toMatchObject({
      result: { a: { b: '2' } },
    })
  })

  it('is not a file', async () => {
    const sent = form(['title', 'Flour'])
    sent.append('materials', new File(['x'], 'x.txt'))
    expect(await runForm({ form: sent, input: study, run: echo })).toMatchObject({
      result: { title: 'Flour' },
    })
  })
})
