import ExcelJS from 'exceljs'
import { describe, expect, it } from 'vitest'
import { Refusal } from '@/lib/domain/errors'
import { readWorkbook } from '@/lib/spreadsheet/read-workbook'
import { cellAddress, parseCellAddress } from '@/lib/spreadsheet/workbook'
import { makeWorkbook, sheetXml, workbookParts } from './make-workbook'
import { packZip } from './pack-zip'

async function refusalOf(bytes: Uint8Array): Promise<Refusal> {
  try {
    await readWorkbook(bytes)
  } catch (error) {
    if (error instanceof Refusal) return error
    throw error
  }
  throw new Error('the file was read')
}

async function textsOf(bytes: Uint8Array): Promise<Record<string, string>> {
  const { sheets } = await readWorkbook(bytes)
  return Object.fromEntries(
    (sheets[0]?.cells ?? []).map(({ address, kind, text }) => [address, `${kind} ${text}`]),
  )
}

const styles = `<styleSheet xmlns="x"><numFmts><numFmt numFmtId="164" formatCode="0.000"/><numFmt numFmtId="165" formatCode="dd.mm.yyyy"/></numFmts><cellStyleXfs><xf numFmtId="14"/></cellStyleXfs><cellXfs><xf numFmtId="0"/><xf numFmtId="2"/><xf numFmtId="164"/><xf numFmtId="165"/><xf numFmtId="14"/><xf numFmtId="9"/></cellXfs></styleSheet>`

describe('readWorkbook', () => {
  it('reads every kind of cell as a person saw it', async () => {
    const strings =
      '<sst xmlns="x"><si><t>plain</t></si><si><r><t>ri</t></r><r><t xml:space="preserve">ch </t></r><rPh><t>no</t></rPh></si><si><t>a_x000D_b_x0000_c_xD800_</t></si></sst>'
    const xml =
      '<row r="2"><c r="A2" t="s"><v>0</v></c><c r="B2" t="s"><v>1</v></c><c r="C2" t="s"><v>2</v></c></row>' +
      '<row r="3"><c r="A3" s="1"><v>1.1000000000000001</v></c><c s="2"><v>1.1</v></c><c><v>1.1</v></c><c s="5"><v>0.5</v></c></row>' +
      '<row r="4"><c r="A4" s="3"><v>46024</v></c><c s="4"><v>46024.25</v></c><c t="d"><v>2026-01-02</v></c></row>' +
      '<row r="5"><c t="b"><v>1</v></c><c t="e"><v>#DIV/0!</v></c><c><f>1+1</f><v>99</v></c><c t="str"><f>A1</f><v>x</v></c><c><f t="shared" si="0"/><v>2</v></c></row>' +
      '<row><c t="inlineStr"><is><t>in &amp; line</t><rPh><t>no</t></rPh></is></c><c t="inlineStr"><is><t></t></is></c><c s="1"/></row>'
    const bytes = makeWorkbook({ styles, strings, sheets: [{ name: 'One', xml }] })
    expect(await textsOf(bytes)).toEqual({
      A2: 'text plain',
      B2: 'text rich ',
      C2: 'text a\rb_x0000_c_xD800_',
      A3: 'number 1.10',
      B3: 'number 1.100',
      C3: 'number 1.1',
      D3: 'number 50%',
      A4: 'date 2026-01-02',
      B4: 'date 2026-01-02 06:00:00',
      C4: 'date 2026-01-02',
      A5: 'boolean TRUE',
      B5: 'error #DIV/0!',
      C5: 'formula =1+1',
      D5: 'formula =A1',
      E5: 'formula =',
      A6: 'text in & line',
    })
  })

  it('reads dates from the calendar of 1904 where the workbook says so', async () => {
    const xml = '<row><c s="4"><v>42735</v></c></row>'
    expect(await textsOf(makeWorkbook({ styles, from1904: true, sheets: [{ name: 'One', xml }] }))).toEqual({
      A1: 'date 2021-01-01',
    })
  })

  it('reads names and cells whatever prefix their producer chose', async () => {
    const xml =
      '<?xml version="1.0"?><x:worksheet xmlns:x="y"><x:sheetData><x:row><x:c><x:v>7</x:v></x:c></x:row></x:sheetData></x:worksheet>'
    expect(await textsOf(makeWorkbook({ sheets: [{ name: 'One', xml }] }))).toEqual({ A1: 'number 7' })
  })

  it('reads what the library writes, at the right addresses', async () => {
    const book = new ExcelJS.Workbook()
    const sheet = book.addWorksheet('Zahlen')
    sheet.getCell('B7').value = 1.1
    sheet.getCell('B7').numFmt = '0.00'
    sheet.getCell('AA3').value = 'text'
    sheet.getCell('C1').value = new Date(Date.UTC(2027, 2, 14))
    sheet.getCell('D1').value = { formula: '1+1', result: 99 }
    sheet.getCell('E1').value = { error: '#N/A' }
    const bytes = new Uint8Array(await book.xlsx.writeBuffer())
    expect(await textsOf(bytes)).toEqual({
      C1: 'date 2027-03-14',
      D1: 'formula =1+1',
      E1: 'error #N/A',
      AA3: 'text text',
      B7: 'number 1.10',
    })
  })

  it('leaves hidden sheets alone and says so', async () => {
    const bytes = makeWorkbook({
      sheets: [
        { name: 'Seen', xml: sheetXml([['a']]) },
        { name: 'Lists', xml: sheetXml([['b']]), state: 'veryHidden' },
      ],
    })
    expect(await readWorkbook(bytes)).toMatchObject({
      sheets: [{ name: 'Seen' }],
      notices: ['The sheet “Lists” is hidden and was not read.'],
    })
  })

  it('follows no link to other files and no data connection, and says so', async () => {
    const extra = [
      { name: 'xl/externalLinks/externalLink1.xml', content: '<externalLink/>' },
      { name: 'xl/connections.xml', content: '<connections/>' },
    ]
    expect((await readWorkbook(makeWorkbook({ extra }))).notices).toEqual([
      'This workbook links to other files. The links were not followed.',
      'This workbook has data connections. They were not followed.',
    ])
  })

  it('reads nothing from a sheet that a link places outside the file', async () => {
    const parts = workbookParts().map((part) =>
      part.name === 'xl/_rels/workbook.xml.rels'
        ? { ...part, content: String(part.content).replaceAll('/>', ' TargetMode="External"/>') }
        : part,
    )
    expect((await readWorkbook(packZip(parts))).sheets).toEqual([])
  })
})

describe('readWorkbook refuses, by name,', () => {
  it.each<[string, string, () => Uint8Array]>([
    ['an empty file', 'file-empty', () => new Uint8Array()],
    ['a file beyond 5 MB', 'file-too-large', () => new Uint8Array(5_000_001)],
    ['a page of the web', 'not-a-workbook', () => Buffer.from('<html><body>x</body></html>')],
    ['three bytes', 'not-a-workbook', () => Buffer.from('PK\x03')],
    [
      'a program with a workbook at its end',
      'not-a-workbook',
      () => Buffer.concat([Buffer.from('MZ'), makeWorkbook()]),
    ],
    [
      'another packed file',
      'not-a-workbook',
      () => packZip([{ name: 'word/document.xml', content: '<w/>' }]),
    ],
    [
      'a text document with the content list of one',
      'not-a-workbook',
      () =>
        packZip([
          { name: '[Content_Types].xml', content: '<Types/>' },
          { name: 'word/document.xml', content: '<w/>' },
        ]),
    ],
    ['a file cut short', 'workbook-damaged', () => makeWorkbook().subarray(0, 900)],
    [
      'a file with bytes after its end',
      'workbook-damaged',
      () => Buffer.concat([makeWorkbook(), Buffer.from('more')]),
    ],
    [
      'an old workbook',
      'workbook-old-format',
      () => Buffer.concat([Buffer.from('d0cf11e0a1b11ae1', 'hex'), Buffer.from('Workbook', 'utf16le')]),
    ],
    [
      'a workbook locked with a password',
      'workbook-encrypted',
      () =>
        Buffer.concat([Buffer.from('d0cf11e0a1b11ae1', 'hex'), Buffer.from('EncryptedPackage', 'utf16le')]),
    ],
    [
      'a locked part',
      'workbook-encrypted',
      () => packZip(workbookParts().map((part) => ({ ...part, flags: 1 }))),
    ],
    [
      'macros',
      'workbook-macros',
      () => makeWorkbook({ extra: [{ name: 'xl/vbaProject.bin', content: 'x' }] }),
    ],
    [
      'macro sheets',
      'workbook-macros',
      () => makeWorkbook({ extra: [{ name: 'xl/macrosheets/a.xml', content: 'x' }] }),
    ],
    [
      'a binary workbook',
      'workbook-binary',
      () =>
        packZip([
          { name: '[Content_Types].xml', content: '<Types/>' },
          { name: 'xl/workbook.bin', content: 'x' },
        ]),
    ],
    [
      'an OpenDocument sheet',
      'workbook-open-document',
      () =>
        packZip([
          { name: 'mimetype', content: 'application/x' },
          { name: 'content.xml', content: '<x/>' },
        ]),
    ],
    [
      'a part above the file',
      'workbook-unsafe-names',
      () => makeWorkbook({ extra: [{ name: '../../x.xml', content: '' }] }),
    ],
    [
      'a part at the root',
      'workbook-unsafe-names',
      () => makeWorkbook({ extra: [{ name: '/etc/x', content: '' }] }),
    ],
    [
      'a part on a drive',
      'workbook-unsafe-names',
      () => makeWorkbook({ extra: [{ name: 'C:\\x', content: '' }] }),
    ],
    [
      'a part given twice',
      'workbook-duplicate-part',
      () => makeWorkbook({ extra: [{ name: 'XL/worksheets/Sheet1.xml', content: '<x/>' }] }),
    ],
    [
      '10,000 parts',
      'workbook-too-many-parts',
      () =>
        makeWorkbook({
          extra: Array.from({ length: 10_000 }, (_, index) => ({ name: `xl/media/${index}`, content: '' })),
        }),
    ],
    ['a part that says it is smaller than it is', 'workbook-sizes-lie', () => lying({ claimedSize: 10 })],
    [
      'a part that says it is larger than it is',
      'workbook-sizes-lie',
      () => lying({ claimedSize: 1_000_000 }),
    ],
    ['a part that is not what it was', 'workbook-damaged', () => lying({ claimedChecksum: 1 })],
    [
      '21 sheets',
      'workbook-too-many-sheets',
      () =>
        makeWorkbook({ sheets: Array.from({ length: 21 }, (_, index) => ({ name: `S${index}`, xml: '' })) }),
    ],
    [
      'entities',
      'workbook-declares-entities',
      () =>
        makeSheet(
          '<?xml version="1.0"?><!DOCTYPE x [<!ENTITY a "aaaa"><!ENTITY b "&a;&a;">]><worksheet>&b;</worksheet>',
        ),
    ],
    [
      'entities from elsewhere',
      'workbook-declares-entities',
      () => makeSheet('<?xml version="1.0"?><!DOCTYPE x SYSTEM "http://host.example/x.dtd"><worksheet/>'),
    ],
    [
      'an entity nobody declared',
      'workbook-damaged',
      () => makeSheet('<?xml version="1.0"?><worksheet>&b;</worksheet>'),
    ],
    [
      'XML that does not close',
      'workbook-damaged',
      () => makeSheet('<?xml version="1.0"?><worksheet><sheetData>'),
    ],
    [
      'another encoding',
      'workbook-encoding',
      () => makeSheet('<?xml version="1.0" encoding="UTF-7"?><worksheet/>'),
    ],
    [
      'bytes that are no letters',
      'workbook-encoding',
      () =>
        packZip(
          workbookParts().map((part) =>
            part.name.includes('sheet1')
              ? { ...part, content: new Uint8Array([0x3c, 0x61, 0xff, 0xfe]) }
              : part,
          ),
        ),
    ],
    [
      'a cell given twice',
      'workbook-damaged',
      () => makeSheet('<row r="1"><c r="A1"><v>1</v></c><c r="A1"><v>2</v></c></row>'),
    ],
    [
      'a cell where none can be',
      'workbook-damaged',
      () => makeSheet('<row r="1"><c r="ZZZ1"><v>1</v></c></row>'),
    ],
    ['a row where none can be', 'workbook-damaged', () => makeSheet('<row r="1e9"><c><v>1</v></c></row>')],
    ['a text that is not there', 'workbook-damaged', () => makeSheet('<row><c t="s"><v>5</v></c></row>')],
    [
      'a filled cell at the far end',
      'workbook-cell-too-far',
      () => makeSheet('<row r="1048576"><c r="XFD1048576"><v>1</v></c></row>'),
    ],
    [
      'a text longer than a cell can hold',
      'workbook-too-much-text',
      () => makeSheet(sheetXml([['x'.repeat(32_768)]])),
    ],
    [
      'more than 20,000 filled cells',
      'workbook-too-many-cells',
      () => makeSheet(sheetXml(Array.from({ length: 2_001 }, () => Array.from({ length: 10 }, () => 1)))),
    ],
  ])('%s', async (_, code, make) => {
    const refusal = await refusalOf(make())
    expect(refusal.code).toBe(code)
    expect(refusal.publicMessage).toMatch(/^[A-Z“].{20,}\.$/s)
  })

  it('names the cell at the far end, so that it can be cleared', async () => {
    const refusal = await refusalOf(makeSheet('<row r="1048576"><c r="XFD1048576"><v>1</v></c></row>'))
    expect(refusal.publicMessage).toContain('Cell XFD1048576 of the sheet “Results”')
  })
})

// Made after measured files that cost a common spreadsheet library, reading them whole, up to 27 s and 1.1 GiB.
describe('readWorkbook withstands', () => {
  it('104 kB that unpack to 100 MiB of spaces', async () => {
    const bytes = makeSheet(`<?xml version="1.0"?><worksheet>${' '.repeat(100 * 1024 * 1024)}</worksheet>`)
    expect(bytes.length).toBeLessThan(110_000)
    const startedAt = performance.now()
    expect((await refusalOf(bytes)).code).toBe('workbook-text-too-long')
    expect(performance.now() - startedAt).toBeLessThan(5_000)
  })

  it('a part that grows past the size it stated, as soon as it does', async () => {
    const content = `<?xml version="1.0"?><worksheet>${' '.repeat(100 * 1024 * 1024)}</worksheet>`
    const bytes = packZip(
      workbookParts().map((part) =>
        part.name.includes('sheet1') ? { ...part, content, claimedSize: 900 } : part,
      ),
    )
    expect((await refusalOf(bytes)).code).toBe('workbook-sizes-lie')
  })

  it('100 MiB of one tag, packed a thousandfold', async () => {
    const bytes = makeSheet(
      `<?xml version="1.0"?><worksheet>${`<a b="${' '.repeat(100_000)}"/>`.repeat(1_000)}</worksheet>`,
    )
    expect(bytes.length).toBeLessThan(1_000_000)
    const startedAt = performance.now()
    expect((await refusalOf(bytes)).code).toBe('workbook-packed-too-densely')
    expect(performance.now() - startedAt).toBeLessThan(5_000)
  })

  it('a text without end that hardly packs', async () => {
    const bytes = makeSheet(`<?xml version="1.0"?><worksheet>${letters(2_000_000)}</worksheet>`)
    expect(bytes.length).toBeGreaterThan(1_000_000)
    expect((await refusalOf(bytes)).code).toBe('workbook-text-too-long')
  })

  it('an attribute and a comment without end', async () => {
    const attribute = `<?xml version="1.0"?><worksheet a="${letters(2_000_000)}"/>`
    const comment = `<?xml version="1.0"?><worksheet><!--${letters(2_000_000)}--></worksheet>`
    expect((await refusalOf(makeSheet(attribute))).code).toBe('workbook-text-too-long')
    expect((await refusalOf(makeSheet(comment))).code).toBe('workbook-text-too-long')
  })

  it('a million rows of one cell', async () => {
    const rows = Array.from({ length: 1_000_000 }, (_, row) => `<row r="${row + 1}"><c><v>1</v></c></row>`)
    const bytes = makeSheet(rows.join(''))
    expect(bytes.length).toBeLessThan(5_000_000)
    const startedAt = performance.now()
    expect((await refusalOf(bytes)).code).toBe('workbook-cell-too-far')
    expect(performance.now() - startedAt).toBeLessThan(5_000)
  })

  it('more rows without cells than there can be', async () => {
    const rows = Array.from({ length: 1_100_000 }, (_, row) => `<row r="${row + 1}"/>`)
    const bytes = makeSheet(rows.join(''))
    expect(bytes.length).toBeLessThan(5_000_000)
    expect((await refusalOf(bytes)).code).toBe('workbook-too-complex')
  })

  it('parts that are small each and 60 MB together', async () => {
    const xml = `<?xml version="1.0"?><worksheet>${`<a b="${letters(20_000)}"/>`.repeat(200)}</worksheet>`
    const sheets = Array.from({ length: 15 }, (_, index) => ({ name: `S${index}`, xml }))
    expect((await refusalOf(makeWorkbook({ sheets }))).code).toBe('workbook-unpacks-too-large')
  })

  it('merged cells and checks that cover the whole sheet', async () => {
    const xml =
      '<?xml version="1.0"?><worksheet xmlns="x"><sheetData><row><c><v>1</v></c></row></sheetData>' +
      '<mergeCells><mergeCell ref="A1:XFD1048576"/></mergeCells>' +
      '<dataValidations><dataValidation sqref="A1:XFD1048576" type="list"><formula1>A1</formula1></dataValidation></dataValidations></worksheet>'
    const startedAt = performance.now()
    expect(await textsOf(makeSheet(xml))).toEqual({ A1: 'number 1' })
    expect(performance.now() - startedAt).toBeLessThan(500)
  })

  it('tags nested without end', async () => {
    const bytes = makeSheet(`<?xml version="1.0"?>${'<a>'.repeat(1_100_000)}`)
    expect((await refusalOf(bytes)).code).toMatch(/^workbook-(too-complex|packed-too-densely)$/)
  })
})

describe('cellAddress', () => {
  it.each([
    ['A1', 1, 1],
    ['Z3', 26, 3],
    ['AA3', 27, 3],
    ['ZZ9', 702, 9],
    ['AAA9', 703, 9],
    ['XFD1048576', 16_384, 1_048_576],
  ])('%s lies in column %i, row %i', (address, column, row) => {
    expect(cellAddress({ row, column })).toBe(address)
    expect(parseCellAddress(address)).toEqual({ row, column })
  })

  it.each(['', 'A', '1', 'A0', 'XFE1', 'A1048577', 'AAAA1', 'A1B'])('knows that %j is none', (address) => {
    expect(parseCellAddress(address)).toBeUndefined()
  })
})

function makeSheet(xml: string): Buffer {
  return makeWorkbook({ sheets: [{ name: 'Results', xml }] })
}

function lying(claim: { claimedSize?: number; claimedChecksum?: number }): Buffer {
  return packZip(workbookParts().map((part) => (part.name.includes('sheet1') ? { ...part, ...claim } : part)))
}

/** Letters in no order, the same in every run, so that they pack badly. */
function letters(length: number): string {
  let state = 27
  return Array.from({ length }, () => {
    state = Math.imul(state, 1_103_515_245) + 12_345
    return String.fromCharCode(97 + ((state >>> 16) % 26))
  }).join('')
}
