import { request, type IncomingHttpHeaders } from 'node:http'
import { gunzipSync } from 'node:zlib'
import { timeOutMs } from './latencies'

export interface TimedAnswer {
  readonly status: number
  readonly headers: IncomingHttpHeaders
  /** Unpacked when it is asked for: most answers are only timed, and unpacking costs the generator. */
  text(): string
  /** On the clock of performance.now(). */
  readonly firstByteMs: number
  readonly lastByteMs: number
}

export interface Asking {
  readonly base: string
  readonly path: string
  readonly method?: 'GET' | 'POST' | 'PUT'
  readonly cookie?: string
  readonly headers?: Readonly<Record<string, string>>
  readonly body?: Buffer | string
}

/**
 * One request on a connection of its own. A laboratory asks every twenty seconds or so, by when the server has closed
 * the connection before; and a shared pool with a limit would hold arrivals back and so close the open model.
 */
export function askTimed({
  base,
  path,
  method = 'GET',
  cookie,
  headers = {},
  body,
}: Asking): Promise<TimedAnswer> {
  const { host, port } = new URL(base)
  return new Promise((resolve, reject) => {
    const asked = request(
      {
        method,
        // The server listens on this address alone; the name would first be tried as an IPv6 one.
        hostname: '127.0.0.1',
        port,
        path,
        agent: false,
        signal: AbortSignal.timeout(timeOutMs),
        headers: {
          host,
          'accept-encoding': 'gzip',
          origin: base,
          'sec-fetch-site': 'same-origin',
          ...(body === undefined ? {} : { 'content-length': String(Buffer.byteLength(body)) }),
          ...(cookie ? { cookie } : {}),
          ...headers,
        },
      },
      (reply) => {
        const firstByteMs = performance.now()
        const chunks: Buffer[] = []
        reply.on('data', (chunk: Buffer) => chunks.push(chunk))
        reply.on('error', reject)
        reply.on('end', () => {
          const lastByteMs = performance.now()
          resolve({
            status: reply.statusCode ?? 0,
            headers: reply.headers,
            text: () => unpacked(Buffer.concat(chunks), reply.headers).toString('utf8'),
            firstByteMs,
            lastByteMs,
          })
        })
      },
    )
    asked.on('error', reject)
    asked.end(body)
  })
}

function unpacked(bytes: Buffer, headers: IncomingHttpHeaders): Buffer {
  return headers['content-encoding'] === 'gzip' ? gunzipSync(bytes) : bytes
}
