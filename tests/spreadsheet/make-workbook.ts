import { packZip, type ZipPart } from './pack-zip'

const main = 'http://schemas.openxmlformats.org/spreadsheetml/2006/main'
const office = 'http://schemas.openxmlformats.org/officeDocument/2006/relationships'
const relations = 'http://schemas.openxmlformats.org/package/2006/relationships'

export type WorkbookParts = {
  /** The XML inside <sheetData>, or a whole part where it begins with `<?xml`. */
  sheets?: { name: string; xml: string; state?: string }[]
  styles?: string
  strings?: string
  from1904?: boolean
  extra?: ZipPart[]
}

/** The smallest workbook with the given sheets, written part by part so that any part can be wrong. */
export function makeWorkbook(parts: WorkbookParts = {}): Buffer {
  return packZip(workbookParts(parts))
}

export function workbookParts({
  sheets,
  styles,
  strings,
  from1904,
  extra = [],
}: WorkbookParts = {}): ZipPart[] {
  const listed = sheets ?? [{ name: 'Results', xml: '<row r="1"><c r="A1"><v>1</v></c></row>' }]
  const book = listed
    .map(({ name, state }, index) => {
      const attribute = state === undefined ? '' : ` state="${state}"`
      return `<sheet name="${name}" sheetId="${index + 1}"${attribute} r:id="s${index + 1}"/>`
    })
    .join('')
  const links = listed.map((_, index) =>
    relation(`s${index + 1}`, 'worksheet', `worksheets/sheet${index + 1}.xml`),
  )
  links.push(
    relation('styles', 'styles', 'styles.xml'),
    relation('strings', 'sharedStrings', 'sharedStrings.xml'),
  )
  return [
    { name: '[Content_Types].xml', content: '<?xml version="1.0"?><Types/>' },
    {
      name: '_rels/.rels',
      content: `<Relationships xmlns="${relations}">${relation('r1', 'officeDocument', 'xl/workbook.xml')}</Relationships>`,
    },
    {
      name: 'xl/workbook.xml',
      content: `<workbook xmlns="${main}" xmlns:r="${office}"><workbookPr date1904="${from1904 ? 1 : 0}"/><sheets>${book}</sheets></workbook>`,
    },
    {
      name: 'xl/_rels/workbook.xml.rels',
      content: `<Relationships xmlns="${relations}">${links.join('')}</Relationships>`,
    },
    { name: 'xl/styles.xml', content: styles ?? `<styleSheet xmlns="${main}"/>` },
    { name: 'xl/sharedStrings.xml', content: strings ?? `<sst xmlns="${main}"/>` },
    ...listed.map(({ xml }, index) => ({
      name: `xl/worksheets/sheet${index + 1}.xml`,
      content: xml.startsWith('<?xml')
        ? xml
        : `<worksheet xmlns="${main}"><sheetData>${xml}</sheetData></worksheet>`,
    })),
    ...extra,
  ]
}

/** A sheet of typed texts and numbers, one inner array a row; null leaves a cell out. */
export function sheetXml(rows: (string | number | null)[][]): string {
  return rows
    .map((row, index) => {
      const cells = row.map((value) => {
        if (value === null) return '<c/>'
        if (typeof value === 'number') return `<c><v>${value}</v></c>`
        if (value.startsWith('<c')) return value
        return `<c t="inlineStr"><is><t>${escape(value)}</t></is></c>`
      })
      return `<row r="${index + 1}">${cells.join('')}</row>`
    })
    .join('')
}

function escape(text: string): string {
  return text.replaceAll('&', '&amp;').replaceAll('<', '&lt;')
}

function relation(id: string, type: string, target: string): string {
  return `<Relationship Id="${id}" Type="${office}/${type}" Target="${target}"/>`
}
