import { describe, expect, it } from 'vitest'
import { attachment } from '@/app/api/participations/attachment'
import { readBoundedBody } from '@/app/api/participations/read-bounded-body'

const megabyte = 1024 * 1024

/** A request whose body arrives in pieces of a megabyte, and which remembers how many were taken. */
function sending(megabytes: number, { breaksAt = Infinity }: { breaksAt?: number } = {}) {
  const taken = { pieces: 0 }
  const body = new ReadableStream<Uint8Array>(
    {
      pull(controller) {
        if (taken.pieces === megabytes) return controller.close()
        taken.pieces += 1
        if (taken.pieces > breaksAt) return controller.error(new Error('the sender went away'))
        controller.enqueue(new Uint8Array(megabyte).fill(taken.pieces))
      },
    },
    { highWaterMark: 0 },
  )
  const request = new Request('http://localhost/', { method: 'POST', body, duplex: 'half' } as RequestInit)
  return { request, taken }
}

const limit = { most: 5 * megabyte, refusal: 'larger than 5 MB' }

describe('a body', () => {
  it('comes whole up to the limit, to the byte', async () => {
    const body = await readBoundedBody(sending(5).request, limit)
    expect([body.length, body[0], body.at(-1)]).toEqual([5 * megabyte, 1, 5])
  })

  it('that is too large is refused and never cut, and read to its end so that the sender hears why', async () => {
    const { request, taken } = sending(25)
    await expect(readBoundedBody(request, limit)).rejects.toMatchObject({
      code: 'too-large',
      publicMessage: 'larger than 5 MB',
    })
    expect(taken.pieces).toBe(25)
  })

  it('without end is not waited for', async () => {
    const { request, taken } = sending(1000)
    await expect(readBoundedBody(request, limit)).rejects.toMatchObject({ code: 'too-large' })
    expect(taken.pieces).toBeLessThan(40)
  })

  it('whose sender goes away is no defect of ours', async () => {
    await expect(readBoundedBody(sending(5, { breaksAt: 2 }).request, limit)).rejects.toMatchObject({
      code: 'transfer-broken',
    })
  })
})

describe('a file given back', () => {
  const disposition = (fileName: string) =>
    attachment({ fileName, bytes: new Uint8Array(3), type: 'application/octet-stream' }).headers.get(
      'Content-Disposition',
    )

  it('is saved and not shown, under its own name in any alphabet', () => {
    expect(disposition('results.csv')).toBe(
      `attachment; filename="results.csv"; filename*=UTF-8''results.csv`,
    )
    expect(disposition('Ergebnis é (1).csv')).toBe(
      `attachment; filename="Ergebnis _ (1).csv"; filename*=UTF-8''Ergebnis%20%C3%A9%20%281%29.csv`,
    )
  })

  it('cannot break out of its header by its name', () => {
    expect(disposition('a"\r\nSet-Cookie: x=1;".csv')).toBe(
      `attachment; filename="a___Set-Cookie: x=1;_.csv"; filename*=UTF-8''a%22%0D%0ASet-Cookie%3A%20x%3D1%3B%22.csv`,
    )
  })
})
