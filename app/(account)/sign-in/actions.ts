'use server'

import { cookies, headers } from 'next/headers'
import { z } from 'zod'
import { journeyCookies } from '@/lib/auth/journey-cookies'
import { requestSignInLink } from '@/lib/auth/request-link'
import { publicFormAction } from '@/lib/web/form-action'
import { paths } from '@/lib/web/paths'
import { readPeer } from '@/lib/web/peer-address'
import { safePath } from '@/lib/web/safe-path'
import { parts } from '@/lib/wiring'

const input = z.object({
  address: z
    .string()
    .min(1, 'Give your mail address.')
    .max(320, 'This is longer than a mail address can be.'),
  next: z.string().optional(),
})

/** Sends a link and a code to the address, if it is a person's; the page that follows is the same for all. */
export const requestLinkAction = publicFormAction({
  input,
  run: async (_context, { address: typed, next }) => {
    const peer = readPeer(await headers(), parts().config.trustedProxies)
    const { address } = await requestSignInLink(parts(), { address: typed, peer })
    const jar = await cookies()
    for (const cookie of journeyCookies(
      { next: safePath(next, paths.studies()), address },
      parts().config.baseUrl,
    ))
      jar.set(cookie)
  },
  then: () => ({ go: paths.signInCode() }),
})
