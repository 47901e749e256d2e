import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { keepSheet } from '@/lib/use-cases/returns/keep-sheet'
import { readSheet } from '@/lib/use-cases/returns/read-participation'
import { saveDraft } from '@/lib/use-cases/returns/save-draft'
import { entriesOf, openTestStudy, type OpenStudy } from './one-open-study'

let study: OpenStudy
beforeAll(async () => {
  study = await openTestStudy()
})
afterAll(() => study?.world.destroy())

const draft = (texts: string[], seenVersion: number, remark = '') => ({
  studyId: study.studyId,
  entries: entriesOf(study.keys, texts),
  remark,
  seenVersion,
})

describe('a draft', () => {
  it('keeps what was typed, faults and all', async () => {
    const context = await study.world.as(study.contact)
    expect(await saveDraft(context, draft(['412.', 'abc', ' <', ''], 0))).toMatchObject({
      outcome: 'kept',
      version: 1,
    })
    const { entries } = await readSheet(context, { studyId: study.studyId })
    expect(study.keys.map((key) => entries[key])).toEqual(['412.', 'abc', ' <', ''])
  })

  it('written on another page meanwhile is shown and not overwritten', async () => {
    const context = await study.world.as(study.contact)
    await saveDraft(context, draft(['1'], 1))
    const outcome = await saveDraft(context, draft(['2'], 1))
    expect(outcome).toMatchObject({
      outcome: 'changed-elsewhere',
      version: 2,
      entries: { [study.keys[0]!]: '1' },
    })
    const { entries, draftVersion } = await readSheet(context, { studyId: study.studyId })
    expect([entries[study.keys[0]!], draftVersion]).toEqual(['1', 2])
  })

  it('holds the places of the study alone', async () => {
    const context = await study.world.as(study.contact)
    const entries = { ...entriesOf(study.keys, ['3']), 'other|other|1': '4', toString: '5' }
    expect(await saveDraft(context, { ...draft([], 2), entries })).toMatchObject({ outcome: 'kept' })
    expect(Object.keys((await readSheet(context, { studyId: study.studyId })).entries).sort()).toEqual(
      [...study.keys].sort(),
    )
  })

  it('of one laboratory is not seen by another', async () => {
    const other = await study.world.as(study.other)
    expect((await readSheet(other, { studyId: study.studyId })).entries).toEqual({})
  })
})

describe('a sheet sent as a whole', () => {
  const sheet = (texts: string[], seenVersion: number, commaIs?: 'decimal' | 'thousands') => ({
    studyId: study.studyId,
    cells: new Map(texts.map((text, position) => [position, text])),
    remark: '',
    seenVersion,
    ...(commaIs ? { commaIs } : {}),
  })

  it('says how many of its values cannot be returned as they stand', async () => {
    const context = await study.world.as(study.contact)
    expect(await keepSheet(context, sheet(['1,234', 'abc', '5', '6'], 3))).toMatchObject({ problems: 2 })
  })

  it('settles the comma only where it could be read in two ways', async () => {
    const context = await study.world.as(study.contact)
    expect(await keepSheet(context, sheet(['1,234', '12,5', '0,123', '1.5'], 4, 'thousands'))).toMatchObject({
      problems: 0,
    })
    const { entries } = await readSheet(context, { studyId: study.studyId })
    expect(study.keys.map((key) => entries[key])).toEqual(['1234', '12,5', '0,123', '1.5'])
  })

  it('is refused when another page wrote since, unless it says the same', async () => {
    const context = await study.world.as(study.contact)
    await expect(keepSheet(context, sheet(['7', '', '', ''], 1))).rejects.toMatchObject({
      code: 'stale-draft',
    })
    expect(await keepSheet(context, sheet(['1234', '12,5', '0,123', '1.5'], 1))).toMatchObject({
      problems: 0,
    })
  })
})
