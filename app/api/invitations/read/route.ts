import { z } from 'zod'
import { readInvitation } from '@/lib/use-cases/laboratories/read-invitation'
import { publicRouteHandler } from '@/lib/web/route-handler'
import { readJsonBody } from '../../participations/read-bounded-body'
import { schemas } from '../schemas'

/** What stands behind a link. A POST because the link must not enter an address or a log; it changes nothing. */
export const POST = publicRouteHandler({
  params: z.unknown(),
  run: async (context, { request }) =>
    readInvitation(context, schemas.read.parse(await readJsonBody(request, 4096))),
})
