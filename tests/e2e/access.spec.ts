import { expect, test, type Page } from '@playwright/test'
import { laboratories, people } from '@/db/seed/twine-people'
import { asOwner, readDemonstrationRows } from './support/demonstration-rows'
import { linkOf, mailFor, nextMail } from './support/mailbox'
import { faultsOf, tabTo } from './support/page-checks'
import { pageOf } from './support/sign-in'

const contact = laboratories[0]?.address ?? ''
const study: Record<string, string> = {}
let slug = ''

test.beforeAll(async () => {
  const { studies, slugs } = await readDemonstrationRows()
  for (const { shortName, studyId } of studies) study[shortName] = studyId
  slug = slugs[0] ?? ''
})

/** A page, and what brings it to the state that is meant, where its address does not. */
interface Visit {
  readonly path: string
  readonly shows: RegExp
  readonly bring?: (page: Page) => Promise<void>
  readonly withPlots?: boolean
}

async function expectNoFaults(page: Page, visits: readonly Visit[]): Promise<void> {
  for (const { path, shows, bring, withPlots = false } of visits)
    await test.step(path, async () => {
      await page.emulateMedia({ colorScheme: 'light' })
      await page.setViewportSize({ width: 1280, height: 800 })
      await page.goto(path)
      await bring?.(page)
      await expect(page.locator('main')).toContainText(shows)
      expect.soft(await faultsOf(page, { withPlots }), path).toEqual([])
    })
}

const press = (name: string | RegExp) => async (page: Page) => {
  await page.getByRole('button', { name }).first().click()
  await expect(page.getByRole('alert').or(page.locator('[role="status"]:not(:empty)')).first()).toBeVisible()
}

test.use({ actionTimeout: 15_000 })

test.describe('every page is usable by everyone', () => {
  test.setTimeout(240_000)

  test('of the public', async ({ page }) => {
    await expectNoFaults(page, [
      { path: '/', shows: /How far may two results differ/ },
      { path: '/published', shows: /NT-21/ },
      { path: '/published?q=nothing-of-this-kind', shows: /No published study matches/ },
      { path: `/published/${slug}`, shows: /Between laboratories/, withPlots: true },
      { path: `/published/${slug}?measurand=2`, shows: /Linear density/ },
      { path: '/sign-in?problem=link', shows: /does not sign you in any more/ },
      { path: '/sign-in', shows: /Give your mail address\./, bring: press('Send me a link') },
      { path: '/sign-in?signed=out', shows: /signed out/ },
      { path: '/sign-in/code', shows: /Code from the mail/ },
      { path: '/sign-in/code?problem=bad-code', shows: /This code does not fit/ },
      { path: '/sign-in/confirm', shows: /The link is not whole/ },
      {
        path: '/sign-in/confirm#token=a.b&address=somebody%40laboratory.example',
        shows: /somebody@laboratory\.example/,
      },
      { path: '/invitation', shows: /Link from the mail/ },
      { path: '/invitation#no.such.link', shows: /not known/ },
      { path: '/no-such-page', shows: /Nothing here for you/ },
    ])
  })

  test('of a failure of ours', async ({ page }) => {
    await asOwner((client) => client.query('alter table publication rename to publication_away'))
    try {
      await expectNoFaults(page, [{ path: '/published', shows: /This page failed, and it is our fault/ }])
    } finally {
      await asOwner((client) => client.query('alter table publication_away rename to publication'))
    }
  })

  test('of a coordinator', async ({ browser }) => {
    const page = await pageOf(browser, people.ines.address)
    const at = (name: string, stations: readonly string[]): Visit[] =>
      stations.map((station) => ({ path: `/studies/${study[name]}/${station}`, shows: /\w/ }))
    await expectNoFaults(page, [
      { path: '/studies', shows: /NT-27/ },
      { path: '/studies?q=nothing-of-this-kind', shows: /0 of/ },
      { path: '/studies/new', shows: /Short name/, bring: press('Open the draft') },
      // Before anything has happened, while returns come in, and when all is done.
      ...at('NT-27', [
        '',
        'plan',
        'materials',
        'laboratories',
        'results',
        'scrutiny',
        'precision',
        'review',
        'report',
        'trail',
      ]),
      ...at('NT-25', ['', 'plan', 'laboratories', 'results', 'scrutiny']),
      ...at('NT-21', ['', 'results', 'precision', 'review', 'report', 'trail']),
      {
        path: `/studies/${study['NT-24']}/scrutiny`,
        shows: /Cells set aside/,
        bring: (each) => each.locator('summary', { hasText: 'Set a cell aside' }).click(),
      },
      { path: `/studies/${study['NT-24']}/results`, shows: /./ },
      { path: `/studies/${study['NT-23']}/review`, shows: /Before its committee/ },
      { path: `/studies/${study['NT-22']}/report`, shows: /cannot confirm your own/ },
      { path: `/studies/${study['NT-26']}/laboratories`, shows: /declined/ },
      { path: `/studies/${study['NT-25']}/laboratories/key`, shows: /./ },
    ])
  })

  test('of a committee', async ({ browser }) => {
    const chair = await pageOf(browser, people.marit.address)
    await expectNoFaults(chair, [
      { path: '/studies', shows: /NT-22/ },
      {
        path: `/committee/${study['NT-22']}/confirm`,
        shows: /Read the page below/,
        bring: (each) => each.locator('summary', { hasText: 'Confirm and publish' }).click(),
      },
      { path: `/committee/${study['NT-23']}/confirm`, shows: /Nothing is proposed yet/ },
    ])
    const observer = await pageOf(browser, people.leda.address)
    await expectNoFaults(observer, [
      { path: `/committee/${study['NT-23']}`, shows: /Outlier tests/ },
      { path: `/committee/${study['NT-25']}`, shows: /Nothing to read yet/ },
      { path: `/studies/${study['NT-23']}`, shows: /Nothing here for you/ },
    ])
  })

  test('of a laboratory', async ({ browser }) => {
    const page = await pageOf(browser, contact)
    const [open, inviting, over] = [
      `/participations/${study['NT-25']}`,
      `/participations/${study['NT-26']}`,
      `/participations/${study['NT-21']}`,
    ]
    await expectNoFaults(page, [
      { path: '/studies', shows: /NT-25/ },
      { path: open, shows: /due/ },
      { path: inviting, shows: /due/ },
      { path: over, shows: /Returned so far/ },
      { path: `${open}/sheet`, shows: /Check before returning/ },
      {
        path: `${inviting}/sheet`,
        shows: /No result was entered yet/,
        bring: press('Check before returning'),
      },
      {
        path: `${inviting}/sheet?look=problems`,
        shows: /Check before returning/,
        bring: (each) => each.locator('[name="entry-0"]').fill('12.3 N or so'),
      },
      { path: `${over}/sheet`, shows: /./ },
      { path: `${open}/sheet/check`, shows: /Nothing has been returned yet/ },
      { path: `${open}/upload`, shows: /File of results/ },
      { path: `${open}/upload?problem=file-missing`, shows: /Choose a file first/ },
      {
        path: `${open}/upload`,
        shows: /has to be mended/,
        bring: (each) => upload(each, 'Material;Breaking force\nsisal;about twelve\n'),
      },
      { path: `${over}/receipts/1`, shows: /Receipt/i },
    ])
  })
})

async function upload(page: Page, text: string): Promise<void> {
  await page
    .getByLabel('File of results')
    .setInputFiles({ name: 'ours.csv', mimeType: 'text/csv', buffer: Buffer.from(text) })
  await page.getByRole('button', { name: 'Send and see what is read' }).click()
  await expect(page.getByText(/has to be mended|have to be mended|cannot be taken/).first()).toBeVisible({
    timeout: 30_000,
  })
}

test.describe('by keyboard alone, the focus always seen', () => {
  test('a laboratory signs in, fills in the sheet and returns it', async ({ page }) => {
    const after = (await mailFor(contact)).length
    await page.goto('/sign-in')
    await tabTo(page, page.getByLabel('Mail address'))
    await page.keyboard.type(contact)
    await page.keyboard.press('Enter')
    await expect(page.getByText(/on its way/i).first()).toBeVisible()
    await page.goto(linkOf(await nextMail(contact, { after, subject: /sign in/i })))
    await tabTo(page, page.getByRole('button', { name: 'Sign in' }))
    await page.keyboard.press('Enter')
    await expect(page).toHaveURL(/\/studies$|\/participations/)

    await page.goto('/studies')
    await tabTo(page, page.locator(`a[href="/participations/${study['NT-25']}"]`).first())
    await page.keyboard.press('Enter')
    await expect(page).toHaveURL(/\/participations\/[0-9a-f-]+$/)
    await tabTo(page, page.locator('main a[href$="/sheet"]').first())
    await page.keyboard.press('Enter')
    await expect(page).toHaveURL(/\/sheet$/)

    await tabTo(page, page.locator('[name="entry-0"]'))
    const cells = await page.locator('input[name^="entry-"]').count()
    expect(cells).toBe(15)
    for (let cell = 0; cell < cells; cell += 1) {
      await expect(page.locator(`[name="entry-${cell}"]`)).toBeFocused()
      await page.keyboard.type(`${300 + cell}.5`)
      if (cell + 1 < cells) await page.keyboard.press('Enter')
    }
    await tabTo(page, page.getByRole('button', { name: 'Check before returning' }))
    await page.keyboard.press('Enter')
    await expect(page).toHaveURL(/\/check$/)
    await tabTo(page, page.getByRole('button', { name: 'Return these results' }))
    await page.keyboard.press('Enter')
    await expect(page).toHaveURL(/\/receipts\/\d+$/)
    await expect(page.locator('main')).toContainText('314.5')
  })

  test('a coordinator sets a cell aside', async ({ browser }) => {
    const page = await pageOf(browser, people.ines.address)
    await page.goto(`/studies/${study['NT-24']}/scrutiny`)
    const before = await page
      .getByRole('table', { name: /set aside/i })
      .getByRole('row')
      .count()
    await tabTo(page, page.locator('summary', { hasText: 'Set a cell aside' }), { most: 400 })
    await page.keyboard.press('Enter')
    const form = page.locator('form', { has: page.getByRole('button', { name: 'Set the cell aside' }) })
    await tabTo(page, form.getByLabel('Laboratory'))
    await page.keyboard.press('ArrowDown')
    await tabTo(page, form.getByLabel('Material'))
    await page.keyboard.press('ArrowDown')
    await tabTo(page, form.getByLabel('Reason'))
    await page.keyboard.type('The specimens had dried out before the test, as was found on asking.')
    await tabTo(page, page.getByRole('button', { name: 'Set the cell aside' }))
    await page.keyboard.press('Enter')
    await expect(page.getByRole('table', { name: /set aside/i }).getByRole('row')).toHaveCount(before + 1, {
      timeout: 20_000,
    })
  })

  test('the chair of the committee confirms a publication', async ({ browser }) => {
    const page = await pageOf(browser, people.marit.address)
    await page.goto(`/committee/${study['NT-22']}`)
    await tabTo(page, page.getByRole('link', { name: 'Proposal to publish' }))
    await page.keyboard.press('Enter')
    await expect(page).toHaveURL(/\/confirm$/)
    await tabTo(page, page.locator('summary', { hasText: 'Confirm and publish' }))
    await page.keyboard.press('Enter')
    await tabTo(page, page.getByRole('button', { name: 'Publish now' }))
    await page.keyboard.press('Enter')
    await expect(page).toHaveURL(/\/published\/[a-z0-9-]+$/)
  })
})
