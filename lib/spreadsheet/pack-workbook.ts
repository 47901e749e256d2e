import { crc32, deflateRawSync, inflateRawSync } from 'node:zlib'
import type ExcelJS from 'exceljs'

/*
 * Packs a workbook so that it says nothing about when or by which program and person it was made, and so
 * that the same content always gives the same bytes. The library stamps the time of day on every part and
 * names a program it is not; both are put right here, after it has written.
 */

/** 1 January 1980, 00:00, the earliest moment a packed file can state. */
const packedDate = 0x0021
const fixedInstant = new Date(Date.UTC(2000, 0, 1))

const applicationPart =
  '<?xml version="1.0" encoding="UTF-8" standalone="yes"?>\n' +
  '<Properties xmlns="http://schemas.openxmlformats.org/officeDocument/2006/extended-properties">' +
  '<Application>Evenlot</Application></Properties>'

type Part = { name: Buffer; content: Buffer }

export async function packWorkbook(workbook: ExcelJS.Workbook): Promise<Uint8Array> {
  workbook.creator = 'Evenlot'
  workbook.lastModifiedBy = 'Evenlot'
  workbook.created = fixedInstant
  workbook.modified = fixedInstant
  const written = Buffer.from(await workbook.xlsx.writeBuffer())
  const parts = listParts(written)
    .filter(({ name }) => !name.toString().endsWith('/'))
    .map((part) =>
      part.name.toString() === 'docProps/app.xml' ? { ...part, content: Buffer.from(applicationPart) } : part,
    )
  return pack(parts)
}

/** Walks the central directory of a file we wrote ourselves a moment ago, so it needs no suspicion. */
function listParts(zip: Buffer): Part[] {
  const end = zip.lastIndexOf(Buffer.from('PK\x05\x06', 'latin1'))
  let at = zip.readUInt32LE(end + 16)
  return Array.from({ length: zip.readUInt16LE(end + 10) }, () => {
    const isDeflated = zip.readUInt16LE(at + 10) === 8
    const size = zip.readUInt32LE(at + 20)
    const nameLength = zip.readUInt16LE(at + 28)
    const local = zip.readUInt32LE(at + 42)
    const name = zip.subarray(at + 46, at + 46 + nameLength)
    const start = local + 30 + zip.readUInt16LE(local + 26) + zip.readUInt16LE(local + 28)
    const packed = zip.subarray(start, start + size)
    at += 46 + nameLength + zip.readUInt16LE(at + 30) + zip.readUInt16LE(at + 32)
    return { name, content: isDeflated ? inflateRawSync(packed) : packed }
  })
}

function pack(parts: Part[]): Uint8Array {
  const bodies: Buffer[] = []
  const directory: Buffer[] = []
  let offset = 0
  for (const { name, content } of parts) {
    const packed = deflateRawSync(content, { level: 9 })
    // What the local header and the directory say of a part alike, from "version needed" to "extra length".
    const common = Buffer.alloc(26)
    common.writeUInt16LE(20, 0)
    common.writeUInt16LE(8, 4)
    common.writeUInt16LE(packedDate, 8)
    common.writeUInt32LE(crc32(content), 10)
    common.writeUInt32LE(packed.length, 14)
    common.writeUInt32LE(content.length, 18)
    common.writeUInt16LE(name.length, 22)
    const tail = Buffer.alloc(14)
    tail.writeUInt32LE(offset, 10)
    bodies.push(Buffer.from('PK\x03\x04', 'latin1'), common, name, packed)
    directory.push(Buffer.from('PK\x01\x02\x14\x00', 'latin1'), common, tail, name)
    offset += 30 + name.length + packed.length
  }
  const end = Buffer.alloc(22)
  end.write('PK\x05\x06', 'latin1')
  end.writeUInt16LE(parts.length, 8)
  end.writeUInt16LE(parts.length, 10)
  end.writeUInt32LE(Buffer.concat(directory).length, 12)
  end.writeUInt32LE(offset, 16)
  return Buffer.concat([...bodies, ...directory, end])
}
