import { describe, expect, it } from 'vitest'
import { codeCount, drawLaboratoryCode } from '@/lib/domain/laboratory-code'

describe("a laboratory's code", () => {
  it('is a consonant and two digits that are not misread', () => {
    for (let number = 0; number < codeCount; number += 1)
      expect(drawLaboratoryCode(() => number, new Set())).toMatch(/^[BCDFGHJKLMNPQRSTVWXZ][2-9]{2}$/)
  })

  it('differs for every number drawn, so that each code is as likely as another', () => {
    const codes = Array.from({ length: codeCount }, (_, number) =>
      drawLaboratoryCode(() => number, new Set()),
    )
    expect(new Set(codes).size).toBe(codeCount)
    // 20 letters and twice 8 digits.
    expect(codeCount).toBe(1280)
  })

  it('is drawn again when it is taken', () => {
    const drawn = [0, 0, 7]
    const first = drawLaboratoryCode(() => 0, new Set())
    expect(drawLaboratoryCode(() => drawn.shift() ?? 0, new Set([first]))).not.toBe(first)
    expect(drawn).toEqual([])
  })

  it('asks the random source for all codes there are, never for fewer', () => {
    const limits: number[] = []
    drawLaboratoryCode((limit) => (limits.push(limit), 3), new Set())
    expect(limits).toEqual([codeCount])
  })

  it('is refused when half of all codes are given away, before drawing takes for ever', () => {
    const taken = new Set(
      Array.from({ length: codeCount / 2 }, (_, number) => drawLaboratoryCode(() => number, new Set())),
    )
    expect(() => drawLaboratoryCode(() => codeCount - 1, taken)).toThrow(RangeError)
  })
})
