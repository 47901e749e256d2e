import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { AnalysisDocument, MaterialAnalysis, Proposal } from '@/lib/statistics'
import { centreExactly, parseDecimal, subtractDecimals, decimalToNumber } from '@/lib/statistics/decimal'
import { exchangedCells, type LaboratoryCell } from '@/lib/statistics/explanations'
import { analyseRows, type TestRow } from './analyse-rows'
import { randomSource } from './random-source'
import { readRows } from './reference/read-reference'

// The glucose study with a second and a third measurand on the same materials, made by a seeded source: a laboratory's
// own shift and a scatter about values that lie near those of glucose, so that nothing but the materials tells them apart.
const glucose: TestRow[] = readRows('e691_glucose').map(({ lab, material, value }) => ({
  laboratory: lab,
  material,
  measurand: 'glucose',
  text: value,
}))
const laboratories = [...new Set(glucose.map(({ laboratory }) => laboratory))]
const materials = ['A', 'B', 'C', 'D', 'E']

type Made = { measurand: string; levels: readonly number[]; seed: number; decimals?: number; apart?: string }

/** Three results a cell; laboratory `apart` lies 6 standard deviations of laboratories above the others. */
function made({ measurand, levels, seed, decimals = 2, apart }: Made): TestRow[] {
  const random = randomSource(seed)
  return laboratories.flatMap((laboratory) =>
    materials.flatMap((material, index) => {
      const level = levels[index]!
      const shift = (random.normal() + (laboratory === apart ? 6 : 0)) * level * 0.01
      return Array.from({ length: 3 }, () => ({
        laboratory,
        material,
        measurand,
        text: (level + shift + random.normal() * level * 0.008).toFixed(decimals),
      }))
    }),
  )
}

const lactose = made({ measurand: 'lactose', levels: [48, 95, 110, 230, 260], seed: 3 })
const sucrose = made({ measurand: 'sucrose', levels: [30, 60, 160, 170, 330], seed: 4 })

/** What laboratory L03 reported for one material, or for all, under the name of the other measurand. */
function swapped(rows: readonly TestRow[], one: string, other: string, material?: string): TestRow[] {
  const name = (measurand: string): string =>
    measurand === one ? other : measurand === other ? one : measurand
  return rows.map((row) =>
    row.laboratory === 'L03' && (material === undefined || row.material === material)
      ? { ...row, measurand: name(row.measurand!) }
      : row,
  )
}

function block(document: AnalysisDocument, measurand: string, material: string): MaterialAnalysis {
  return document.materials.find((one) => one.measurand === measurand && one.material === material)!
}

/** Exchanges of measurands change one material's cell of the measurand; of materials, two. */
function exchanges(document: AnalysisDocument): Proposal[] {
  return document.materials
    .flatMap(({ proposals }) => proposals!)
    .filter(({ kind, cells }) => kind === 'exchange' && cells.length === 1)
}

function cellOf({ cells }: MaterialAnalysis, laboratory = 'L03') {
  return cells.find((cell) => cell.laboratory === laboratory)!
}

describe('two measurands of one material that a laboratory exchanged', () => {
  const honest = analyseRows([...glucose, ...lactose])
  const planted = analyseRows(swapped([...glucose, ...lactose], 'glucose', 'lactose', 'C'))

  it('are proposed first, under each of them', () => {
    expect(block(planted, 'glucose', 'C').proposals![0]).toMatchObject({
      laboratory: 'L03',
      kind: 'exchange',
      detail: 'glucose ↔ lactose',
      cells: ['C'],
    })
    expect(block(planted, 'lactose', 'C').proposals![0]).toMatchObject({
      laboratory: 'L03',
      kind: 'exchange',
      detail: 'lactose ↔ glucose',
      cells: ['C'],
    })
    expect(exchanges(planted)).toHaveLength(2)
  })

  it('would have, put back, the h and k that the analysis gives them where nothing was exchanged', () => {
    for (const measurand of ['glucose', 'lactose']) {
      const [first] = block(planted, measurand, 'C').proposals!
      const own = cellOf(block(honest, measurand, 'C'))
      expect(first!.after.h).toBeCloseTo(own.h!, 9)
      expect(first!.after.k).toBeCloseTo(own.k!, 9)
      expect(first!.before.h).toBe(cellOf(block(planted, measurand, 'C')).h)
    }
  })

  it('cost log₁₀(q − 1), q the measurands of the material, and earn the surprise of both cells', () => {
    const ofTwo = block(planted, 'glucose', 'C').proposals![0]!
    expect(ofTwo.price).toBe(0)
    const three = analyseRows(swapped([...glucose, ...lactose, ...sucrose], 'glucose', 'lactose', 'C'))
    const ofThree = block(three, 'glucose', 'C').proposals![0]!
    expect(ofThree).toMatchObject({ kind: 'exchange', detail: 'glucose ↔ lactose' })
    expect(ofThree.price).toBeCloseTo(Math.log10(2), 12)
    expect(ofThree.before.surprise).toBe(ofTwo.before.surprise)
    expect(ofThree.score).toBeCloseTo(ofThree.before.surprise! - ofThree.after.surprise! - ofThree.price, 12)
    // One and the same pair of cells, looked at from its other side.
    const other = block(three, 'lactose', 'C').proposals![0]!
    expect(other.before.surprise).toBeCloseTo(ofThree.before.surprise!, 9)
    expect(other.score).toBeCloseTo(ofThree.score, 9)
  })

  it('are told material by material where whole columns were exchanged', () => {
    const columns = analyseRows(swapped([...glucose, ...lactose], 'glucose', 'lactose'))
    for (const material of materials) {
      const { proposals } = block(columns, 'glucose', material)
      const first = proposals!.find(({ laboratory }) => laboratory === 'L03')
      expect(first).toMatchObject({ detail: 'glucose ↔ lactose', cells: [material] })
    }
  })

  it('are found without a lost digit at offsets that leave doubles few', () => {
    // 16 digits before the point: as doubles, such results and their offsets go in steps of 1.
    const far = (rows: readonly TestRow[], offset: string) =>
      rows.map((row) => ({ ...row, text: `${offset}${row.text.padStart(6, '0')}` }))
    const rows = [...far(glucose, '9000000000000'), ...far(lactose, '8000000000000')]
    const first = block(analyseRows(swapped(rows, 'glucose', 'lactose', 'C')), 'glucose', 'C').proposals![0]!
    const own = cellOf(block(honest, 'glucose', 'C'))
    expect(first.after.h).toBeCloseTo(own.h!, 9)
    expect(first.after.k).toBeCloseTo(own.k!, 9)
  })

  it('keep their days and operators: each cell brings its own innermost groups', () => {
    // Of three results the third of glucose is made on a day of its own, of lactose the first.
    const onDays = (rows: readonly TestRow[], alone: number) =>
      rows.map((row, index) => ({ ...row, groups: [index % 3 === alone ? '1' : '2'] }))
    const nested = [...onDays(glucose, 2), ...onDays(lactose, 0)]
    const nesting = ['day']
    const plantedNested = analyseRows(swapped(nested, 'glucose', 'lactose', 'C'), { nesting })
    const first = block(plantedNested, 'glucose', 'C').proposals![0]!
    expect(first.detail).toBe('glucose ↔ lactose')
    const own = cellOf(block(analyseRows(nested, { nesting }), 'glucose', 'C'))
    expect(first.after.k).toBeCloseTo(own.k!, 9)
  })

  it('are no explanation unless both cells come to lie among their own', () => {
    // The results of lactose stand under both names: those of glucose are lost, and no exchange brings them back.
    const rows = [...glucose, ...lactose]
    const copies = rows.filter(
      ({ laboratory, material, measurand }) =>
        laboratory === 'L03' && material === 'C' && measurand === 'lactose',
    )
    let place = 0
    const copied = rows.map((row) =>
      row.laboratory === 'L03' && row.material === 'C' && row.measurand === 'glucose'
        ? { ...row, text: copies[place++]!.text }
        : row,
    )
    expect(place).toBe(3)
    const document = analyseRows(copied)
    const own = block(document, 'glucose', 'C')
    expect(Math.abs(cellOf(own).h!)).toBeGreaterThan(own.critical.h['0.005']!)
    expect(exchanges(document)).toEqual([])
  })

  it('are not looked for where the laboratory has no such cell, or fewer than four others have', () => {
    const rows = swapped([...glucose, ...lactose], 'glucose', 'lactose', 'C')
    const withoutCell = rows.filter(
      ({ laboratory, material, measurand }) =>
        !(laboratory === 'L03' && material === 'C' && measurand === 'lactose'),
    )
    const withFew = rows.filter(({ laboratory, measurand }) => measurand === 'glucose' || laboratory <= 'L03')
    for (const less of [withoutCell, withFew]) {
      const document = analyseRows(less)
      const found = document.materials.flatMap(({ proposals }) => proposals ?? [])
      expect(found.filter(({ detail }) => detail.includes('lactose'))).toEqual([])
    }
  })
})

describe('measurands that nobody exchanged', () => {
  it('get no such proposal where no cell stands apart', () => {
    const document = analyseRows([...glucose, ...lactose, ...sucrose])
    expect(document.materials).toHaveLength(15)
    expect(exchanges(document)).toEqual([])
  })

  it('get none where a laboratory is truly apart in one of them, in 20 studies', () => {
    let judged = 0
    for (let seed = 1; seed <= 20; seed += 1) {
      const one = made({ measurand: 'one', levels: [50, 100, 130, 200, 290], seed, apart: 'L03' })
      const other = made({ measurand: 'other', levels: [55, 110, 143, 220, 319], seed: seed + 100 })
      const document = analyseRows([...one, ...other])
      for (const own of document.materials) {
        const h = cellOf(own).h!
        if (Math.abs(h) > own.critical.h['0.005']!) judged += 1
      }
      expect(exchanges(document)).toEqual([])
    }
    expect(judged).toBeGreaterThan(50)
  })

  it('leave each other alone in everything else, byte for byte', () => {
    const together = analyseRows([...glucose, ...lactose])
    const alone = analyseRows(glucose)
    const own = together.materials.filter(({ measurand }) => measurand === 'glucose')
    expect(JSON.stringify(own)).toBe(JSON.stringify(alone.materials))
  })
})

describe('measurands that the document does not report', () => {
  const rows = swapped([...glucose, ...lactose], 'glucose', 'lactose', 'C')
  const own = rows.filter(({ measurand }) => measurand === 'glucose')
  const rest = rows.filter(({ measurand }) => measurand !== 'glucose')

  it('serve the one explanation and change nothing else', () => {
    const beside = analyseRows(own, { otherMeasurands: rest })
    const found = exchanges(beside)
    expect(found).toHaveLength(1)
    expect(found).toEqual(exchanges(analyseRows(rows)).filter(({ detail }) => detail.startsWith('glucose')))

    const alone = analyseRows(own)
    const others = beside.materials.map((one) => ({
      ...one,
      proposals: one.proposals!.filter(({ detail }) => !detail.includes('lactose')),
    }))
    expect(JSON.stringify({ ...beside, materials: others })).toBe(JSON.stringify(alone))
  })

  it('need a label for each inner level as the reported ones do', () => {
    const nested = own.map((row) => ({ ...row, groups: ['1'] }))
    expect(() => analyseRows(nested, { nesting: ['day'], otherMeasurands: rest })).toThrow(RangeError)
  })
})

describe('exchanging two cells', () => {
  const decimal = fc
    .tuple(fc.bigInt({ min: -(10n ** 25n), max: 10n ** 25n }), fc.integer({ min: 0, max: 12 }))
    .map(([units, exponent]) => `${units}e-${exponent}`)

  it('twice gives the cells as they were, whatever their offsets and digits', () => {
    const texts = fc.array(decimal, { minLength: 1, maxLength: 5 })
    fc.assert(
      fc.property(texts, texts, (mine, others) => {
        const [one, other] = [laboratoryCell('X', mine), laboratoryCell('Y', others)]
        const once = exchangedCells(one, other)
        expect(once[0].texts).toEqual(others)
        expect(exchangedCells(...once)).toEqual([one, other])
      }),
      { seed: 20261201, numRuns: 300 },
    )
  })

  it('moves each result exactly: 0.1 above an offset stays 0.1 above it', () => {
    const far = laboratoryCell('X', ['1000000000000000.0', '1000000000000000.1'])
    const near = laboratoryCell('Y', ['1000000000000000.20', '3.14'])
    expect(exchangedCells(far, near)[0].values[0]).toBe(0.2)
  })

  it('lets pass results whose difference no double holds, as no explanation', () => {
    // Two measurands at the ends of what a double holds; laboratory L4 stands apart in the first.
    const end = 17n * 10n ** 307n
    const rows = Array.from({ length: 8 }, (_, lab) =>
      ['one', 'other'].flatMap((measurand, side) =>
        [0, 1].map((replicate): TestRow => {
          const value =
            end + BigInt(lab * 3 + replicate * ((lab % 3) + 1) + (lab === 4 && side === 0 ? 9000 : 0))
          return { laboratory: `L${lab}`, measurand, text: String(side === 0 ? value : -value) }
        }),
      ),
    ).flat()
    const [one] = analyseRows(rows).materials
    expect(cellOf(one!, 'L4').h).toBeGreaterThan(one!.critical.h['0.005']!)
    expect(one!.proposals).toEqual([])
  })
})

function laboratoryCell(measurand: string, texts: readonly string[]): LaboratoryCell {
  const { deviations, offset, restore } = centreExactly(texts)
  return {
    material: 'M',
    measurand,
    values: [...deviations],
    offset: restore(0),
    deviationOf: (text) => decimalToNumber(subtractDecimals(parseDecimal(text), offset)),
    texts,
    groups: texts.map((_, index) => String(index)),
    others: { laboratories: 7, mean: 0, sdOfMeans: 1, repeatabilityVariance: 1, repeatabilityDf: 7 },
  }
}
