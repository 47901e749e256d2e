import { describe, expect, it } from 'vitest'
import {
  consistencyInnerHeight,
  layOutConsistency,
  type ConsistencyCell,
  type ConsistencyData,
} from '@/app/ui/charts/consistency-layout'
import { nextCell } from '@/app/ui/charts/next-cell'

const materials = ['sisal', 'hemp']

function study(values: (number | null)[][], changes: Partial<ConsistencyData> = {}): ConsistencyData {
  return {
    statistic: 'h',
    materials,
    order: 'laboratory',
    criticals: [
      { label: '5 %', value: 1.8 },
      { label: '1 %', value: 2.2 },
    ],
    laboratories: values.map((row, index) => ({
      code: `L${index}`,
      cells: row.map((value, series): ConsistencyCell | null =>
        value === null
          ? null
          : { material: materials[series]!, value, beyond: Math.abs(value) > 2.2 ? '1 %' : null, note: '' },
      ),
    })),
    ...changes,
  }
}

const three = study([
  [0.1, -0.2],
  [null, 2.5],
  [-1, 0.4],
])

describe('layOutConsistency', () => {
  it('places every cell that is there inside its own group, and none that is not', () => {
    const { cells, groups } = layOutConsistency(three)
    expect(cells.map((cell) => `${cell.code} ${cell.material}`)).toEqual([
      'L0 sisal',
      'L0 hemp',
      'L1 hemp',
      'L2 sisal',
      'L2 hemp',
    ])
    for (const cell of cells) {
      const group = groups[cell.group]!
      expect(Math.abs(cell.x - group.x)).toBeLessThan(group.width / 2)
    }
  })

  it('groups by material in the other order, with the laboratories in code order within', () => {
    const { cells, groups } = layOutConsistency({ ...three, order: 'material' })
    expect(groups.map((group) => group.name)).toEqual(materials)
    const hemp = cells.filter((cell) => cell.group === 1).sort((a, b) => a.x - b.x)
    expect(hemp.map((cell) => cell.code)).toEqual(['L0', 'L1', 'L2'])
  })

  it('draws the limits of h on both sides of zero and those of k above it', () => {
    expect(layOutConsistency(three).limits.map((limit) => limit.value)).toEqual([1.8, -1.8, 2.2, -2.2])
    const within = layOutConsistency({ ...three, statistic: 'k' })
    expect(within.limits.map((limit) => limit.value)).toEqual([1.8, 2.2])
    expect(within.domain.low).toBe(0)
  })

  it('leaves room for the label of the furthest mark', () => {
    const { domain } = layOutConsistency(three)
    const perUnit = consistencyInnerHeight / (domain.high - domain.low)
    expect((domain.high - 2.5) * perUnit).toBeGreaterThanOrEqual(19.9)
  })

  it('stands labels upright where flat ones would touch', () => {
    const crowded = layOutConsistency(
      study([
        [2.4, 2.6],
        [0, 0],
      ]),
    )
    expect(crowded.cells.map((cell) => cell.isAlone)).toEqual([false, false, false, false])
    expect(
      layOutConsistency(three)
        .cells.filter((cell) => cell.isAlone)
        .map((cell) => cell.code),
    ).toEqual(['L1'])
  })

  it('grows wider rather than letting the marks of many materials touch', () => {
    const names = Array.from({ length: 10 }, (_, index) => `m${index}`)
    const laboratories = Array.from({ length: 30 }, (_, index) => ({
      code: `L${index}`,
      cells: names.map((material): ConsistencyCell => ({ material, value: 0.5, beyond: null, note: '' })),
    }))
    const { cells } = layOutConsistency(study([], { materials: names, laboratories }))
    const places = cells.map((cell) => cell.x).sort((a, b) => a - b)
    const gaps = places.slice(1).map((place, index) => place - places[index]!)
    expect(Math.min(...gaps)).toBeGreaterThan(10)
  })

  it('is drawn even with no laboratory', () => {
    const { cells, domain } = layOutConsistency(study([]))
    expect(cells).toEqual([])
    expect(domain.high).toBeGreaterThan(2.2)
  })
})

describe('nextCell', () => {
  const { cells } = layOutConsistency(three)
  const go = (from: string, key: string) => {
    const next = nextCell({
      cells,
      from: cells.find((cell) => `${cell.code} ${cell.material}` === from)!,
      key,
    })
    return next && `${next.code} ${next.material}`
  }

  it.each([
    ['L0 sisal', 'ArrowRight', 'L0 hemp'],
    ['L0 hemp', 'ArrowRight', 'L1 hemp'],
    ['L1 hemp', 'ArrowLeft', 'L0 hemp'],
    ['L0 sisal', 'ArrowDown', 'L2 sisal'],
    ['L2 hemp', 'ArrowUp', 'L1 hemp'],
    ['L1 hemp', 'Home', 'L0 sisal'],
    ['L1 hemp', 'End', 'L2 hemp'],
  ])('goes from %s by %s to %s', (from, key, to) => {
    expect(go(from, key)).toBe(to)
  })

  it('stays at the ends and leaves other keys to the browser', () => {
    expect(go('L0 sisal', 'ArrowLeft')).toBeUndefined()
    expect(go('L2 hemp', 'ArrowRight')).toBeUndefined()
    expect(go('L1 hemp', 'Tab')).toBeUndefined()
  })
})
