import { redirectOf } from './actions'
import type { Answer } from './send'

export type Verdict = 'in' | 'absent' | 'sign in' | `status ${number}`

/** What an answer means to the one who asked. */
export function verdictOf(answer: Answer): Verdict {
  const leadsTo = redirectOf(answer)
  if (answer.status === 401 || leadsTo?.startsWith('/sign-in')) return 'sign in'
  if (answer.status === 404) return 'absent'
  const isIn = leadsTo !== null || (answer.status >= 200 && answer.status < 300)
  return isIn ? 'in' : `status ${answer.status}`
}

/**
 * The words an answer is made of, each once, without what differs from one answer to the next: the nonce, the name
 * the framework draws for each answer, the order in which its parts came, and the ids that were asked for.
 */
export function plainWords({ text }: Answer, ids: readonly string[]): string {
  const withoutNonce = text.replaceAll(/nonce="[^"]*"|\\"nonce\\":\\"[^"\\]*\\"|"nonce":"[^"]*"/g, '')
  const withoutDrawnName = withoutNonce.replaceAll(/"[\w-]{21}[vmi]\\?"/g, '')
  const withoutIds = ids.reduce((plain, id) => plain.replaceAll(id, ''), withoutDrawnName)
  return [...new Set(withoutIds.split(/[^\p{L}\p{N}_./-]+/u))].sort().join(' ')
}
