import { Refusal } from '@/lib/domain/errors'
import { largestUpload, receiveUpload } from '@/lib/use-cases/returns/receive-upload'
import { routeHandler } from '@/lib/web/route-handler'
import { participationPaths } from '@/app/(work)/participations/participation-paths'
import { readBoundedBody } from '../../read-bounded-body'
import { schemas } from '../../schemas'

/** Boundaries and the fields' own headers. */
const formOverhead = 16 * 1024

const tooLarge =
  'The file is larger than 5 MB and was not kept. Send the results alone, without pictures or other sheets.'

/** Takes a file. A page's form is sent on to the preview; a program that asks for JSON gets the id. */
export const POST = routeHandler({
  params: schemas.studyParams,
  run: async (context, { request, params: { studyId } }) => {
    const wantsJson = (request.headers.get('accept') ?? '').startsWith('application/json')
    try {
      const received = await receiveUpload(context, { studyId, ...(await readFile(request)) })
      if (wantsJson) return received
      return seeOther(participationPaths.upload(studyId, received.uploadId))
    } catch (error) {
      if (wantsJson || !(error instanceof Refusal)) throw error
      return seeOther(participationPaths.uploadRefused(studyId, error.code))
    }
  },
})

async function readFile(request: Request): Promise<{ fileName: string; bytes: Buffer }> {
  const type = request.headers.get('content-type') ?? ''
  const body = await readBoundedBody(request, { most: largestUpload + formOverhead, refusal: tooLarge })
  if (!type.startsWith('multipart/form-data'))
    throw new Refusal('wrong-type', 'Send the file as the form on the page does.')
  const file = (await parseForm(body, type)).get('file')
  if (!(file instanceof File) || file.name === '')
    throw new Refusal('file-missing', 'Choose a file first.', 'file')
  return { fileName: file.name, bytes: Buffer.from(await file.arrayBuffer()) }
}

async function parseForm(body: Buffer, type: string): Promise<FormData> {
  try {
    return await new Response(new Uint8Array(body), { headers: { 'content-type': type } }).formData()
  } catch {
    throw new Refusal('transfer-broken', 'The file did not arrive whole. Send it again.', 'file')
  }
}

function seeOther(path: string): Response {
  return new Response(null, { status: 303, headers: { Location: path } })
}
