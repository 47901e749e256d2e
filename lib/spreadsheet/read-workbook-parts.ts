import { Refusal } from '@/lib/domain/errors'
import { builtInFormat, readNumberFormat, type NumberFormat } from '@/lib/spreadsheet/number-format'
import type { Package } from '@/lib/spreadsheet/open-package'
import { parseXml, type XmlBudget } from '@/lib/spreadsheet/parse-xml'
import type { WorkbookLimits } from '@/lib/spreadsheet/workbook'

/*
 * The parts of a workbook that its sheets lean on: which sheets there are and where, the texts they share,
 * and the formats of their cells.
 */

export type Reading = { parts: Package; limits: WorkbookLimits; budget: XmlBudget }

export type SheetEntry = { name: string; part: string; isHidden: boolean }

export type Outline = { sheets: SheetEntry[]; from1904: boolean; stylesPart?: string; stringsPart?: string }

type Relation = { type: string; target: string; isExternal: boolean }

export async function readOutline(reading: Reading): Promise<Outline> {
  const root = await readRelations(reading, '_rels/.rels', '')
  const main = [...root.values()].find(({ type }) => type === 'officeDocument')?.target ?? 'xl/workbook.xml'
  const folder = main.slice(0, main.lastIndexOf('/') + 1)
  const file = main.slice(folder.length)
  const relations = await readRelations(reading, `${folder}_rels/${file}.rels`, folder)
  const listed: { name: string; relation: string; isHidden: boolean }[] = []
  let from1904 = false
  await parseXml(
    reading.parts.read(main),
    {
      open(name, attributes) {
        if (name === 'workbookPr') from1904 = isTrue(attributes.date1904)
        if (name !== 'sheet') return
        const relation =
          attributes['r:id'] ?? Object.entries(attributes).find(([key]) => key.endsWith(':id'))?.[1] ?? ''
        const isHidden = attributes.state === 'hidden' || attributes.state === 'veryHidden'
        listed.push({ name: attributes.name ?? '', relation, isHidden })
        if (listed.length > reading.limits.sheets) {
          throw new Refusal(
            'workbook-too-many-sheets',
            `This workbook has more than ${reading.limits.sheets} sheets. Send only the sheet with the results.`,
          )
        }
      },
    },
    reading.budget,
  )
  const sheets = listed.flatMap(({ name, relation, isHidden }) => {
    const found = relations.get(relation)
    const isSheet = found !== undefined && found.type === 'worksheet' && !found.isExternal
    return isSheet ? [{ name, part: found.target, isHidden }] : []
  })
  const partOf = (type: string) =>
    [...relations.values()].find((relation) => relation.type === type && !relation.isExternal)?.target
  return { sheets, from1904, stylesPart: partOf('styles'), stringsPart: partOf('sharedStrings') }
}

export async function readSharedStrings(reading: Reading, part: string | undefined): Promise<string[]> {
  const strings: string[] = []
  if (part === undefined) return strings
  let length = 0
  let text: string | null = null
  let inText = false
  let phonetic = 0
  await parseXml(
    reading.parts.read(part),
    {
      open(name) {
        if (name === 'si') text = ''
        if (name === 'rPh') phonetic += 1
        inText = name === 't' && phonetic === 0
      },
      text(piece) {
        if (!inText || text === null) return
        length += piece.length
        if (length > reading.limits.text) throw tooMuchText()
        text += piece
      },
      close(name) {
        inText = false
        if (name === 'rPh') phonetic -= 1
        if (name !== 'si') return
        strings.push(decodeEscapes(text ?? ''))
        text = null
      },
    },
    reading.budget,
  )
  return strings
}

/** One format for each cell style, in the order in which cells number them. */
export async function readCellFormats(reading: Reading, part: string | undefined): Promise<NumberFormat[]> {
  const custom = new Map<number, NumberFormat>()
  const formats: NumberFormat[] = []
  if (part === undefined) return formats
  let inCellStyles = false
  await parseXml(
    reading.parts.read(part),
    {
      open(name, attributes) {
        if (name === 'cellXfs') inCellStyles = true
        if (name === 'numFmt') {
          const code = attributes.formatCode ?? ''
          custom.set(Number(attributes.numFmtId), readNumberFormat(code))
        }
        if (name === 'xf' && inCellStyles) {
          const id = Number(attributes.numFmtId ?? '0')
          formats.push(custom.get(id) ?? builtInFormat(id))
        }
      },
      close(name) {
        if (name === 'cellXfs') inCellStyles = false
      },
    },
    reading.budget,
  )
  return formats
}

/**
 * Characters that XML cannot hold are written `_x000D_` in these files. A null or half a character could not
 * be stored, so such a spelling stays as it stands.
 */
export function decodeEscapes(text: string): string {
  return text.includes('_x')
    ? text.replace(/_x([0-9A-Fa-f]{4})_/g, (spelled, code: string) => {
        const character = String.fromCharCode(parseInt(code, 16))
        return /[\0\ud800-\udfff]/.test(character) ? spelled : character
      })
    : text
}

function isTrue(attribute: string | undefined): boolean {
  return attribute === '1' || attribute === 'true'
}

export function tooMuchText(): Refusal {
  return new Refusal(
    'workbook-too-much-text',
    'This workbook holds far more text than a return. Copy the results to a new workbook.',
  )
}

async function readRelations(reading: Reading, part: string, folder: string): Promise<Map<string, Relation>> {
  const relations = new Map<string, Relation>()
  if (!reading.parts.names.has(part.toLowerCase())) return relations
  await parseXml(
    reading.parts.read(part),
    {
      open(name, { Id, Type, Target, TargetMode }) {
        if (name !== 'Relationship' || Id === undefined || Type === undefined || Target === undefined) return
        const target = Target.startsWith('/') ? Target.slice(1) : folder + Target
        relations.set(Id, {
          type: Type.slice(Type.lastIndexOf('/') + 1),
          target,
          isExternal: TargetMode === 'External',
        })
      },
    },
    reading.budget,
  )
  return relations
}
