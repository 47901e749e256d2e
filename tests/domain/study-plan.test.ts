import { describe, expect, it } from 'vitest'
import { countPlaces, mostPlaces, studyPlan } from '@/lib/domain/study-plan'

const plain = {
  shortName: 'HC-27',
  title: 'Breaking force of twine',
  method: 'HM 14',
  measurands: [{ name: 'Breaking force', unit: 'N', decimals: '1' }],
  materials: [
    { name: 'sisal', description: '' },
    { name: 'hemp', description: '' },
  ],
  levels: [{ name: 'replicate', count: '3' }],
  localTime: '2027-03-14T17:00',
  zone: 'Europe/Lisbon',
}

function faultsOf(fields: Record<string, unknown>): Record<string, string> {
  const parsed = studyPlan.safeParse({ ...plain, ...fields })
  return Object.fromEntries(parsed.error?.issues.map(({ path, message }) => [path.join('.'), message]) ?? [])
}

describe('a plan', () => {
  it('is read from the texts of a form', () => {
    const plan = studyPlan.parse(plain)
    expect(plan.measurands).toEqual([{ name: 'Breaking force', unit: 'N', decimals: 1, hasTrueZero: true }])
    expect(plan).toMatchObject({ limitFactor: '2.8', purpose: '' })
    expect(countPlaces(plan)).toBe(6)
  })

  it('takes rows left empty for no rows, whatever their choices say', () => {
    const plan = studyPlan.parse({
      ...plain,
      measurands: [{ name: ' ', unit: '', decimals: '', hasTrueZero: 'true' }, ...plain.measurands],
      materials: [...plain.materials, { name: '', description: ' ' }],
      levels: [...plain.levels, { name: '', count: '' }],
    })
    expect([plan.measurands.length, plan.materials.length, plan.levels.length]).toEqual([1, 2, 1])
  })

  it('asks for the rest of a row of which something is typed, rather than dropping it', () => {
    expect(faultsOf({ measurands: [{ name: '', unit: 'N', decimals: '' }] })).toHaveProperty(
      'measurands.0.name',
    )
    expect(faultsOf({ materials: [{ name: '', description: 'one lot' }] })).toHaveProperty('materials.0.name')
    expect(faultsOf({ levels: [{ name: '', count: '2' }] })).toHaveProperty('levels.0.name')
  })

  it('keeps "no" for a measurand without a true zero', () => {
    const [measurand] = studyPlan.parse({
      ...plain,
      measurands: [{ ...plain.measurands[0], hasTrueZero: 'false' }],
    }).measurands
    expect(measurand?.hasTrueZero).toBe(false)
  })

  it('refuses a name given twice, whatever its case, at the second place', () => {
    expect(faultsOf({ materials: [{ name: 'sisal' }, { name: 'Sisal' }] })).toEqual({
      'materials.1.name': '“Sisal” is named twice.',
    })
  })

  it('refuses a level called after the laboratory', () => {
    expect(faultsOf({ levels: [{ name: 'Laboratory', count: '2' }] })['levels.0.name']).toMatch(
      /always the outermost/,
    )
  })

  it('refuses more results than one return may hold, and says how many it would be', () => {
    const levels = [
      { name: 'day', count: '50' },
      { name: 'replicate', count: '50' },
    ]
    expect(countPlaces({ measurands: [1], materials: [1, 2], levels: [{ count: 50 }, { count: 50 }] })).toBe(
      mostPlaces,
    )
    expect(faultsOf({ levels })).toEqual({})
    expect(faultsOf({ levels, materials: [...plain.materials, { name: 'jute' }] }).levels).toContain(
      '7500 results',
    )
  })

  it.each([
    ['shortName', ''],
    ['shortName', 'x'.repeat(21)],
    ['shortName', '=HC'],
    ['shortName', 'HC\u202e27'],
    ['title', ' '],
    ['title', 'a\u0000b'],
    ['method', ''],
    ['limitFactor', '3'],
    ['measurands', []],
    ['materials', []],
    ['levels', []],
    ['choice', 'both'],
  ])('refuses %s %j beside its field', (field, value) => {
    expect(Object.keys(faultsOf({ [field]: value }))).toEqual([field])
  })

  it.each([
    [
      'measurands',
      { name: 'Force', unit: 'N', decimals: '' },
      'measurands.0.decimals',
      'Give the number of decimals.',
    ],
    ['levels', { name: 'replicate', count: ' ' }, 'levels.0.count', 'Give how many.'],
  ])('asks for a number of %s left empty instead of taking nought', (list, row, field, words) => {
    expect(faultsOf({ [list]: [row] })).toEqual({ [field]: words })
  })

  it('says one thing of a field left empty', () => {
    expect(
      studyPlan.safeParse({ ...plain, shortName: '' }).error?.issues.map(({ message }) => message),
    ).toEqual(['Give a short name.'])
  })

  it.each(['-1', '13', '1.5', 'two'])('refuses %s decimals', (decimals) => {
    expect(faultsOf({ measurands: [{ ...plain.measurands[0], decimals }] })).toHaveProperty(
      'measurands.0.decimals',
    )
  })
})

describe('the name of a level', () => {
  for (const name of ['Laboratory', 'material', 'value', 'Residual'])
    it(`is refused when it is “${name}”, which heads another column or row`, () => {
      const levels = [
        { name, count: '2' },
        { name: 'replicate', count: '2' },
      ]
      expect(Object.keys(faultsOf({ levels }))).toEqual(['levels.0.name'])
    })

  it('may be “replicate” for the innermost level only', () => {
    const levels = [
      { name: 'replicate', count: '2' },
      { name: 'reading', count: '2' },
    ]
    expect(Object.keys(faultsOf({ levels }))).toEqual(['levels.0.name'])
  })
})
