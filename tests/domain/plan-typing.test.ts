import { describe, expect, it } from 'vitest'
import { countTypedPlaces, describeTypedPlaces } from '@/lib/domain/count-typed-places'
import { beginPlan, emptyPlan } from '@/lib/domain/begin-plan'
import { countPlaces, studyPlan } from '@/lib/domain/study-plan'
import { listZones } from '@/lib/domain/list-zones'
import { arrangeStudies, readStudiesWish } from '@/lib/domain/arrange-studies'

const typed = {
  'measurands.0.name': 'Force',
  'measurands.1.name': ' ',
  'materials.0.name': 'sisal',
  'materials.1.name': 'hemp',
  'materials.1.description': 'one lot',
  'levels.0.name': 'day',
  'levels.0.count': '2',
  'levels.1.name': 'replicate',
  'levels.1.count': '3',
  'levels.2.name': '',
  'levels.2.count': '',
}
const said = (changed: Record<string, string>) =>
  describeTypedPlaces(countTypedPlaces(new Map(Object.entries({ ...typed, ...changed }))))

describe('a plan while it is typed', () => {
  it('says what it asks of each laboratory, and by what it is that many', () => {
    expect(said({})).toBe(
      'This asks each laboratory for 12 results: 1 measurand × 2 materials × 2 days × 3 replicates.',
    )
  })

  it.each<Record<string, string>>([
    { 'measurands.0.name': '' },
    { 'levels.0.name': '', 'levels.1.name': '' },
    { 'levels.0.count': 'x', 'levels.1.count': '0' },
  ])('waits for the missing part with %j', (changed) => {
    expect(said(changed)).toMatch(/^Name a measurand/)
  })

  it('counts as the plan itself does', () => {
    const layout = { measurands: [1], materials: [1, 2], levels: [{ count: 2 }, { count: 3 }] }
    expect(countTypedPlaces(new Map(Object.entries(typed))).places).toBe(countPlaces(layout))
  })

  it('begins with the plan that stands, and comes back as the same plan', () => {
    const plan = studyPlan.parse({
      shortName: 'HC-27',
      title: 'T',
      method: 'M',
      limitFactor: '2.77',
      measurands: [{ name: 'Force', unit: 'N', decimals: 1, hasTrueZero: false }],
      materials: [{ name: 'sisal', description: 'one lot' }],
      levels: [{ name: 'replicate', count: 3 }],
      localTime: '2027-03-14T17:00',
      zone: 'Europe/Lisbon',
    })
    const { localTime, zone, measurands, materials, levels, ...study } = plan
    expect(
      studyPlan.parse(
        beginPlan({
          study: { ...study, deadline: { localTime, zone } },
          layout: { measurands, materials, levels },
        }),
      ),
    ).toEqual(plan)
  })

  it('begins a new plan with nothing that could pass for a decision', () => {
    expect(studyPlan.safeParse(emptyPlan).success).toBe(false)
  })

  it('offers time zones by region, under the names of today', () => {
    const zones = listZones()
    expect(zones.find(({ region }) => region === 'Asia')?.zones).toContainEqual({
      value: 'Asia/Kolkata',
      label: 'Kolkata',
    })
    expect(zones.flatMap((group) => group.zones.map(({ value }) => value))).not.toContain('Asia/Calcutta')
    expect(zones.find(({ region }) => region === 'America')?.zones).toContainEqual({
      value: 'America/Argentina/Buenos_Aires',
      label: 'Argentina, Buenos Aires',
    })
  })
})

describe('studies in a list', () => {
  const now = new Date('2027-03-01T09:00:00Z')
  const study = (
    shortName: string,
    state: 'draft' | 'open' | 'closed' | 'published',
    due: string,
    as: 'coordinator' | 'laboratory' = 'coordinator',
  ) => ({
    study: { shortName, title: `${shortName} of twine`, state, deadline: { dueAt: new Date(due) } },
    as,
  })
  const entries = [
    study('A', 'published', '2026-03-01T00:00:00Z'),
    study('B', 'draft', '2027-05-01T00:00:00Z'),
    study('C', 'open', '2027-04-01T00:00:00Z'),
    study('D', 'open', '2027-02-01T00:00:00Z'),
    study('E', 'open', '2027-03-20T00:00:00Z', 'laboratory'),
  ]
  const order = (query: Record<string, string>) =>
    arrangeStudies(entries, { ...readStudiesWish(query), now })
      .map((entry) => entry.study.shortName)
      .join('')

  it.each([
    [{}, 'DECBA'],
    [{ sort: 'name' }, 'ABCDE'],
    [{ sort: '-name' }, 'EDCBA'],
    [{ sort: 'deadline' }, 'ADECB'],
    [{ sort: 'state', state: 'open' }, 'CDE'],
    [{ q: ' b OF ' }, 'B'],
    [{ q: 'none' }, ''],
    [{ state: 'x', sort: 'x' }, 'DECBA'],
  ])('stand as the address %j wishes, what needs someone first', (query, expected) => {
    expect(order(query as Record<string, string>)).toBe(expected)
  })
})
