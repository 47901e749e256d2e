import { expect, type Browser, type Page } from '@playwright/test'
import ExcelJS from 'exceljs'
import { linkOf, mailFor, nextMail } from './mailbox'
import { followSignInMail } from './sign-in'

/** Opens the invitation that came by mail, accepts it, and signs in by the mail that follows. */
export async function acceptInvitation(
  browser: Browser,
  { address, shortName }: { address: string; shortName: string },
): Promise<Page> {
  const page = await (await browser.newContext()).newPage()
  const invitation = await nextMail(address, { after: 0, subject: new RegExp(`^${shortName}`) })
  const after = (await mailFor(address)).length
  await page.goto(linkOf(invitation))
  await page.getByRole('button', { name: 'Accept' }).click()
  await expect(page.getByText(/on its way/i).first()).toBeVisible()
  await followSignInMail(page, { address, after })
  return page
}

/** The product's own workbook with a laboratory's values typed into it, keyed by the row's texts. */
export async function fillWorkbook(
  page: Page,
  { studyId, valueOf }: { studyId: string; valueOf: (row: string[]) => string },
): Promise<Buffer> {
  const answer = await page.request.get(`/api/participations/${studyId}/workbook`)
  expect(answer.ok()).toBe(true)
  const workbook = new ExcelJS.Workbook()
  // The types of exceljs know an older Buffer than Node's.
  await workbook.xlsx.load((await answer.body()) as unknown as ArrayBuffer)
  const sheet = workbook.getWorksheet('Results')
  if (!sheet) throw new Error('the workbook has no sheet “Results”')
  let header = 0
  sheet.eachRow((row, number) => {
    if (String(row.getCell(1).value) === 'Material') header = number
  })
  const columns = sheet.getRow(header).actualCellCount
  for (let number = header + 1; number <= sheet.rowCount; number += 1) {
    const row = sheet.getRow(number)
    const place = Array.from({ length: columns - 1 }, (_, index) =>
      String(row.getCell(index + 1).value ?? ''),
    )
    if (place[0]) row.getCell(columns).value = valueOf(place)
  }
  return Buffer.from(await workbook.xlsx.writeBuffer())
}

/** Sends a file, waits for what was read of it, and returns it. */
export async function returnFile(
  page: Page,
  { studyId, file }: { studyId: string; file: { name: string; mimeType: string; buffer: Buffer } },
): Promise<void> {
  await page.goto(`/participations/${studyId}/upload`)
  await page.getByLabel('File of results').setInputFiles(file)
  await page.getByRole('button', { name: 'Send and see what is read' }).click()
  await page.getByRole('button', { name: 'Return these results' }).click({ timeout: 30_000 })
  await expect(page).toHaveURL(/\/receipts\/\d+$/)
}

/** Types every value into the sheet, checks it and returns it. */
export async function returnSheet(
  page: Page,
  { studyId, values }: { studyId: string; values: readonly string[] },
): Promise<void> {
  await page.goto(`/participations/${studyId}/sheet`)
  for (const [index, value] of values.entries()) await page.locator(`[name="entry-${index}"]`).fill(value)
  await page.getByRole('button', { name: 'Check before returning' }).click()
  await page.getByRole('button', { name: 'Return these results' }).click()
  await expect(page).toHaveURL(/\/receipts\/\d+$/)
}
