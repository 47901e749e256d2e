import { sql } from 'kysely'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { draftStudy, openAndAnswer, planWith } from '@/db/seed/stage-study'
import { laboratories } from '@/db/seed/twine-people'
import { checkUploadedFile } from '@/lib/use-cases/returns/check-upload'
import { readUpload } from '@/lib/use-cases/returns/read-upload'
import { receiveUpload, recheckUpload } from '@/lib/use-cases/returns/receive-upload'
import { submitUpload } from '@/lib/use-cases/returns/submit-upload'
import { createTestWorld, type TestWorld } from '../../support/test-world'

let world: TestWorld
let studyId: string
const contact = laboratories[0]!.address

beforeAll(async () => {
  world = await createTestWorld({ now: '2027-03-01T09:00:00Z' })
  const draft = await draftStudy(world, {
    coordinator: world.coordinator,
    plan: planWith({ materials: [{ name: 'sisal' }], levels: [{ name: 'replicate', count: 2 }] }),
    laboratories: laboratories.slice(0, 2),
  })
  studyId = draft.studyId
  await openAndAnswer(world, {
    coordinator: world.coordinator,
    studyId,
    answers: draft.invitationIds.map((invitationId) => ({ invitationId, answer: 'accepted' })),
  })
})
afterAll(() => world.destroy())

// The reader asked about "1,234" and was told that the comma is the decimal mark; what it then kept was read a
// second time under the same answer, in which "1.234" is a thousand and more. Each step alone looked right.
describe('a file whose decimals carry a comma', () => {
  it('is stored with the values of its preview, and with the letters of its cells', async () => {
    const context = await world.as(contact)
    const bytes = Buffer.from('Material;replicate;Breaking force\nsisal;1;1,234\nsisal;2;1,25\n')
    const { uploadId } = await receiveUpload(context, { studyId, fileName: 'ours.csv', bytes })
    await checkUploadedFile(world.system, { studyId, uploadId, number: 1 })
    const asked = await readUpload(context, { studyId, uploadId })
    expect(asked.check?.questions).toMatchObject([{ found: '1,234', readings: ['1.234', '1234'] }])

    await recheckUpload(context, { studyId, uploadId, decimalMark: 'comma' })
    await checkUploadedFile(world.system, { studyId, uploadId, number: 2 })
    expect(await submitUpload(context, { studyId, uploadId, remark: '' })).toMatchObject({
      outcome: 'received',
      number: 1,
    })

    const { rows } = await sql`
      select result.value::text, reported.text, reported.source_cell
      from test_result result
      join vault.reported_text reported using (study_id, return_id, measurand_id, material_id, place)
      where study_id = ${studyId} order by place`.execute(world.database.app)
    expect(rows).toEqual([
      { value: '1.234', text: '1,234', source_cell: 'C2' },
      { value: '1.25', text: '1,25', source_cell: 'C3' },
    ])
  })
})
