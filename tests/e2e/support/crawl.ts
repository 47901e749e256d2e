import { readFileSync } from 'node:fs'
import yauzl, { type Entry } from 'yauzl'
import type { BrowserContext } from '@playwright/test'

/** One answer of the product: what was asked and how, and all that came back as text, headers in front. */
export interface Answer {
  readonly path: string
  readonly way: string
  readonly status: number
  readonly type: string
  readonly text: string
}

interface Crawl {
  /** As whom; an empty one asks as the public. */
  readonly cookie: string
  readonly seeds: readonly string[]
  /** Asked of every page that opens, beside the page itself: parameters that some page or other reads. */
  readonly query: string
  /** Addresses that are left alone, such as files that another crawl reads. */
  readonly leave?: RegExp
}

const baseUrl = process.env.BASE_URL ?? ''
const atOnce = 6

// Left alone: it would only be refused, since leaving is a POST.
const leaves = /^\/sign-out|#/

// Beside the page itself, the ways in which the framework's own router asks for it.
const routerWays: Readonly<Record<string, Record<string, string>>> = {
  navigation: { RSC: '1' },
  prefetch: { RSC: '1', 'Next-Router-Prefetch': '1' },
  segment: { RSC: '1', 'Next-Router-Prefetch': '1', 'Next-Router-Segment-Prefetch': '/_tree' },
}

/** The cookies of a signed-in browser, as a request carries them. */
export async function cookieOf(context: BrowserContext): Promise<string> {
  return (await context.cookies(baseUrl)).map(({ name, value }) => `${name}=${value}`).join('; ')
}

/** Asks for every seed, then for every address of the product that any answer names, until none is new. */
export async function crawl({ cookie, seeds, query, leave }: Crawl): Promise<Answer[]> {
  const seen = new Set<string>()
  const answers: Answer[] = []
  let waiting = [...new Set(seeds)]
  while (waiting.length > 0) {
    const asked = waiting.splice(0, atOnce)
    for (const path of asked) seen.add(path)
    const found = (await Promise.all(asked.map((path) => askInEveryWay(path, cookie)))).flat()
    answers.push(...found)
    const opened = found.filter(
      ({ path, way, status, type }) =>
        way === 'page' && status === 200 && type.startsWith('text/html') && !path.includes('?'),
    )
    const fresh = [...found.flatMap(addressesIn), ...opened.map(({ path }) => `${path}?${query}`)].filter(
      (path) => !seen.has(path) && !leave?.test(path) && !leaves.test(path),
    )
    waiting = [...new Set([...waiting, ...fresh])]
    if (seen.size > 3000) throw new Error(`the crawl finds no end; it stands at ${asked.join(', ')}`)
  }
  return answers
}

/** The addresses that the build can answer, with each parameter replaced by each of its values. */
export function addressesOfBuild(values: Readonly<Record<string, readonly string[]>>): string[] {
  const manifest = JSON.parse(readFileSync('.next/app-path-routes-manifest.json', 'utf8')) as Record<
    string,
    string
  >
  return Object.values(manifest).flatMap((route) => substitute(route, values))
}

function substitute(route: string, values: Readonly<Record<string, readonly string[]>>): string[] {
  const [parameter, name] = /\[(?:\.\.\.)?(\w+)\]/.exec(route) ?? []
  if (!parameter || !name) return [route]
  const known = values[name]
  if (!known) throw new Error(`no value is known for [${name}] of ${route}`)
  return known.flatMap((value) => substitute(route.replace(parameter, value), values))
}

async function askInEveryWay(path: string, cookie: string): Promise<Answer[]> {
  const plain = await ask(path, { cookie, way: 'page', headers: {} })
  const isPage = plain.at(-1)?.type.startsWith('text/html')
  if (!isPage) return plain
  const ways = plain[0]?.status === 200 ? Object.entries(routerWays) : Object.entries(routerWays).slice(0, 1)
  const others = await Promise.all(ways.map(([way, headers]) => ask(path, { cookie, way, headers })))
  return [...plain, ...others.flat()]
}

/** Asks once and follows where it is sent; every answer on the way counts. */
export async function ask(
  path: string,
  { cookie, way, headers }: { cookie: string; way: string; headers: Record<string, string> },
): Promise<Answer[]> {
  const answers: Answer[] = []
  let next: string | null = path
  for (let hop = 0; next !== null && hop < 5; hop += 1) {
    const answer: Response = await fetch(new URL(next, baseUrl), {
      redirect: 'manual',
      headers: { ...headers, cookie },
    })
    const body = Buffer.from(await answer.arrayBuffer())
    const head = [...answer.headers].map(([name, value]) => `${name}: ${value}`).join('\n')
    const type = answer.headers.get('content-type') ?? ''
    answers.push({ path, way, status: answer.status, type, text: `${head}\n\n${await readBody(body)}` })
    const location = answer.headers.get('location')
    next = location && new URL(location, baseUrl).origin === new URL(baseUrl).origin ? location : null
  }
  return answers
}

/** A body as text; of a packed file, such as a workbook, what can be read of it and every part with its name. */
async function readBody(body: Buffer): Promise<string> {
  if (body.subarray(0, 4).toString('latin1') !== 'PK\u0003\u0004') return body.toString('utf8')
  // Packed bytes are as good as random, and any three letters stand in them somewhere.
  const readable = body.toString('latin1').match(/[ -~]{6,}/g) ?? []
  return [...readable, ...(await unpack(body))].join('\n')
}

function unpack(bytes: Buffer): Promise<string[]> {
  return new Promise((resolve, reject) => {
    yauzl.fromBuffer(bytes, { lazyEntries: true }, (failure, zip) => {
      if (failure || !zip) return reject(failure ?? new Error('no packed file'))
      const parts: string[] = []
      zip.on('error', reject)
      zip.on('end', () => resolve(parts))
      zip.on('entry', (entry: Entry) => {
        zip.openReadStream(entry, (refused, stream) => {
          if (refused || !stream) return reject(refused ?? new Error('no part'))
          const chunks: Buffer[] = []
          stream.on('data', (chunk: Buffer) => chunks.push(chunk))
          stream.on('error', reject)
          stream.on('end', () => {
            parts.push(entry.fileName, Buffer.concat(chunks).toString('utf8'))
            zip.readEntry()
          })
        })
      })
      zip.readEntry()
    })
  })
}

/** Every address of the product that stands in an answer: links, forms, scripts, pictures, and plain text of data. */
function addressesIn({ text, type }: Answer): string[] {
  if (!/html|x-component|json|javascript|css|svg/.test(type)) return []
  const readable = text.replaceAll('&amp;', '&').replaceAll('\\u0026', '&')
  const quoted = [...readable.matchAll(/["'(]\\?((?:\/(?:_next|[a-z]))[\w\-./~%?=&;:+,]*)/g)].map(
    ([, path]) => path ?? '',
  )
  const chunks = [...readable.matchAll(/["']\\?(static\/(?:chunks|media)\/[\w\-./~]+)/g)].map(
    ([, path]) => `/_next/${path}`,
  )
  return [...quoted, ...chunks].filter((path) => isAddress(path))
}

/** What the product answers to; scripts also hold regular expressions and the like that only begin with a slash. */
function isAddress(path: string): boolean {
  return /^\/(_next\/static|api|committee|invitation|participations|published|sign-in|studies|mark\.svg)(\/|\?|$)/.test(
    path,
  )
}
