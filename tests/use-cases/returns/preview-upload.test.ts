import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { NotFound } from '@/lib/domain/errors'
import { checkUploadedFile } from '@/lib/use-cases/returns/check-upload'
import { previewUpload } from '@/lib/use-cases/returns/preview-upload'
import { readParticipation } from '@/lib/use-cases/returns/read-participation'
import { largestUpload, receiveUpload } from '@/lib/use-cases/returns/receive-upload'
import { submitReturn } from '@/lib/use-cases/returns/submit-return'
import { entriesOf, openTestStudy, type OpenStudy } from './one-open-study'

let study: OpenStudy
beforeAll(async () => {
  study = await openTestStudy()
})
afterAll(() => study?.world.destroy())

async function send(csv: string): Promise<string> {
  const context = await study.world.as(study.contact)
  const { uploadId } = await receiveUpload(context, {
    studyId: study.studyId,
    fileName: 'C:\\results\\ours.csv',
    bytes: Buffer.from(csv),
  })
  await checkUploadedFile(study.world.system, { studyId: study.studyId, uploadId, number: 1 })
  return uploadId
}

describe('a file, once read', () => {
  it('stands beside the last return: changed, the same whatever the mark, missing', async () => {
    const context = await study.world.as(study.contact)
    await submitReturn(context, {
      studyId: study.studyId,
      submissionKey: 'first',
      entries: entriesOf(study.keys, ['1.5', '2.50', '3', '4']),
      remark: '',
    })
    const uploadId = await send('Material;replicate;Breaking force (N)\nsisal;1;1,5\nsisal;2;2,5\nhemp;1;3\n')
    const { places, upload, returned } = await previewUpload(context, { studyId: study.studyId, uploadId })
    expect(places.map(({ state, text, before }) => [state, text, before])).toEqual([
      ['same', '1,5', '1.5'],
      ['changed', '2,5', '2.50'],
      ['same', '3', '3'],
      ['missing', '', '4'],
    ])
    expect([upload.fileName, returned]).toEqual(['ours.csv', null])
  })

  it('has returned nothing until it is confirmed', async () => {
    const context = await study.world.as(study.contact)
    await send('Material;replicate;Breaking force (N)\nsisal;1;99\n')
    expect((await readParticipation(context, { studyId: study.studyId })).receipts).toHaveLength(1)
  })

  it('is absent for every other laboratory', async () => {
    const uploadId = await send('Material;replicate;Breaking force (N)\nsisal;1;9\n')
    const other = await study.world.as(study.other)
    await expect(previewUpload(other, { studyId: study.studyId, uploadId })).rejects.toBeInstanceOf(NotFound)
  })

  it('that is one byte too large is refused by name and not cut', async () => {
    const context = await study.world.as(study.contact)
    const bytes = Buffer.alloc(largestUpload + 1, 32)
    await expect(
      receiveUpload(context, { studyId: study.studyId, fileName: 'a.csv', bytes }),
    ).rejects.toMatchObject({ code: 'file-too-large' })
  })
})
