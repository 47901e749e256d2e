import { MailDev } from 'maildev'

interface Options {
  smtpPort: number
  webPort: number
  /** Its own folder: by itself it would share one under the system's temporary files with everybody. */
  folder: string
}

/** The mailbox of everyone in the demonstration and the tests, read in a browser on loopback. */
export async function startMailbox({
  smtpPort,
  webPort,
  folder,
}: Options): Promise<{ close(): Promise<void> }> {
  const mailbox = new MailDev({
    smtp: smtpPort,
    web: webPort,
    ip: '127.0.0.1',
    webIp: '127.0.0.1',
    mailDirectory: folder,
    maxEmails: 2000,
    silent: true,
  })
  await mailbox.start()
  return { close: () => mailbox.stop() }
}
