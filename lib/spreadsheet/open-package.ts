import { crc32 } from 'node:zlib'
import yauzl, { type Entry, type ZipFile } from 'yauzl'
import { Refusal } from '@/lib/domain/errors'
import type { WorkbookLimits } from '@/lib/spreadsheet/workbook'

/*
 * The packed parts of a workbook, opened so that the file cannot lie about itself: names are checked before
 * any part is read, and bytes are counted as they are unpacked, because the sizes a file states are only
 * what its maker wrote there.
 */

export type Package = {
  /** Lower-cased, as part names do not differ by case. */
  names: ReadonlySet<string>
  /** The text of a part, piece by piece; refused as soon as it goes beyond a limit. */
  read(name: string): AsyncGenerator<string>
}

const damaged = new Refusal(
  'workbook-damaged',
  'This file is damaged and cannot be read. Save it again as .xlsx and send that copy.',
)

export async function openPackage(bytes: Uint8Array, limits: WorkbookLimits): Promise<Package> {
  refuseOtherFiles(bytes, limits)
  const zip = await openZip(bytes)
  const entries = await listEntries(zip, limits)
  refuseOtherPackages(entries)
  let unpacked = 0

  async function* read(name: string): AsyncGenerator<string> {
    const entry = entries.get(name.toLowerCase())
    if (entry === undefined) throw damaged
    const decoder = new TextDecoder('utf-8', { fatal: true })
    let seen = 0
    let checksum = 0
    for await (const chunk of inflate(zip, entry)) {
      seen += chunk.length
      unpacked += chunk.length
      checksum = crc32(chunk, checksum)
      refuseOversize({ entry, seen, unpacked, limits })
      yield decode(decoder, chunk)
    }
    if (seen !== entry.uncompressedSize) throw lyingSize()
    if (checksum !== entry.crc32) throw damaged
    yield decode(decoder)
  }

  return { names: new Set(entries.keys()), read }
}

function refuseOtherFiles(bytes: Uint8Array, limits: WorkbookLimits): void {
  if (bytes.length === 0) throw new Refusal('file-empty', 'This file is empty: it holds no bytes at all.')
  if (bytes.length > limits.packedBytes) {
    throw new Refusal(
      'file-too-large',
      `This file is larger than ${limits.packedBytes / 1_000_000} MB. Send only the sheet with the results.`,
    )
  }
  const head = Buffer.from(bytes.buffer, bytes.byteOffset, Math.min(bytes.length, 8))
  if (head.toString('hex') === 'd0cf11e0a1b11ae1') throw oldContainer(bytes)
  if (head.readUIntBE(0, Math.min(4, head.length)) !== 0x504b0304) {
    throw new Refusal(
      'not-a-workbook',
      'This is not an .xlsx workbook, whatever its name says. Save the sheet as .xlsx or .csv and send that.',
    )
  }
}

/** The container of both old workbooks and workbooks locked with a password; only names within tell which. */
function oldContainer(bytes: Uint8Array): Refusal {
  const content = Buffer.from(bytes.buffer, bytes.byteOffset, bytes.length)
  if (content.includes(Buffer.from('EncryptedPackage', 'utf16le'))) return encrypted()
  return new Refusal(
    'workbook-old-format',
    'This is a file of the old .xls kind or another office document. Save it as .xlsx or .csv and send that.',
  )
}

function encrypted(): Refusal {
  return new Refusal(
    'workbook-encrypted',
    'This workbook is protected by a password for opening. Remove the password, save, and send it again.',
  )
}

function openZip(bytes: Uint8Array): Promise<ZipFile> {
  // Names come undecoded and sizes unchecked, so that each fault is found here and refused by its own name.
  const options = { lazyEntries: true, decodeStrings: false, validateEntrySizes: false }
  const content = Buffer.from(bytes.buffer, bytes.byteOffset, bytes.length)
  return new Promise((resolve, reject) => {
    yauzl.fromBuffer(content, options, (error, zip) => (error ? reject(damaged) : resolve(zip)))
  })
}

function listEntries(zip: ZipFile, limits: WorkbookLimits): Promise<Map<string, Entry>> {
  const entries = new Map<string, Entry>()
  return new Promise((resolve, reject) => {
    zip.on('error', (error: Error) => reject(/encryption/.test(error.message) ? encrypted() : damaged))
    zip.on('end', () => resolve(entries))
    zip.on('entry', (entry: Entry) => {
      try {
        const name = entryName(entry)
        if (entry.isEncrypted()) throw encrypted()
        if (entries.has(name)) {
          throw new Refusal(
            'workbook-duplicate-part',
            `This file holds the part “${name}” twice, so it has two meanings. Save it again as .xlsx.`,
          )
        }
        if (entries.size === limits.entries) {
          throw new Refusal(
            'workbook-too-many-parts',
            `This file is packed from more than ${limits.entries} parts. Copy the results to a new workbook.`,
          )
        }
        entries.set(name, entry)
        zip.readEntry()
      } catch (error) {
        reject(error)
      }
    })
    zip.readEntry()
  })
}

function entryName(entry: Entry): string {
  const name = Buffer.from(entry.fileName).toString('utf8')
  const segments = name.split('/')
  const unsafe = /[\\\0:]/.test(name) || name.startsWith('/') || segments.includes('..') || name.length > 255
  if (unsafe) {
    throw new Refusal(
      'workbook-unsafe-names',
      'This file names its parts in a way that could reach outside it, as no spreadsheet program does. Save it again as .xlsx.',
    )
  }
  return name.toLowerCase()
}

function refuseOtherPackages(entries: ReadonlyMap<string, Entry>): void {
  const names = [...entries.keys()]
  if (names.some((name) => name.endsWith('vbaproject.bin') || name.includes('/macrosheets/'))) {
    throw new Refusal(
      'workbook-macros',
      'This workbook carries macros (.xlsm). Save it as .xlsx, which leaves them out, and send that.',
    )
  }
  if (names.includes('xl/workbook.bin')) {
    throw new Refusal('workbook-binary', 'This is a binary workbook (.xlsb). Save it as .xlsx and send that.')
  }
  if (names.includes('mimetype') && names.includes('content.xml')) {
    throw new Refusal(
      'workbook-open-document',
      'This is an OpenDocument file. Save it as .xlsx or .csv and send that.',
    )
  }
  if (!names.includes('[content_types].xml') || !names.some((name) => name.startsWith('xl/'))) {
    throw new Refusal(
      'not-a-workbook',
      'This is a packed file, but not an .xlsx workbook. Save the sheet as .xlsx or .csv and send that.',
    )
  }
}

async function* inflate(zip: ZipFile, entry: Entry): AsyncGenerator<Buffer> {
  const stream = await new Promise<NodeJS.ReadableStream>((resolve, reject) => {
    zip.openReadStream(entry, (error, opened) => (error ? reject(damaged) : resolve(opened)))
  })
  try {
    for await (const chunk of stream) yield chunk as Buffer
  } catch (error) {
    if (error instanceof Refusal) throw error
    throw damaged
  }
}

type Progress = { entry: Entry; seen: number; unpacked: number; limits: WorkbookLimits }

function refuseOversize({ entry, seen, unpacked, limits }: Progress): void {
  if (seen > entry.uncompressedSize) throw lyingSize()
  if (unpacked > limits.unpackedBytes) {
    throw new Refusal(
      'workbook-unpacks-too-large',
      `Unpacked, this file is larger than ${limits.unpackedBytes / 1_000_000} MB. Send only the sheet with the results.`,
    )
  }
  if (seen > limits.ratioFloorBytes && seen > limits.ratio * entry.compressedSize) {
    throw new Refusal(
      'workbook-packed-too-densely',
      `This file unpacks to more than ${limits.ratio} times its size, as no table of results does. Copy the results to a new workbook.`,
    )
  }
}

function lyingSize(): Refusal {
  return new Refusal(
    'workbook-sizes-lie',
    'This file states a size for one of its parts that is not the real one. Save it again as .xlsx.',
  )
}

function decode(decoder: TextDecoder, chunk?: Buffer): string {
  try {
    return chunk === undefined ? decoder.decode() : decoder.decode(chunk, { stream: true })
  } catch {
    throw new Refusal('workbook-encoding', 'The text in this workbook is not UTF-8. Save it again as .xlsx.')
  }
}
