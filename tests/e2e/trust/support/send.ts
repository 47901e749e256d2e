import { request, type IncomingHttpHeaders } from 'node:http'

export interface Sending {
  readonly method?: string
  /** Sent as it stands: no client tidies it up on the way. */
  readonly path: string
  readonly cookie?: string
  readonly headers?: Readonly<Record<string, string>>
  readonly body?: Buffer | string | URLSearchParams
  /** Another process than the one under test everywhere. */
  readonly base?: string
}

export interface Answer {
  readonly status: number
  readonly headers: IncomingHttpHeaders
  readonly bytes: Buffer
  readonly text: string
}

export const baseUrl = process.env.BASE_URL ?? ''

/**
 * One request as an attacker would write it: nothing is followed, added or held back. Browsers and their stand-ins
 * would set Origin, Host and Sec-Fetch headers themselves.
 */
export function send({
  method = 'GET',
  path,
  cookie,
  headers = {},
  body,
  base = baseUrl,
}: Sending): Promise<Answer> {
  const payload = body instanceof URLSearchParams ? body.toString() : body
  const { hostname, port } = new URL(base)
  return new Promise((resolve, reject) => {
    const asked = request(
      {
        method,
        hostname,
        port,
        path,
        // A kept connection may be closed by the server at the moment it is used again.
        agent: false,
        headers: {
          ...(payload === undefined ? {} : { 'content-length': String(Buffer.byteLength(payload)) }),
          ...(body instanceof URLSearchParams ? { 'content-type': 'application/x-www-form-urlencoded' } : {}),
          ...(cookie ? { cookie } : {}),
          ...headers,
        },
      },
      (reply) => {
        const chunks: Buffer[] = []
        reply.on('data', (chunk: Buffer) => chunks.push(chunk))
        reply.on('error', reject)
        reply.on('end', () => {
          const bytes = Buffer.concat(chunks)
          resolve({
            status: reply.statusCode ?? 0,
            headers: reply.headers,
            bytes,
            text: bytes.toString('utf8'),
          })
        })
      },
    )
    asked.on('error', reject)
    asked.end(payload)
  })
}

/** The headers of a page of the product itself. */
export const fromOurPage = { origin: baseUrl, 'sec-fetch-site': 'same-origin' }
