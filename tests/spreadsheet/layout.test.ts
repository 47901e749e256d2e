import { describe, expect, it } from 'vitest'
import { listPlaces, measurandTitle, parsePlaceKey, placeKey } from '@/lib/spreadsheet/layout'
import { single, twoByTwo } from './layouts'

describe('listPlaces', () => {
  it('goes row by row, and within a row by measurand', () => {
    const keys = listPlaces(twoByTwo).map(placeKey)
    expect(keys).toHaveLength(16)
    expect(keys.slice(0, 5)).toEqual([
      'force|linen|1.1',
      'strain|linen|1.1',
      'force|linen|1.2',
      'strain|linen|1.2',
      'force|linen|2.1',
    ])
    expect(keys.at(-1)).toBe('strain|wool|2.2')
  })

  it('gives every place its own key, which leads back to it', () => {
    const places = [...listPlaces(twoByTwo), ...listPlaces(single)]
    expect(new Set(places.map(placeKey)).size).toBe(places.length)
    expect(places.map(placeKey).map(parsePlaceKey)).toEqual(places)
  })

  it('keeps a place without levels', () => {
    const [place] = listPlaces({ ...single, levels: [] })
    expect(place && placeKey(place)).toBe('ash|rye|')
    expect(parsePlaceKey('ash|rye|')).toEqual({ measurandId: 'ash', materialId: 'rye', groups: [] })
  })
})

describe('placeKey', () => {
  it('refuses an id that would make two places look alike', () => {
    expect(() => placeKey({ measurandId: 'a|b', materialId: 'c', groups: [1] })).toThrow(RangeError)
  })

  it.each(['', 'a', 'a|b', 'a|b|x', 'a|b|1.', 'a|b|1|2', '|b|1'])('has no place for the text %j', (key) => {
    expect(() => parsePlaceKey(key)).toThrow(RangeError)
  })
})

describe('measurandTitle', () => {
  it('names the unit only where there is one', () => {
    expect(measurandTitle(single.measurands[0]!)).toBe('Ash content (g/kg)')
    expect(measurandTitle({ ...single.measurands[0]!, unit: '' })).toBe('Ash content')
  })
})
