import { describeApi } from '@/lib/web/openapi'
import { publicRouteHandler } from '@/lib/web/route-handler'
import { parts } from '@/lib/wiring'
import { operations } from './operations'

/** The interface described, from the schemas the handlers parse with. */
export const GET = publicRouteHandler({ run: async () => describeApi(operations, parts().config.baseUrl) })
