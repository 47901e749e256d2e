import { readFileSync } from 'node:fs'
import { brotliDecompressSync } from 'node:zlib'

/**
 * The code points a WOFF2 file can draw, read from its character map.
 *
 * WOFF2 rewrites only the outline tables; the character map lies in the one Brotli stream as it is in the
 * original font, so the directory and that stream are all that must be understood. Layout: W3C, WOFF File
 * Format 2.0, sections 4.1 and 5; cmap formats 4 and 12: OpenType specification.
 */
export function fontCoverage(file: string): Set<number> {
  const bytes = readFileSync(file)
  if (bytes.toString('latin1', 0, 4) !== 'wOF2') throw new Error(`${file} is not a WOFF2 file.`)

  const tableCount = bytes.readUInt16BE(12)
  const compressedLength = bytes.readUInt32BE(20)
  const { offsets, end } = readDirectory(bytes, tableCount)
  const tables = brotliDecompressSync(bytes.subarray(end, end + compressedLength))
  const cmap = offsets.get('cmap')
  if (!cmap) throw new Error(`${file} has no character map.`)
  return readCharacterMap(tables.subarray(cmap.start, cmap.start + cmap.length))
}

// The tags of WOFF2's table of known tags, in its order; only the position of each matters.
const knownTags = (
  'cmap head hhea hmtx maxp name OS/2 post cvt_ fpgm glyf loca prep CFF_ VORG EBDT EBLC gasp hdmx kern LTSH ' +
  'PCLT VDMX vhea vmtx BASE GDEF GPOS GSUB EBSC JSTF MATH CBDT CBLC COLR CPAL SVG_ sbix acnt avar bdat bloc ' +
  'bsln cvar fdsc feat fmtx fvar gvar hsty just lcar mort morx opbd prop trak Zapf Silf Glat Gloc Feat Sill'
).split(' ')

function readDirectory(bytes: Buffer, tableCount: number) {
  const offsets = new Map<string, { start: number; length: number }>()
  let position = 48
  let start = 0
  const base128 = () => {
    let value = 0
    for (;;) {
      const byte = bytes.readUInt8(position++)
      value = value * 128 + (byte & 0x7f)
      if (byte < 0x80) return value
    }
  }
  for (let table = 0; table < tableCount; table++) {
    const flags = bytes.readUInt8(position++)
    let tag = knownTags[flags & 0x3f]
    if (tag === undefined) {
      tag = bytes.toString('latin1', position, position + 4)
      position += 4
    }
    const originalLength = base128()
    const version = flags >> 6
    // Outline tables are transformed unless version 3 says otherwise; every other table only when not 0.
    const isTransformed = tag === 'glyf' || tag === 'loca' ? version !== 3 : version !== 0
    const length = isTransformed ? base128() : originalLength
    offsets.set(tag, { start, length })
    start += length
  }
  return { offsets, end: position }
}

function readCharacterMap(cmap: Buffer): Set<number> {
  const covered = new Set<number>()
  const subtables = cmap.readUInt16BE(2)
  for (let index = 0; index < subtables; index++) {
    const subtable = cmap.subarray(cmap.readUInt32BE(4 + index * 8 + 4))
    const format = subtable.readUInt16BE(0)
    if (format === 4) readSegments(subtable, covered)
    if (format === 12) readGroups(subtable, covered)
  }
  return covered
}

function readSegments(subtable: Buffer, covered: Set<number>) {
  const doubled = subtable.readUInt16BE(6)
  for (let segment = 0; segment < doubled; segment += 2) {
    const last = subtable.readUInt16BE(14 + segment)
    const first = subtable.readUInt16BE(16 + doubled + segment)
    const delta = subtable.readUInt16BE(16 + 2 * doubled + segment)
    const rangeAt = 16 + 3 * doubled + segment
    const range = subtable.readUInt16BE(rangeAt)
    for (let code = first; code <= last && code !== 0xffff; code++) {
      const glyph = range === 0 ? code + delta : subtable.readUInt16BE(rangeAt + range + 2 * (code - first))
      if ((glyph & 0xffff) !== 0) covered.add(code)
    }
  }
}

function readGroups(subtable: Buffer, covered: Set<number>) {
  const groups = subtable.readUInt32BE(12)
  for (let group = 0; group < groups; group++) {
    const at = 16 + group * 12
    for (let code = subtable.readUInt32BE(at); code <= subtable.readUInt32BE(at + 4); code++)
      covered.add(code)
  }
}
