import { expect } from '@playwright/test'

export interface ReadMail {
  readonly id: string
  readonly subject: string
  readonly text: string
  readonly html: string
  readonly to: string
}

interface StoredMail {
  id: string
  subject: string
  text: string
  html?: string | false
  to: { address: string }[]
  envelope: { to: { address: string }[] }
}

const mailbox = process.env.MAILBOX_URL ?? ''

/** Every mail that has come for an address, the earliest first. */
export async function mailFor(address: string): Promise<ReadMail[]> {
  const answer = await fetch(`${mailbox}/api/email`)
  const mails = (await answer.json()) as StoredMail[]
  return mails
    .filter(({ to }) => to.some((each) => each.address === address))
    .map(({ id, subject, text, html, to }) => ({
      id,
      subject,
      text,
      html: html || '',
      to: to[0]?.address ?? '',
    }))
}

/** The mail for an address that comes after those already there, once it has come. */
export async function nextMail(
  address: string,
  { after, subject }: { after: number; subject: RegExp },
): Promise<ReadMail> {
  let found: ReadMail | undefined
  await expect
    .poll(
      async () => {
        found = (await mailFor(address)).slice(after).find((mail) => subject.test(mail.subject))
        return found !== undefined
      },
      { message: `a mail for ${address} about ${subject}`, timeout: 30_000, intervals: [250] },
    )
    .toBe(true)
  return found as ReadMail
}

/** The first link of a mail's plain text that leads into the product. */
export function linkOf(mail: ReadMail): string {
  const link = /https?:\/\/localhost:\d+\/\S+/.exec(mail.text)?.[0]
  if (!link) throw new Error(`the mail “${mail.subject}” holds no link`)
  return link
}
