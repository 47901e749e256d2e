import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { documentPieces } from '@/lib/commands/document-pieces'

const seed = 20261201

function wholeText(document: object): string {
  return `${JSON.stringify(document, null, 2)}\n`
}

describe('the pieces of a document', () => {
  it('are together its JSON text, whatever it holds', () => {
    const document = fc.dictionary(fc.string(), fc.jsonValue({ depthSize: 'medium' }), { maxKeys: 6 })
    fc.assert(
      fc.property(document, (value) => {
        expect([...documentPieces(value)].join('')).toBe(wholeText(value))
      }),
      { seed, numRuns: 300 },
    )
  })

  it('stay small where lists are long, wherever these stand', () => {
    const cells = Array.from({ length: 1000 }, (_, index) => ({
      laboratory: `L${index}`,
      scores: [{ z: index }],
    }))
    const document = {
      engine: { name: 'text with \n and "' },
      left: undefined,
      materials: [{ material: 'A', cells, none: [] }, { material: 'B' }, { material: 'C', inner: { cells } }],
      numbers: cells.map((_, index) => index),
    }
    const pieces = [...documentPieces(document)]
    expect(pieces.join('')).toBe(wholeText(document))
    expect(Math.max(...pieces.map(({ length }) => length))).toBeLessThan(8000)
  })

  it('are the two braces of an empty one', () => {
    expect([...documentPieces({})].join('')).toBe('{}\n')
  })
})
