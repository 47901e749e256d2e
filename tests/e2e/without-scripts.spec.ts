import { expect, test, type Browser, type Page } from '@playwright/test'
import { laboratories, people } from '@/db/seed/twine-people'
import { readDemonstrationRows } from './support/demonstration-rows'
import { mailFor, nextMail } from './support/mailbox'

test.use({ actionTimeout: 15_000 })

const study: Record<string, string> = {}

test.beforeAll(async () => {
  for (const { shortName, studyId } of (await readDemonstrationRows()).studies) study[shortName] = studyId
})

/** Signs in by the code of the mail, the way that is left where no script can read the link. */
async function signInByCode(browser: Browser, address: string): Promise<Page> {
  const page = await (await browser.newContext({ javaScriptEnabled: false })).newPage()
  const after = (await mailFor(address)).length
  await page.goto('/sign-in')
  await page.getByLabel('Mail address').fill(address)
  await page.getByRole('button', { name: 'Send me a link' }).click()
  await expect(page.getByLabel('Mail address')).toHaveValue(address)
  const { text } = await nextMail(address, { after, subject: /sign in/i })
  await page.getByLabel('Code from the mail').fill(/\b\d{4} ?\d{4}\b/.exec(text)?.[0] ?? '')
  await page.getByRole('button', { name: 'Sign in' }).click()
  await expect(page).toHaveURL(/\/studies$|\/participations/)
  return page
}

test.describe('without scripts', () => {
  test('a laboratory signs in by code, fills in the sheet, mends a fault and returns it', async ({
    browser,
  }) => {
    const page = await signInByCode(browser, laboratories[10]?.address ?? '')
    await page.goto(`/participations/${study['NT-25']}/sheet`)
    const cells = page.locator('input[name^="entry-"]')
    await expect(cells).toHaveCount(15)
    for (let cell = 0; cell < 15; cell += 1)
      await page.locator(`[name="entry-${cell}"]`).fill(cell === 4 ? '29o.1' : `${290 + cell}.1`)
    await page.getByRole('button', { name: 'Check before returning' }).click()
    await expect(page).toHaveURL(/look=problems/)
    await expect(page.locator('main')).toContainText('29o.1')
    await expect(page.locator('[name="entry-14"]')).toHaveValue('304.1')
    await page.locator('[name="entry-4"]').fill('294.1')
    await page.getByRole('button', { name: 'Check before returning' }).click()
    await expect(page.locator('main')).toContainText('15 of 15 results will be returned')
    await page.getByRole('button', { name: 'Return these results' }).click()
    await expect(page).toHaveURL(/\/receipts\/1$/)
    await expect(page.locator('main')).toContainText('294.1')
    await page.context().close()
  })

  test('a laboratory sends its own table and confirms what was read', async ({ browser }) => {
    const page = await signInByCode(browser, laboratories[4]?.address ?? '')
    await page.goto(`/participations/${study['NT-25']}`)
    const materials = ['sisal', 'hemp', 'jute', 'flax', 'coir']
    const lines = materials.flatMap((material, at) =>
      [1, 2, 3].map((replicate) => `${material};${replicate};${280 + 5 * at + replicate},4`),
    )
    await page.goto(`/participations/${study['NT-25']}/upload`)
    await page.getByLabel('File of results').setInputFiles({
      name: 'ours.csv',
      mimeType: 'text/csv',
      buffer: Buffer.from(['Material;replicate;Breaking force', ...lines].join('\r\n')),
    })
    await page.getByRole('button', { name: 'Send and see what is read' }).click()
    await expect(page).toHaveURL(/\/upload\/[0-9a-f-]+$/)
    // The page shows itself afresh until the file has been read.
    await expect(page.locator('main')).toContainText('15 of 15 results were read', { timeout: 30_000 })
    await page.getByRole('button', { name: 'Return these results' }).click()
    await expect(page).toHaveURL(/\/receipts\/1$/)
    await expect(page.locator('main')).toContainText('281.4')
    await page.context().close()
  })

  test('a coordinator sets a cell aside, and proposes a publication', async ({ browser }) => {
    const page = await signInByCode(browser, people.ines.address)
    await page.goto(`/studies/${study['NT-24']}/scrutiny`)
    const before = await page.getByRole('table', { name: 'Cells set aside' }).getByRole('row').count()
    await page.locator('summary', { hasText: 'Set a cell aside' }).click()
    const form = page.locator('form', { has: page.getByRole('button', { name: 'Set the cell aside' }) })
    await form.getByLabel('Laboratory').selectOption({ index: 5 })
    await form.getByLabel('Material').selectOption({ index: 3 })
    await form.getByLabel('Reason').fill('short')
    await form.getByRole('button', { name: 'Set the cell aside' }).click()
    // Refused, with everything kept that was chosen.
    await expect(form.getByLabel('Reason')).toHaveValue('short')
    await form
      .getByLabel('Reason')
      .fill('The specimens of this cell were stored wet, as was found on asking.')
    await form.getByRole('button', { name: 'Set the cell aside' }).click()
    await page.goto(`/studies/${study['NT-24']}/scrutiny`)
    await expect(page.getByRole('table', { name: 'Cells set aside' }).getByRole('row')).toHaveCount(
      before + 1,
    )

    await page.goto(`/studies/${study['NT-23']}/report`)
    await page.getByRole('button', { name: 'Propose publication' }).click()
    await expect(page.locator('main')).toContainText('You cannot confirm your own proposal')
    await page.context().close()
  })
})
