import { expect, test } from '@playwright/test'
import { parse } from 'csv-parse/sync'
import ExcelJS from 'exceljs'
import { sql } from 'kysely'
import { closeStudy } from '@/lib/use-cases/studies/close-study'
import { analyseNow, returnAs } from '@/db/seed/stage-study'
import { excludeCell } from '@/lib/use-cases/analyses/exclude-cell'
import {
  foundCommittee,
  openAttackWorld,
  stageStudy,
  type Committee,
  type StagedStudy,
} from './support/attack-world'
import { send } from './support/send'
import { uploadAndWait } from './support/uploads'

/* what a spreadsheet would run, typed wherever a person may type, and then looked for in every export. */

const names = {
  title: '=HYPERLINK("http://evil.example","see")',
  measurand: '=1+1',
  unit: '+N',
  materials: ['@SUM(A1:A9)', "-2+3+cmd|' /C calc'!A0"],
  level: '=day()',
  reason: '=HYPERLINK("http://evil.example","the reason")',
}

let world: ReturnType<typeof openAttackWorld>
let committee: Committee
let study: StagedStudy
let measurandId: string

test.beforeAll(async () => {
  world = openAttackWorld()
  committee = await foundCommittee(world, { laboratories: 3 })
  study = await stageStudy(world, committee, {
    stage: 'open',
    returns: false,
    plan: {
      title: names.title,
      measurands: [{ name: names.measurand, unit: names.unit, decimals: 1, hasTrueZero: false }],
      materials: names.materials.map((name) => ({ name })),
      levels: [
        { name: names.level, count: 2 },
        { name: 'replicate', count: 2 },
      ],
    },
  })
  const { rows } = await sql<{
    measurand_id: string
  }>`select measurand_id from measurand where study_id = ${study.studyId}`.execute(world.owner)
  measurandId = rows[0]?.measurand_id ?? ''
})
test.afterAll(() => world?.destroy())

/** A field that a spreadsheet would take for something to compute. */
function isFormula(field: string): boolean {
  return /^[=+\-@\t\r]/.test(field) && !/^-?\d+(\.\d+)?$/.test(field)
}

async function cellsOf(bytes: Buffer): Promise<ExcelJS.Cell[]> {
  const workbook = new ExcelJS.Workbook()
  await workbook.xlsx.load(bytes as unknown as ArrayBuffer)
  const cells: ExcelJS.Cell[] = []
  workbook.eachSheet((sheet) => sheet.eachRow((row) => row.eachCell((cell) => cells.push(cell))))
  return cells
}

test('A-24: the workbook to fill in holds no formula, whatever the study’s names say; −1.5 comes back a number', async () => {
  const cookie = await world.cookieOf(committee.contacts[0] ?? '')
  const { bytes } = await send({ path: `/api/participations/${study.studyId}/workbook`, cookie })
  const cells = await cellsOf(bytes)
  const texts = cells.map((cell) => cell.text)
  for (const name of [names.measurand, names.level, ...names.materials])
    expect(
      texts.some((text) => text.includes(name)),
      name,
    ).toBe(true)
  expect(
    cells.filter(
      (cell) => cell.type === ExcelJS.ValueType.Formula || cell.type === ExcelJS.ValueType.Hyperlink,
    ),
  ).toEqual([])

  const workbook = new ExcelJS.Workbook()
  await workbook.xlsx.load(bytes as unknown as ArrayBuffer)
  const sheet = workbook.getWorksheet('Results')
  let header = 0
  sheet?.eachRow((row, number) => {
    if (row.getCell(1).text === 'Material') header = number
  })
  const column = sheet?.getRow(header).actualCellCount ?? 0
  for (let row = header + 1; row <= (sheet?.rowCount ?? 0); row += 1)
    sheet!.getRow(row).getCell(column).value = row % 2 ? '-1.5' : -2.5
  const filled = Buffer.from(await workbook.xlsx.writeBuffer())
  const read = await uploadAndWait(
    { studyId: study.studyId, cookie },
    { name: 'results.xlsx', bytes: filled },
  )
  expect([read.stage, read.counts]).toEqual([
    'checked',
    expect.objectContaining({ values: study.keys.length, problems: 0, questions: 0 }),
  ])
})

test('A-24: a text that begins as a formula is no result, on the sheet or in a file', async () => {
  const cookie = await world.cookieOf(committee.contacts[0] ?? '')
  const lines = [
    'Material;=day();replicate;=1+1',
    ...names.materials.flatMap((material) =>
      [1, 2].flatMap((day) => [1, 2].map((replicate) => `"${material}";${day};${replicate};"=1+1"`)),
    ),
  ]
  const read = await uploadAndWait(
    { studyId: study.studyId, cookie },
    { name: 'results.csv', bytes: Buffer.from(lines.join('\n')) },
  )
  expect(read.counts?.values ?? 0).toBe(0)
})

test('A-24: coded results as CSV keep texts texts and numbers numbers', async () => {
  const { studyId, keys } = study
  for (const [index, contact] of committee.contacts.entries()) {
    const entries = Object.fromEntries(
      keys.map((key, place) => [key, (-1.5 - index - ((place * 7) % 5) / 10).toFixed(1)]),
    )
    await returnAs(world, { contact, studyId, entries })
  }
  const coordinator = await world.as(committee.coordinator)
  await closeStudy(coordinator, { studyId, reason: names.reason })
  await analyseNow(world, { coordinator: committee.coordinator, studyId })
  const { rows } = await sql<{ code: string; material_id: string }>`
    select code, material_id from participant join material using (study_id) where study_id = ${studyId} limit 1`.execute(
    world.owner,
  )
  const [{ code, material_id: materialId } = { code: '', material_id: '' }] = rows
  await excludeCell(coordinator, { studyId, code, measurandId, materialId, reason: names.reason })
  await analyseNow(world, { coordinator: committee.coordinator, studyId })

  const cookie = await world.cookieOf(committee.coordinator)
  const { text, headers } = await send({ path: `/api/studies/${studyId}/coded/${measurandId}.csv`, cookie })
  expect(headers['content-disposition']).toMatch(/^attachment; filename="[\w.-]+"$/)
  const records = parse(text) as string[][]
  expect(records.length).toBe(1 + committee.contacts.length * keys.length)
  expect(records.flat().filter(isFormula)).toEqual([])
  expect(records.flat()).toEqual(
    expect.arrayContaining([...names.materials.map((name) => `'${name}`), `'${names.level}`]),
  )
  const values = records.slice(1).map((record) => record.at(-2) ?? '')
  expect(values).toContain('-1.5')
  expect(values.every((value) => /^-\d\.\d$/.test(value))).toBe(true)
  // Unquoted, so that no program takes them for texts.
  expect(text).toMatch(/,-1\.5,/)
})

test('A-24: the lanes as CSV hold no formula', async () => {
  const cookie = await world.cookieOf(committee.coordinator)
  const { text } = await send({ path: `/api/studies/${study.studyId}/returns/csv`, cookie })
  const records = parse(text) as string[][]
  expect(records.length).toBe(1 + committee.contacts.length)
  expect(records.flat().filter(isFormula)).toEqual([])
})

test('A-24: on the pages the same names and reasons are text', async ({ browser }) => {
  const context = await browser.newContext()
  const [name = '', value = ''] = (await world.cookieOf(committee.coordinator)).split('=')
  await context.addCookies([{ name, value, url: process.env.BASE_URL }])
  const page = await context.newPage()
  await page.goto(`/studies/${study.studyId}/scrutiny`)
  await expect(page.getByText(names.reason).first()).toBeVisible()
  await expect(page.locator('a[href*="evil.example"]')).toHaveCount(0)
  await context.close()
})
