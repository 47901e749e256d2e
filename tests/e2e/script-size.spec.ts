import { expect, test, type BrowserContext, type Page } from '@playwright/test'
import { laboratories } from '@/db/seed/twine-people'
import { readDemonstrationRows } from './support/demonstration-rows'
import { pageOf } from './support/sign-in'

/** What a laboratory on a slow line is asked to load in scripts for one page, packed as they travel. */
const most = 200_000

test('no page of a laboratory brings more than 200 kB of packed scripts', async ({ browser }) => {
  const { studies } = await readDemonstrationRows()
  const idOf = (wanted: string) => studies.find(({ shortName }) => shortName === wanted)?.studyId ?? ''
  const own = `/participations/${idOf('NT-26')}`
  const session = await (await pageOf(browser, laboratories[0]?.address ?? '')).context().storageState()
  const weigh = async (path: string, storageState?: Awaited<ReturnType<BrowserContext['storageState']>>) => {
    // A context of its own has nothing in its cache.
    const context = await browser.newContext(storageState ? { storageState } : {})
    const scripts = await scriptsOf(await context.newPage(), path)
    await context.close()
    return { path: path.replace(/[0-9a-f-]{36}/, '…'), ...scripts }
  }
  const weighed = [
    await weigh('/sign-in'),
    await weigh('/sign-in/code'),
    await weigh('/sign-in/confirm#token=a.b&address=somebody%40laboratory.example'),
    await weigh('/invitation'),
    await weigh(own, session),
    await weigh(`${own}/sheet`, session),
    await weigh(`${own}/upload`, session),
    await weigh(`/participations/${idOf('NT-21')}/receipts/1`, session),
  ]
  expect(Math.min(...weighed.map(({ bytes }) => bytes))).toBeGreaterThan(10_000)
  const report = weighed
    .map(({ path, bytes, files }) => `${path}: ${(bytes / 1000).toFixed(0)} kB in ${files} files`)
    .join('\n')
  expect(Math.max(...weighed.map(({ bytes }) => bytes)), report).toBeLessThanOrEqual(most)
})

async function scriptsOf(page: Page, path: string): Promise<{ bytes: number; files: number }> {
  let [bytes, files] = [0, 0]
  const weighing: Promise<void>[] = []
  page.on('requestfinished', (request) => {
    if (request.resourceType() !== 'script' && !/\.js(\?|$)/.test(request.url())) return
    weighing.push(
      request.sizes().then(({ responseBodySize }) => {
        bytes += responseBodySize
        files += 1
      }),
    )
  })
  await page.goto(path, { waitUntil: 'networkidle' })
  await Promise.all(weighing)
  return { bytes, files }
}
