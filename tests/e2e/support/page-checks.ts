import AxeBuilder from '@axe-core/playwright'
import { expect, type Locator, type Page } from '@playwright/test'

const standards = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa']
const leastTarget = 24

/**
 * What a page does against those who read it otherwise: by axe in both schemes, on narrow screens, by its targets.
 * Plots are one drawing on many pages and the slowest thing to judge; they are judged where the visit asks for it.
 */
export async function faultsOf(page: Page, { withPlots }: { withPlots: boolean }): Promise<string[]> {
  await look(page, { width: 1280, scheme: 'light' })
  // Without frames there is nothing to gather from others, which would take a page of its own each time.
  const axe = new AxeBuilder({ page })
    .setLegacyMode()
    .options({ resultTypes: ['violations'] })
    .withTags(standards)
  if (!withPlots) axe.exclude('svg')
  const faults = [
    ...wordsOf('light', (await axe.analyze()).violations),
    ...(await smallTargets(page, 1280)),
    ...(await sharedIds(page)),
  ]
  await look(page, { width: 1280, scheme: 'dark' })
  faults.push(...wordsOf('dark', await contrastViolations(page, withPlots)))
  for (const width of [360, 320]) {
    await look(page, { width, scheme: 'light' })
    faults.push(...(await sidewaysFaults(page, width)))
  }
  faults.push(...(await smallTargets(page, 320)))
  return faults
}

async function look(
  page: Page,
  { width, scheme }: { width: number; scheme: 'light' | 'dark' },
): Promise<void> {
  // Colours that are still on their way from one scheme to the other would be judged as they pass.
  await page.emulateMedia({ colorScheme: scheme, reducedMotion: 'reduce' })
  await page.setViewportSize({ width, height: 800 })
  await page.evaluate(() => new Promise((drawn) => requestAnimationFrame(() => requestAnimationFrame(drawn))))
}

type Violations = Awaited<ReturnType<AxeBuilder['analyze']>>['violations']

/** Axe is still in the page from the run before; bringing it there once more takes as long as its work. */
function contrastViolations(page: Page, withPlots: boolean): Promise<Violations> {
  return page.evaluate(async (isWhole) => {
    const { axe } = window as unknown as {
      axe: { run(context: object, options: object): Promise<{ violations: Violations }> }
    }
    const context = isWhole ? { include: ['html'] } : { include: ['html'], exclude: ['svg'] }
    return (
      await axe.run(context, {
        runOnly: { type: 'rule', values: ['color-contrast'] },
        resultTypes: ['violations'],
      })
    ).violations
  }, withPlots)
}

function wordsOf(scheme: string, violations: Violations): string[] {
  return violations.map(({ id, impact, nodes }) => {
    const places = nodes
      .slice(0, 3)
      .map(
        ({ target, failureSummary }) =>
          `${target.join(' ')} – ${failureSummary?.split('\n')[1]?.trim() ?? ''}`,
      )
    return `${scheme}: ${id} (${impact}) ${places.join(' | ')}`
  })
}

/** An id that two elements have: a label or a hint then belongs to the first of them alone. */
async function sharedIds(page: Page): Promise<string[]> {
  const shared = await page.evaluate(() => {
    const ids = [...document.querySelectorAll('[id]')].map(({ id }) => id)
    return [...new Set(ids.filter((id, at) => ids.indexOf(id) !== at))]
  })
  return shared.map((id) => `several elements have the id ${id}`)
}

async function sidewaysFaults(page: Page, width: number): Promise<string[]> {
  const reach = await page.evaluate(() => document.documentElement.scrollWidth)
  if (reach <= width) return []
  const widest = await page.evaluate((limit) => {
    const beyond = [...document.querySelectorAll('body *')].filter(
      (element) => element.getBoundingClientRect().right > limit + 1,
    )
    return beyond
      .slice(0, 4)
      .map((element) => `<${element.tagName.toLowerCase()} class="${element.getAttribute('class') ?? ''}">`)
  }, width)
  return [`${width} px: the page reaches to ${reach} px by ${widest.join(', ')}`]
}

/** Targets too small to be hit. A link within a sentence is as high as its line, as the standard allows. */
async function smallTargets(page: Page, width: number): Promise<string[]> {
  const small = await page.evaluate((least) => {
    const targets = document.querySelectorAll<HTMLElement>(
      'a[href], button, input:not([type="hidden"]), select, textarea, summary',
    )
    return [...targets].flatMap((target) => {
      if (!target.checkVisibility({ checkVisibilityCSS: true }) || target.matches('.sr-only:not(:focus)'))
        return []
      const inSentence =
        getComputedStyle(target).display === 'inline' &&
        [...(target.parentElement?.childNodes ?? [])].some(
          (each) => each.nodeType === 3 && each.textContent?.trim(),
        )
      if (inSentence) return []
      const labels = 'labels' in target ? [...((target as HTMLInputElement).labels ?? [])] : []
      const boxes = [target, ...labels].map((each) => each.getBoundingClientRect())
      const high = Math.max(...boxes.map(({ height }) => height))
      const wide = Math.max(...boxes.map((box) => box.width))
      if (high >= least - 0.01 && wide >= least - 0.01) return []
      return [`${target.outerHTML.slice(0, 120)} is ${wide.toFixed(1)} × ${high.toFixed(1)}`]
    })
  }, leastTarget)
  return small.slice(0, 4).map((each) => `${width} px: small target ${each}`)
}

/** Tabs until the target has the focus; at each stop on the way the focus must be seen. */
export async function tabTo(
  page: Page,
  target: Locator,
  { most = 80 }: { most?: number } = {},
): Promise<void> {
  await expect(target).toBeVisible()
  for (let stop = 0; stop < most; stop += 1) {
    if (await target.evaluate((element) => element === document.activeElement)) return
    await page.keyboard.press('Tab')
    await expectFocusSeen(page)
  }
  throw new Error(`${String(target)} has no focus after ${most} stops`)
}

export async function expectFocusSeen(page: Page): Promise<void> {
  const seen = await page.evaluate(() => {
    const element = document.activeElement
    if (!element || element === document.body) return { where: 'the page', isSeen: true }
    const { outlineStyle, outlineWidth } = getComputedStyle(element)
    // A mark of a plot draws its own ring, since an outline would be a box around all it reaches.
    const ring =
      element instanceof SVGElement ? element.querySelector('[data-transient][stroke-width="2"]') : null
    const box = element.getBoundingClientRect()
    const inView =
      box.bottom > 0 &&
      box.right > 0 &&
      box.top < innerHeight &&
      box.left < innerWidth &&
      box.width > 1 &&
      box.height > 1
    return {
      where: element.outerHTML.slice(0, 160),
      isSeen: inView && (ring !== null || (outlineStyle !== 'none' && Number.parseFloat(outlineWidth) >= 2)),
    }
  })
  expect(seen.isSeen, `the focus is seen at ${seen.where}`).toBe(true)
}
