interface Asked {
  readonly method: string
  readonly headers: Pick<Headers, 'get'>
}

/**
 * Whether a request that may change something was made by another site in the person's name.
 *
 * A browser says where a request comes from: by Origin, and by Sec-Fetch-Site. One of the two must say "from
 * here" and neither may say otherwise. A program that proves itself by a token instead of a cookie cannot be
 * made to act by a page, and needs neither.
 */
export function isForeignRequest({ method, headers }: Asked, baseUrl: string): boolean {
  if (method === 'GET' || method === 'HEAD' || method === 'OPTIONS') return false
  const origin = headers.get('origin')
  const site = headers.get('sec-fetch-site')
  if (origin !== null && origin !== new URL(baseUrl).origin) return true
  if (site !== null && site !== 'same-origin' && site !== 'none') return true
  if (origin === null && site === null) return !carriesToken(headers)
  return origin === null && site === 'none'
}

function carriesToken(headers: Pick<Headers, 'get'>): boolean {
  return /^bearer /i.test(headers.get('authorization') ?? '') && headers.get('cookie') === null
}
