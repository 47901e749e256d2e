import { expect, type Page } from '@playwright/test'

export interface StudyToPlan {
  readonly shortName: string
  readonly title: string
  readonly method: string
  readonly measurand: { name: string; unit: string; decimals: number }
  readonly materials: readonly string[]
  readonly levels: readonly { name: string; count: number }[]
}

export interface LaboratoryToInvite {
  readonly name: string
  readonly town: string
  readonly contact: string
  readonly address: string
  readonly zone: string
}

/** Opens a new study through its form and gives its id. */
export async function planStudy(page: Page, study: StudyToPlan): Promise<string> {
  await page.goto('/studies')
  await page.getByRole('link', { name: 'Open a new study' }).click()
  await page.getByLabel('Short name').fill(study.shortName)
  await page.getByLabel('Title').fill(study.title)
  await page.getByLabel('Test method').fill(study.method)
  await fillRow(page, 'measurands.0', {
    name: study.measurand.name,
    unit: study.measurand.unit,
    decimals: study.measurand.decimals,
  })
  for (const [index, name] of study.materials.entries()) {
    const field = page.locator(`[name="materials.${index}.name"]`)
    if ((await field.count()) === 0) await page.getByRole('button', { name: 'Add another material' }).click()
    await field.fill(name)
  }
  for (const [index, level] of study.levels.entries()) {
    if ((await page.locator(`[name="levels.${index}.name"]`).count()) === 0)
      await page.getByRole('button', { name: 'Add another level' }).click()
    await fillRow(page, `levels.${index}`, level)
  }
  await page.getByLabel('Day and time').fill('2099-03-14T17:00')
  await page.getByLabel('In the time of').selectOption('Europe/Lisbon')
  await page.getByRole('button', { name: 'Open the draft' }).click()
  await expect(page).toHaveURL(/\/studies\/[0-9a-f-]{36}/)
  return /[0-9a-f-]{36}/.exec(page.url())?.[0] ?? ''
}

async function fillRow(page: Page, row: string, fields: Record<string, string | number>): Promise<void> {
  for (const [name, value] of Object.entries(fields))
    await page.locator(`[name="${row}.${name}"]`).fill(String(value))
}

/** Puts laboratories on the list by pasting them, appoints a member, and sends the invitations. */
export async function inviteAndOpen(
  page: Page,
  {
    studyId,
    laboratories,
    member,
  }: {
    studyId: string
    laboratories: readonly LaboratoryToInvite[]
    member: { name: string; address: string }
  },
): Promise<void> {
  await page.goto(`/studies/${studyId}/laboratories`)
  const lines = laboratories.map(({ name, town, contact, address, zone }) =>
    [name, town, 'Nowhere', contact, address, zone].join('; '),
  )
  await page.getByLabel('One line a laboratory').fill(lines.join('\n'))
  await page.getByRole('button', { name: 'Read the lines' }).click()
  await page.getByRole('button', { name: `Put ${laboratories.length} laboratories on the list` }).click()
  await expect(page.getByText(`${laboratories.length} on the list`)).toBeVisible()

  const appoint = page.locator('form', { has: page.getByRole('button', { name: 'Appoint' }) })
  await appoint.getByLabel('Name').fill(member.name)
  await appoint.getByLabel('Mail address').fill(member.address)
  await appoint.getByLabel('Role').selectOption('member')
  await appoint.getByRole('button', { name: 'Appoint' }).click()
  await expect(page.getByRole('cell', { name: member.address })).toBeVisible()

  await page.locator('summary', { hasText: 'Send the invitations' }).click()
  await page.getByRole('button', { name: `Send ${laboratories.length} invitations now` }).click()
  await expect(page.getByText(`${laboratories.length} invitations are on their way`)).toBeVisible()
}

/** Closes the round before its deadline, has the statistics computed and puts them before the committee. */
export async function closeAndCompute(
  page: Page,
  { studyId, returned }: { studyId: string; returned: number },
): Promise<void> {
  await page.goto(`/studies/${studyId}/results`)
  await expect(page.getByText(`${returned} of ${returned} laboratories have returned`)).toBeVisible()
  await page.getByLabel('Reason').fill('Every laboratory has returned, so nobody needs the rest of the time.')
  await page.getByRole('button', { name: 'Close for returns' }).click()
  await expect(page.getByText(/closed for returns/i).first()).toBeVisible()
  await page.goto(`/studies/${studyId}/scrutiny`)
  await page.getByRole('button', { name: 'Compute the statistics' }).click()
  await expect(page.getByRole('heading', { name: 'Between laboratories, h' })).toBeVisible({
    timeout: 30_000,
  })
  await page.goto(`/studies/${studyId}/review`)
  await page.getByRole('button', { name: 'Put before the committee' }).click()
  await expect(page.getByRole('heading', { name: 'Before its committee', exact: true })).toBeVisible()
}

/** One person proposes, another confirms; gives the address of the published page. */
export async function publish(proposer: Page, confirmer: Page, studyId: string): Promise<string> {
  await proposer.goto(`/studies/${studyId}/report`)
  await proposer.getByRole('button', { name: 'Propose publication' }).click()
  await expect(proposer.getByText('You cannot confirm your own proposal')).toBeVisible()
  await expect(proposer.getByRole('button', { name: 'Publish now' })).toHaveCount(0)
  await confirmer.goto(`/studies/${studyId}/report`)
  await confirmer.locator('summary', { hasText: 'Confirm and publish' }).click()
  await confirmer.getByRole('button', { name: 'Publish now' }).click()
  await expect(confirmer).toHaveURL(/\/published\/[a-z0-9-]+$/)
  return new URL(confirmer.url()).pathname
}
