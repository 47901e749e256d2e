import { Refusal } from '@/lib/domain/errors'
import { answerRequest } from '@/lib/web/answer-request'
import { paths } from '@/lib/web/paths'
import { readPeer } from '@/lib/web/peer-address'
import { safePath } from '@/lib/web/safe-path'
import type { Parts } from '@/lib/wiring'
import { completeSignIn } from './complete-sign-in'
import { clearedJourneyCookies, readJourney } from './journey-cookies'
import { readSessionCookie } from './session-cookie'

const mostBytes = 8192

/**
 * Answers the two forms that sign in, the link's and the code's: to the page the person wanted, or back with the
 * reason. Nothing but a POST from a page of this site comes this far.
 */
export function handleSignIn(request: Request, parts: Parts): Promise<Response> {
  return answerRequest(request, { baseUrl: parts.config.baseUrl, run: () => signIn(request, parts) })
}

async function signIn(request: Request, parts: Parts): Promise<Response> {
  const form = await readSmallForm(request)
  const text = (name: string) => String(form.get(name) ?? '')
  const { next } = readJourney(request.headers)
  try {
    const { setCookie } = await completeSignIn(parts, {
      address: text('address'),
      proof: form.has('token') ? { token: text('token') } : { code: text('code') },
      earlierSession: readSessionCookie(request.headers, parts.config.baseUrl),
      peer: readPeer(request.headers, parts.config.trustedProxies),
    })
    const cookies = [setCookie, ...clearedJourneyCookies(parts.config.baseUrl)]
    return goTo(safePath(next, paths.studies()), cookies)
  } catch (error) {
    if (!(error instanceof Refusal)) throw error
    return goTo(pageFor(error), [])
  }
}

function pageFor({ code }: Refusal): string {
  return code === 'bad-link' ? `${paths.signIn()}?problem=link` : `${paths.signInCode()}?problem=${code}`
}

function goTo(path: string, cookies: readonly string[]): Response {
  const headers = new Headers({ Location: path })
  for (const cookie of cookies) headers.append('Set-Cookie', cookie)
  return new Response(null, { status: 303, headers })
}

async function readSmallForm(request: Request): Promise<URLSearchParams> {
  const type = request.headers.get('content-type') ?? ''
  if (!type.startsWith('application/x-www-form-urlencoded'))
    throw new Refusal('wrong-type', 'Send the form as it stands on the page.')
  const reader = request.body?.getReader()
  const chunks: Uint8Array[] = []
  let size = 0
  for (let part = await reader?.read(); part && !part.done; part = await reader?.read()) {
    size += part.value.byteLength
    if (size > mostBytes) {
      await reader?.cancel()
      throw new Refusal('too-large', 'The form is larger than this page ever sends.')
    }
    chunks.push(part.value)
  }
  return new URLSearchParams(Buffer.concat(chunks).toString('utf8'))
}
