import { createHash, randomBytes } from 'node:crypto'
import { createServer, type Server } from 'node:http'
import { expect, test } from '@playwright/test'
import { makeWorkbook, workbookParts } from '@/tests/spreadsheet/make-workbook'
import { packZip } from '@/tests/spreadsheet/pack-zip'
import { foundCommittee, openAttackWorld, stageStudy } from './support/attack-world'
import { send } from './support/send'
import { sendFile, uploadAndWait } from './support/uploads'

/* through the address that laboratories send their files to, with the worker that reads them. */

let world: ReturnType<typeof openAttackWorld>
let studyId: string
let cookie: string
let otherCookie: string
let canary: Server
let canaryUrl: string
let called = 0

test.beforeAll(async () => {
  world = openAttackWorld()
  const committee = await foundCommittee(world, { laboratories: 2 })
  ;({ studyId } = await stageStudy(world, committee, { stage: 'open', returns: false }))
  cookie = await world.cookieOf(committee.contacts[0] ?? '')
  otherCookie = await world.cookieOf(committee.contacts[1] ?? '')
  canary = createServer((_request, response) => {
    called += 1
    response.end('called')
  })
  await new Promise<void>((resolve) => canary.listen(0, '127.0.0.1', resolve))
  const place = canary.address()
  canaryUrl = `http://127.0.0.1:${typeof place === 'object' ? place?.port : ''}/`
})
test.afterAll(async () => {
  canary?.close()
  await world?.destroy()
})

/** The slowest answer of the health check while the work goes on. */
async function whileHealthy<T>(work: Promise<T>): Promise<{ result: T; slowestMs: number }> {
  let slowestMs = 0
  let isDone = false
  const watch = (async () => {
    while (!isDone) {
      const began = performance.now()
      const { status } = await send({ path: '/api/health/live' })
      expect(status).toBe(200)
      slowestMs = Math.max(slowestMs, performance.now() - began)
      await new Promise((resolve) => setTimeout(resolve, 50))
    }
  })()
  const result = await work.finally(() => (isDone = true))
  await watch
  return { result, slowestMs }
}

const sheet = (xml: string) => makeWorkbook({ sheets: [{ name: 'Results', xml }] })
const lying = (claim: { claimedSize: number }, content: string) =>
  packZip(
    workbookParts().map((part) => (part.name.includes('sheet1') ? { ...part, content, ...claim } : part)),
  )
const spaces = () => `<?xml version="1.0"?><worksheet>${' '.repeat(100 * 1024 * 1024)}</worksheet>`
const oldContainer = (word: string) =>
  Buffer.concat([Buffer.from('d0cf11e0a1b11ae1', 'hex'), Buffer.from(word, 'utf16le')])

const files: [id: string, what: string, code: string, make: () => Buffer][] = [
  [
    'A-25',
    'a page of the web',
    'not-a-workbook',
    () => Buffer.from('<html><script>alert(1)</script></html>'),
  ],
  [
    'A-25',
    'a program with a workbook at its end',
    'not-a-workbook',
    () => Buffer.concat([Buffer.from('MZ'), makeWorkbook()]),
  ],
  [
    'A-25',
    'a workbook with macros',
    'workbook-macros',
    () => makeWorkbook({ extra: [{ name: 'xl/vbaProject.bin', content: 'x' }] }),
  ],
  ['A-25', 'a workbook locked with a password', 'workbook-encrypted', () => oldContainer('EncryptedPackage')],
  ['A-25', 'an old workbook', 'workbook-old-format', () => oldContainer('Workbook')],
  ['A-26', '104 kB that unpack to 100 MiB', 'workbook-text-too-long', () => sheet(spaces())],
  [
    'A-26',
    'a million rows',
    'workbook-cell-too-far',
    () =>
      sheet(
        Array.from({ length: 1_000_000 }, (_, row) => `<row r="${row + 1}"><c><v>1</v></c></row>`).join(''),
      ),
  ],
  [
    'A-27',
    'a part that grows past the size it stated',
    'workbook-sizes-lie',
    () => lying({ claimedSize: 900 }, spaces()),
  ],
  [
    'A-27',
    'a part given twice',
    'workbook-duplicate-part',
    () => makeWorkbook({ extra: [{ name: 'XL/worksheets/Sheet1.xml', content: '<x/>' }] }),
  ],
  [
    'A-27',
    'a part above the file',
    'workbook-unsafe-names',
    () => makeWorkbook({ extra: [{ name: '../../x.xml', content: '' }] }),
  ],
  [
    'A-27',
    '10,000 parts',
    'workbook-too-many-parts',
    () =>
      makeWorkbook({
        extra: Array.from({ length: 10_000 }, (_, index) => ({ name: `xl/media/${index}`, content: '' })),
      }),
  ],
  [
    'A-28',
    'entities from elsewhere',
    'workbook-declares-entities',
    () =>
      sheet(
        `<?xml version="1.0"?><!DOCTYPE x SYSTEM "${canaryUrl}x.dtd" [<!ENTITY a SYSTEM "${canaryUrl}a">]><worksheet>&a;</worksheet>`,
      ),
  ],
]

test('A-25 to A-28: each wrong, swollen, lying or reaching file is refused by name, while the server answers in under a second', async () => {
  test.setTimeout(120_000)
  // Made beforehand: the making stops this process for seconds, and would be taken for the server's slowness.
  const made = files.map(([, , , make]) => make())
  const upload = (bytes: Buffer, index: number) =>
    uploadAndWait({ studyId, cookie: index % 2 ? cookie : otherCookie }, { name: 'results.xlsx', bytes })
  const { result, slowestMs } = await whileHealthy(Promise.all(made.map(upload)))
  const found = result.map(
    ({ refusal }, index) => `${files[index]?.[0]} ${files[index]?.[1]}: ${refusal?.code}`,
  )
  expect(found).toEqual(files.map(([id, what, code]) => `${id} ${what}: ${code}`))
  for (const { refusal } of result) expect(refusal?.message).toMatch(/^[A-Z“].{20,}\.$/s)
  expect(slowestMs).toBeLessThan(1000)
})

test('A-28: external links, remote pictures and data connections call nobody', async () => {
  const target = `Target="${canaryUrl}x" TargetMode="External"`
  const relations = (kind: string) =>
    `<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Id="r1" Type="http://schemas.openxmlformats.org/officeDocument/2006/relationships/${kind}" ${target}/></Relationships>`
  const bytes = makeWorkbook({
    sheets: [
      {
        name: 'Results',
        xml: `<row r="1"><c r="A1"><f>WEBSERVICE("${canaryUrl}")</f><v>1</v></c><c r="B1"><f>cmd|'/c calc'!A0</f></c></row>`,
      },
    ],
    extra: [
      { name: 'xl/externalLinks/externalLink1.xml', content: '<externalLink/>' },
      { name: 'xl/externalLinks/_rels/externalLink1.xml.rels', content: relations('externalLinkPath') },
      { name: 'xl/drawings/_rels/drawing1.xml.rels', content: relations('image') },
      {
        name: 'xl/connections.xml',
        content: `<connections><connection id="1" type="4"><webPr url="${canaryUrl}"/></connection></connections>`,
      },
    ],
  })
  const { stage, counts } = await uploadAndWait({ studyId, cookie }, { name: 'results.xlsx', bytes })
  expect(stage).toBe('checked')
  expect(counts?.values).toBe(0)
  expect(called).toBe(0)
})

test('A-27: a name that climbs out of its folder is kept as a name, and gives none to the download', async () => {
  const bytes = Buffer.from('Material;replicate;Breaking force\n')
  const { text } = await sendFile(
    { studyId, cookie },
    { name: '..\\..\\../../etc/pass%22wd\u202e.csv', bytes },
  )
  const { uploadId } = JSON.parse(text) as { uploadId: string }
  const file = await send({ path: `/api/participations/${studyId}/uploads/${uploadId}/file`, cookie })
  expect(file.text).toBe(bytes.toString())
  expect(file.headers['content-disposition']).toMatch(
    /^attachment; filename="[\w. -]+"; filename\*=UTF-8''[\w.%-]+$/,
  )
  expect(file.headers['content-disposition']).not.toMatch(/\.\.|\//)
  expect(file.headers).toMatchObject({
    'content-type': 'application/octet-stream',
    'x-content-type-options': 'nosniff',
  })
  expect(file.headers['content-security-policy']).toContain('sandbox')
})

const sizes = [1, 4.9, 5.1, 9.9, 10.1, 25]

test('A-29: bodies of 1, 4.9, 5.1, 9.9, 10.1 and 25 MB are stored whole or refused clearly, never cut', async () => {
  test.setTimeout(120_000)
  for (const megabytes of sizes) {
    const bytes = randomBytes(Math.round(megabytes * 1_000_000))
    const { result, slowestMs } = await whileHealthy(
      sendFile({ studyId, cookie }, { name: 'large.xlsx', bytes }),
    )
    expect(slowestMs, `health while ${megabytes} MB arrive`).toBeLessThan(1000)
    const said = JSON.parse(result.text) as {
      uploadId?: string
      sha256?: string
      error?: { code: string; message: string }
    }
    if (megabytes > 5) {
      expect([result.status, said.error?.code], `${megabytes} MB`).toEqual([413, 'too-large'])
      expect(said.error?.message).toContain('larger than 5 MB and was not kept')
      continue
    }
    expect(result.status, `${megabytes} MB`).toBe(200)
    expect(said.sha256).toBe(createHash('sha256').update(bytes).digest('hex'))
    const file = await send({ path: `/api/participations/${studyId}/uploads/${said.uploadId}/file`, cookie })
    expect(file.bytes.equals(bytes), `${megabytes} MB come back as they were sent`).toBe(true)
  }
})

test('A-29: a person whose file is too large is told so on the page', async () => {
  const { status, headers } = await sendFile(
    { studyId, cookie },
    { name: 'large.xlsx', bytes: randomBytes(6 * 1024 * 1024) },
    'text/html',
  )
  expect([status, headers.location]).toEqual([303, `/participations/${studyId}/upload?problem=too-large`])
  const { text } = await send({ path: headers.location ?? '', cookie })
  expect(text).toContain('5 MB')
})

test('A-29: a body that breaks off half-way is no file', async () => {
  const before = await world.owner
    .selectFrom('vault.upload')
    .select('upload_id')
    .where('study_id', '=', studyId)
    .execute()
  const boundary = 'a-boundary-of-the-tests'
  const half = `--${boundary}\r\nContent-Disposition: form-data; name="file"; filename="x.xlsx"\r\n\r\n${'x'.repeat(10_000)}`
  const { status, text } = await send({
    method: 'POST',
    path: `/api/participations/${studyId}/uploads`,
    cookie,
    headers: {
      origin: process.env.BASE_URL ?? '',
      accept: 'application/json',
      'content-type': `multipart/form-data; boundary=${boundary}`,
    },
    body: half,
  })
  expect([status, (JSON.parse(text) as { error: { code: string } }).error.code]).toEqual([
    422,
    'transfer-broken',
  ])
  expect(
    await world.owner
      .selectFrom('vault.upload')
      .select('upload_id')
      .where('study_id', '=', studyId)
      .execute(),
  ).toEqual(before)
})
