import { Refusal } from '@/lib/domain/errors'

/** Beyond this, what a sender still has to say is not waited for. */
const mostDrained = 32 * 1024 * 1024

/**
 * The whole body, counted while it arrives and never cut: one that is too large is refused. It is read to its
 * end all the same, within reason, because a browser that is still sending shows a broken connection, not our words.
 * @throws {Refusal} `too-large`, or `transfer-broken` when the sender went away: no defect of ours
 */
export async function readBoundedBody(
  request: Request,
  { most, refusal }: { most: number; refusal: string },
): Promise<Buffer> {
  const reader = request.body?.getReader()
  let chunks: Uint8Array[] = []
  let size = 0
  for (let part = await next(reader); part && !part.done; part = await next(reader)) {
    size += part.value.byteLength
    if (size <= most) chunks.push(part.value)
    else chunks = []
    if (size > mostDrained) {
      await reader?.cancel()
      break
    }
  }
  if (size > most) throw new Refusal('too-large', refusal)
  return Buffer.concat(chunks)
}

async function next(reader: ReadableStreamDefaultReader<Uint8Array> | undefined) {
  try {
    return await reader?.read()
  } catch {
    throw new Refusal('transfer-broken', 'It did not arrive whole. Send it again.')
  }
}

/** A JSON body of reasonable size. @throws {Refusal} `too-large`, `wrong-type` */
export async function readJsonBody(request: Request, most = 2 * 1024 * 1024): Promise<unknown> {
  if (!(request.headers.get('content-type') ?? '').startsWith('application/json'))
    throw new Refusal('wrong-type', 'Send the body as application/json.')
  const body = await readBoundedBody(request, {
    most,
    refusal: 'The body is larger than this address takes.',
  })
  try {
    return JSON.parse(body.toString('utf8'))
  } catch {
    throw new Refusal('not-json', 'The body is not JSON.')
  }
}
