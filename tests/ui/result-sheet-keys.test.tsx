import { describe, expect, it } from 'vitest'
import { gridMove, placeBlock } from '@/app/(work)/participations/[studyId]/sheet/grid-move'
import { readPastedBlock } from '@/app/(work)/participations/[studyId]/sheet/read-pasted-block'
import { readEntryFields } from '@/app/(work)/participations/entry-names'

const size = { rows: 3, columns: 2 }
const press = (
  position: number,
  key: string,
  held: { shift?: boolean; ctrl?: boolean; isEditing?: boolean } = {},
) =>
  gridMove(
    position,
    { key, shiftKey: held.shift ?? false, ctrlKey: held.ctrl ?? false, metaKey: false },
    { ...size, isEditing: held.isEditing ?? false },
  )

describe('a key in the grid', () => {
  it.each([
    ['ArrowDown', 0, 2],
    ['ArrowDown', 4, 4],
    ['ArrowUp', 3, 1],
    ['ArrowRight', 0, 1],
    ['ArrowRight', 1, 1],
    ['ArrowLeft', 3, 2],
    ['Enter', 1, 3],
    ['Home', 5, 4],
    ['End', 2, 3],
  ])('%s leads from %i to %i', (key, from, to) => expect(press(from, key)).toBe(to))

  it('leads to the corners when Control is held', () => {
    expect([press(3, 'Home', { ctrl: true }), press(3, 'End', { ctrl: true })]).toEqual([0, 5])
  })

  it('belongs to the text while the text is edited, save those that leave the line', () => {
    expect(
      ['ArrowLeft', 'ArrowRight', 'Home', 'End'].map((key) => press(2, key, { isEditing: true })),
    ).toEqual([null, null, null, null])
    expect([
      press(2, 'ArrowDown', { isEditing: true }),
      press(2, 'Enter', { isEditing: true, shift: true }),
    ]).toEqual([4, 0])
  })

  it('is left to the browser when it is Tab, a letter or a selection', () => {
    expect([press(0, 'Tab'), press(0, '4'), press(0, 'ArrowRight', { shift: true })]).toEqual([
      null,
      null,
      null,
    ])
  })
})

describe('a pasted block', () => {
  it('is read with its rows and columns, whatever its line ends, and without the last of them', () => {
    expect(readPastedBlock('1,5\t2\r\n3\t<4\r\n')).toEqual([
      ['1,5', '2'],
      ['3', '<4'],
    ])
    expect(readPastedBlock('1\n2\r3')).toEqual([['1'], ['2'], ['3']])
  })

  it('keeps its gaps', () => {
    expect(readPastedBlock('1\t\n\t2')).toEqual([
      ['1', ''],
      ['', '2'],
    ])
  })

  it('understands a cell in quotes', () => {
    expect(readPastedBlock('"1\n2"\t"say ""3"""')).toEqual([['1\n2', 'say "3"']])
  })

  it('is none when it is a plain text', () => {
    expect(readPastedBlock('412,6')).toBeNull()
  })

  it('fills from the place on, and counts what finds no place', () => {
    const { texts, outside } = placeBlock(3, [['1', '2'], ['3'], ['4']], size)
    expect([...texts]).toEqual([
      [3, '1'],
      [5, '3'],
    ])
    expect(outside).toBe(2)
  })
})

describe('the fields of a sheet', () => {
  it('are known by their position, and nothing else is taken for one', () => {
    const fields = {
      'entry-0': '1',
      'entry-12': '2',
      'entry-x': '3',
      role: 'coordinator',
      'entry-99999': '4',
      'entry-3': ['5', '6'],
    }
    expect([...readEntryFields(fields)]).toEqual([
      [0, '1'],
      [12, '2'],
    ])
  })
})
