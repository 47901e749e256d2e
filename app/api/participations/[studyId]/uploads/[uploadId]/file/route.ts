import { downloadUpload } from '@/lib/use-cases/returns/read-upload'
import { routeHandler } from '@/lib/web/route-handler'
import { attachment } from '../../../../attachment'
import { schemas } from '../../../../schemas'

/** The file as it was sent, to be saved and never shown: what a stranger wrote is not opened on this address. */
export const GET = routeHandler({
  params: schemas.uploadParams,
  run: async (context, { params }) => {
    const { fileName, bytes } = await downloadUpload(context, params)
    return attachment({ fileName, bytes, type: 'application/octet-stream' })
  },
})
