import { expect, test } from '@playwright/test'
import { foundCommittee, openAttackWorld, stageStudy } from './support/attack-world'
import { send, type Answer } from './support/send'

/*
 * 600 reads of two people, mixed, eight under way at a time. The catalogue asks for ten thousand, which READS=10000 makes; this many
 * take some fifteen seconds on two cores, and a cache that is shared shows itself at the second read.
 */
const reads = Number(process.env.READS ?? 600)
const atOnce = 8

interface Reader {
  readonly cookie: string
  readonly own: readonly string[]
  readonly paths: readonly string[]
}

test('A-05: of interleaved reads of two people each shows its own reader alone, and no cache may keep any', async () => {
  test.setTimeout(120_000 + reads * 50)
  const world = openAttackWorld()
  try {
    const readers: Reader[] = []
    for (let index = 0; index < 2; index += 1) {
      const committee = await foundCommittee(world, { laboratories: 2 })
      const { studyId } = await stageStudy(world, committee, { stage: 'open' })
      const [laboratory] = committee.laboratories
      readers.push(
        {
          cookie: await world.cookieOf(committee.coordinator),
          own: [committee.coordinator.split('@')[1] ?? '', studyId],
          paths: ['/studies', `/studies/${studyId}/laboratories`, `/api/studies/${studyId}/returns`],
        },
        {
          cookie: await world.cookieOf(committee.contacts[0] ?? ''),
          own: [laboratory?.laboratory ?? '', studyId],
          paths: ['/studies', `/participations/${studyId}`, `/participations/${studyId}/sheet`],
        },
      )
    }
    const marks = readers.map(({ own }) => own)
    const wrong: string[] = []
    await inParallel(reads, async (turn) => {
      const who = turn % readers.length
      const reader = readers[who]
      const path = reader?.paths[Math.floor(turn / readers.length) % 3] ?? '/'
      const isPayload = turn % 5 === 0 && !path.startsWith('/api/')
      const answer = await (isPayload ? askForPayload : send)({ path, cookie: reader?.cookie })
      const foreign = marks
        .flatMap((own, other) => (Math.floor(other / 2) === Math.floor(who / 2) ? [] : own))
        .filter((mark) => answer.text.includes(mark))
      if (foreign.length > 0) wrong.push(`${path} held ${foreign.join(', ')}`)
      if (answer.status !== 200) wrong.push(`${path}: status ${answer.status}`)
      if (!path.startsWith('/api/') && !answer.text.includes(reader?.own[1] ?? ''))
        wrong.push(`${path} is not the page of its reader`)
      wrong.push(...keptByCaches(answer).map((fault) => `${path}: ${fault}`))
    })
    expect(wrong).toEqual([])
  } finally {
    await world.destroy()
  }
})

/** The page as the page's own script asks for it: the framework wants each such payload at an address of its own. */
async function askForPayload({ path, cookie }: { path: string; cookie?: string }): Promise<Answer> {
  const headers = { rsc: '1' }
  const { headers: led } = await send({ path, cookie, headers })
  return send({ path: led.location ?? path, cookie, headers })
}

/** What a proxy that ignores Vary could take for a leave to store. */
function keptByCaches({ headers }: Answer): string[] {
  const caching = headers['cache-control'] ?? ''
  return [
    ...(caching.includes('no-store') ? [] : [`Cache-Control is “${caching}”`]),
    ...(/public|s-maxage|max-age=[1-9]|stale-while/.test(caching) ? [`Cache-Control is “${caching}”`] : []),
    ...(headers['x-nextjs-cache'] ? ['the framework kept it'] : []),
    ...(headers.etag ? ['it has an ETag'] : []),
  ]
}

async function inParallel(turns: number, work: (turn: number) => Promise<void>): Promise<void> {
  let next = 0
  const hand = async () => {
    while (next < turns) await work(next++)
  }
  await Promise.all(Array.from({ length: atOnce }, hand))
}
