import { expect, type Browser, type BrowserContext, type Page } from '@playwright/test'
import { linkOf, mailFor, nextMail } from './mailbox'

/** Signs in as a person does: asks for the link, opens the mail, presses the button. */
export async function signIn(page: Page, address: string): Promise<void> {
  const after = (await mailFor(address)).length
  await page.goto('/sign-in')
  await page.getByLabel(/mail address/i).fill(address)
  await page.getByRole('button', { name: /link/i }).click()
  await expect(page.getByText(/on its way/i).first()).toBeVisible()
  await followSignInMail(page, { address, after })
}

/** Opens the sign-in mail that has come, and presses the button behind its link. */
export async function followSignInMail(
  page: Page,
  { address, after }: { address: string; after: number },
): Promise<void> {
  const mail = await nextMail(address, { after, subject: /sign in/i })
  await page.goto(linkOf(mail))
  await expect(page.getByText(address)).toBeVisible()
  await page.getByRole('button', { name: 'Sign in' }).click()
  await expect(page).toHaveURL(/\/(studies|participations|committee)/)
}

type Session = Awaited<ReturnType<BrowserContext['storageState']>>
const sessions = new Map<string, Session>()

/**
 * A page of a person's own, as in another browser, signed in. A person signs in once for all tests: mails to
 * one computer are limited, and these tests are one computer.
 */
export async function pageOf(browser: Browser, address: string): Promise<Page> {
  const session = sessions.get(address)
  const context = await browser.newContext(session ? { storageState: session } : {})
  const page = await context.newPage()
  if (!session) {
    await signIn(page, address)
    sessions.set(address, await context.storageState())
  }
  return page
}
