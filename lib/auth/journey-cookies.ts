import { readCookie } from './session-cookie'

/**
 * What a browser keeps while its person goes to read a mail: where they wanted to go, and the address they gave.
 * Neither is in an address bar, where it would be logged; neither is trusted when it comes back.
 */
export interface Journey {
  readonly next?: string | undefined
  readonly address?: string | undefined
}

const names = { next: 'evenlot.next', address: 'evenlot.address' } as const

export function readJourney(headers: Pick<Headers, 'get'>): Journey {
  return { next: readCookie(headers, names.next), address: readCookie(headers, names.address) }
}

/** Name, value and options of each cookie, as the framework takes them. */
export function journeyCookies({ next, address }: Journey, baseUrl: string) {
  const options = {
    httpOnly: true,
    sameSite: 'lax',
    path: '/',
    maxAge: 1800,
    secure: baseUrl.startsWith('https:'),
  } as const
  return [
    { name: names.next, value: next ?? '', ...options },
    { name: names.address, value: address ?? '', ...options },
  ]
}

export function clearedJourneyCookies(baseUrl: string): string[] {
  const secure = baseUrl.startsWith('https:') ? '; Secure' : ''
  return Object.values(names).map((name) => `${name}=; Path=/; Max-Age=0; HttpOnly; SameSite=Lax${secure}`)
}
