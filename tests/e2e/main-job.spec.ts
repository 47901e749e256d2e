import { expect, test, type Page } from '@playwright/test'
import { people } from '@/db/seed/twine-people'
import type { AnalysisDocument } from '@/lib/statistics'
import { readJson, readReference, readRows, type ReferenceRow } from '../statistics/reference/read-reference'
import { acceptInvitation, fillWorkbook, returnFile, returnSheet } from './support/laboratory-steps'
import { mailFor } from './support/mailbox'
import { pageOf } from './support/sign-in'
import {
  closeAndCompute,
  inviteAndOpen,
  planStudy,
  publish,
  type LaboratoryToInvite,
} from './support/study-steps'

/*
 * The main job from the first form to the published page, with values of reference sets: glucose in serum (ASTM
 * E691, eight laboratories, one workbook each) and the cooperative trial of the Analytical Methods Committee
 * (1987, Analyst 112, 679; batches as the middle level). Sources and doubts stand in tests/statistics/reference.
 */

const member = people.juno
const trees = [
  'Alderholt',
  'Birchfen',
  'Cedarmoor',
  'Dogwoodby',
  'Elmstow',
  'Firbeck',
  'Gorsewick',
  'Hazelmere',
]
const zones = ['Europe/Lisbon', 'Asia/Kolkata', 'America/New_York', 'Pacific/Auckland']

/** Invented laboratories for the laboratories of a set, in the order of its file. */
function inventLaboratories(set: string, labs: readonly string[]): (LaboratoryToInvite & { lab: string })[] {
  return labs.map((lab, index) => ({
    lab,
    name: `${trees[index]} ${set} Bench`,
    town: `${trees[index]}-on-Water`,
    contact: `Keeper ${trees[index]}`,
    address: `keeper@${trees[index]?.toLowerCase()}-${set}.example`,
    zone: zones[index % zones.length] ?? 'UTC',
  }))
}

test('glucose in serum: from the plan to the published page, one workbook a laboratory', async ({
  browser,
}) => {
  test.setTimeout(300_000)
  const rows = readRows('e691_glucose')
  const laboratories = inventLaboratories('serum', unique(rows, 'lab'))
  const coordinator = await pageOf(browser, people.ines.address)
  const studyId = await planStudy(coordinator, {
    shortName: 'GS-01',
    title: 'Glucose in serum',
    method: 'GS 7, glucose by an enzymatic method',
    measurand: { name: 'Glucose', unit: 'mg/dL', decimals: 2 },
    materials: unique(rows, 'material'),
    levels: [{ name: 'replicate', count: 3 }],
  })
  await inviteAndOpen(coordinator, { studyId, laboratories, member })

  for (const { lab, address } of laboratories) {
    const page = await acceptInvitation(browser, { address, shortName: 'GS-01' })
    const buffer = await fillWorkbook(page, {
      studyId,
      valueOf: ([material, replicate]) => valueAt(rows, { lab, material, replicate }),
    })
    await returnFile(page, { studyId, file: { name: 'results.xlsx', mimeType: workbookType, buffer } })
    await expect
      .poll(
        async () =>
          (await mailFor(address)).filter(({ subject }) => /receipt|received/i.test(subject)).length,
      )
      .toBe(1)
    await page.context().close()
  }

  await closeAndCompute(coordinator, { studyId, returned: 8 })
  await committeeReads(await pageOf(browser, member.address), { studyId, laboratories })
  const address = await publish(coordinator, await pageOf(browser, people.tobin.address), studyId)

  const page = await (await browser.newContext()).newPage()
  await page.goto(address)
  await expect(page.getByRole('heading', { level: 1, name: 'Glucose in serum' })).toBeVisible()
  await namesNobody(page, laboratories)
  await showsPublishedFigures(page)
  const document = await downloadAnalysis(page, address)
  for (const { material, expected } of readReference('e691_glucose')) {
    const computed = document.materials.find((each) => each.material === material)
    expect(computed?.mean).toBeCloseToRelative(expected.weighted_general_mean)
    expect(computed?.repeatability.sd).toBeCloseToRelative(expected.precision.sr)
    expect(computed?.reproducibility.sd).toBeCloseToRelative(expected.precision.sR)
    expect(computed?.cochran.statistic).toBeCloseToRelative(expected.cochran.C)
  }
  const csv = await (await page.request.get(`${address}/results-1.csv`)).text()
  expect(csv.trim().split('\n')).toHaveLength(1 + rows.length)
  expect(
    csv
      .split('\n')
      .flatMap((line) => line.split(',')[3] ?? [])
      .slice(1)
      .sort(),
  ).toEqual(rows.map(({ value }) => value).sort())
})

test('a cooperative trial with batches: returned on the sheet and as tables of the laboratories’ own', async ({
  browser,
}) => {
  test.setTimeout(300_000)
  const rows = readRows('coop')
  const laboratories = inventLaboratories('trial', unique(rows, 'lab'))
  const materials = unique(rows, 'material')
  const coordinator = await pageOf(browser, people.ines.address)
  const studyId = await planStudy(coordinator, {
    shortName: 'CT-01',
    title: 'Cooperative trial in batches',
    method: 'CT 3, content by titration',
    measurand: { name: 'Content', unit: '%', decimals: 2 },
    materials,
    levels: [
      { name: 'batch', count: 3 },
      { name: 'replicate', count: 2 },
    ],
  })
  await inviteAndOpen(coordinator, { studyId, laboratories, member })

  for (const [index, { lab, address }] of laboratories.entries()) {
    const page = await acceptInvitation(browser, { address, shortName: 'CT-01' })
    const own = materials.flatMap((material) =>
      ['1', '2', '3'].flatMap((batch) => ['1', '2'].map((replicate) => ({ material, batch, replicate }))),
    )
    const valueOf = (place: (typeof own)[number]) =>
      valueAt(rows, { lab, ...place, batch: `B${place.batch}` })
    if (index < 2) await returnSheet(page, { studyId, values: own.map(valueOf) })
    else {
      // Half the laboratories write a comma, as their spreadsheets do.
      const mark = index % 2 === 0 ? ',' : '.'
      const table = own.map((place) =>
        [place.material, place.batch, place.replicate, valueOf(place).replace('.', mark)].join(';'),
      )
      const buffer = Buffer.from(['Material;batch;replicate;Content', ...table].join('\r\n'))
      await returnFile(page, { studyId, file: { name: 'ours.csv', mimeType: 'text/csv', buffer } })
    }
    await page.context().close()
  }

  await closeAndCompute(coordinator, { studyId, returned: 6 })
  await committeeReads(await pageOf(browser, member.address), { studyId, laboratories })
  const address = await publish(coordinator, await pageOf(browser, people.tobin.address), studyId)
  const page = await (await browser.newContext()).newPage()
  await page.goto(address)
  await namesNobody(page, laboratories)
  const document = await downloadAnalysis(page, address)
  expect(document.input.nesting).toEqual(['laboratory', 'batch', 'replicate'])
  for (const { material, expected } of readReference('coop')) {
    const { nested } = expected
    const computed = document.materials.find((each) => each.material === material)
    expect(computed?.repeatability.variance).toBeCloseToRelative(nested.sr2)
    expect(computed?.reproducibility.variance).toBeCloseToRelative(nested.sR2)
    expect(computed?.intermediate[0]?.variance).toBeCloseToRelative(nested.sI2_intermediate.from_batch_down)
    for (const [index, source] of ['lab', 'batch', 'residual'].entries())
      expect(computed?.anova.components[index]?.varianceRaw).toBeCloseToRelative(
        nested.components_anova_raw[source],
      )
  }
  await shows(page, {
    material: 'S1',
    column: 'sR',
    value: Math.sqrt(readReference('coop')[0]?.expected.nested.sR2),
  })
})

const workbookType = 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet'

function unique(rows: readonly ReferenceRow[], column: string): string[] {
  return [...new Set(rows.map((row) => row[column] ?? ''))]
}

function valueAt(rows: readonly ReferenceRow[], place: Record<string, string | undefined>): string {
  const found = rows.find((row) => Object.entries(place).every(([column, value]) => row[column] === value))
  if (!found) throw new Error(`the set has no result at ${JSON.stringify(place)}`)
  return found.value
}

async function committeeReads(
  page: Page,
  { studyId, laboratories }: { studyId: string; laboratories: readonly LaboratoryToInvite[] },
): Promise<void> {
  await page.goto(`/committee/${studyId}`)
  await expect(page.getByRole('heading', { name: 'Between laboratories, h' })).toBeVisible()
  await expect(page.getByRole('heading', { name: 'Within laboratories, k' })).toBeVisible()
  await namesNobody(page, laboratories)
  await page.context().close()
}

async function namesNobody(page: Page, laboratories: readonly LaboratoryToInvite[]): Promise<void> {
  const everything = (await page.content()).toLowerCase()
  for (const { name, town, contact, address } of laboratories)
    for (const word of [name, town, contact, address]) expect(everything).not.toContain(word.toLowerCase())
}

async function downloadAnalysis(page: Page, address: string): Promise<AnalysisDocument> {
  return (await (await page.request.get(`${address}/analysis-1.json`)).json()) as AnalysisDocument
}

const columns: Record<string, string> = { average: 'Mean', sr: 'sr', sR: 'sR', r: 'Limit r', R: 'Limit R' }

/** Every figure that the standard prints and the reference says agrees, against the page's rounded one. */
async function showsPublishedFigures(page: Page): Promise<void> {
  const { rows } = readJson('expected/published.json') as {
    rows: { set: string; item: string; published: number; agrees: boolean }[]
  }
  const printed = rows.filter(
    ({ set, item, agrees }) => set === 'e691_glucose' && agrees && (item.split(' ')[1] ?? '') in columns,
  )
  expect(printed.length).toBeGreaterThan(15)
  for (const { item, published } of printed) {
    const [material = '', column = ''] = item.split(' ')
    await shows(page, { material, column, value: published })
  }
}

/** The page's figure is the value, to the last decimal that the page shows. */
async function shows(
  page: Page,
  { material, column, value }: { material: string; column: string; value: number },
): Promise<void> {
  const table = page.getByRole('table', { name: /^Precision by material/ })
  const headers = await table.getByRole('columnheader').allInnerTexts()
  const position = headers.findIndex(
    (header) => header.replace(/\s/g, '') === (columns[column] ?? '').replace(/\s/g, ''),
  )
  const row = table
    .getByRole('row')
    .filter({ has: page.getByRole('rowheader', { name: material, exact: true }) })
  const cells = await row.locator('th, td').allInnerTexts()
  const text = (cells[position] ?? '').replaceAll('\u2212', '-').replace(/[\s\u202f]/g, '')
  const decimals = text.split('.')[1]?.length ?? 0
  // A value printed on the boundary of two roundings may fall either way; a unit of the printed figure is allowed.
  expect(Math.abs(Number(text) - value), `${material} ${column}: ${text} for ${value}`).toBeLessThanOrEqual(
    0.5 * 10 ** -decimals + 0.00006,
  )
}

expect.extend({
  toBeCloseToRelative(received: number | null | undefined, wanted: number) {
    const pass =
      typeof received === 'number' && Math.abs(received - wanted) <= 1e-9 * Math.abs(wanted) + 1e-300
    return { pass, message: () => `${received} is not ${wanted} to a relative 1e-9` }
  },
})

declare global {
  // eslint-disable-next-line @typescript-eslint/no-namespace -- Playwright's own way to type a matcher
  namespace PlaywrightTest {
    interface Matchers<R> {
      toBeCloseToRelative(wanted: number): R
    }
  }
}
