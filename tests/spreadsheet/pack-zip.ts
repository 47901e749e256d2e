import { crc32, deflateRawSync } from 'node:zlib'

export type ZipPart = {
  name: string
  content: string | Uint8Array
  /** What the file claims, where that differs from the truth. */
  claimedSize?: number
  claimedChecksum?: number
  flags?: number
}

/** Packs parts into a zip file, honest or lying, so that tests can make files no program would write. */
export function packZip(parts: readonly ZipPart[]): Buffer {
  const bodies: Buffer[] = []
  const directory: Buffer[] = []
  let offset = 0
  for (const part of parts) {
    const content = Buffer.from(part.content)
    const name = Buffer.from(part.name)
    const packed = deflateRawSync(content)
    const size = part.claimedSize ?? content.length
    const checksum = part.claimedChecksum ?? crc32(content)
    const local = Buffer.alloc(30)
    local.writeUInt32LE(0x04034b50, 0)
    writeCommon({
      header: local,
      at: 4,
      flags: part.flags ?? 0,
      checksum,
      packed: packed.length,
      size,
      name: name.length,
    })
    const entry = Buffer.alloc(46)
    entry.writeUInt32LE(0x02014b50, 0)
    entry.writeUInt16LE(20, 4)
    writeCommon({
      header: entry,
      at: 6,
      flags: part.flags ?? 0,
      checksum,
      packed: packed.length,
      size,
      name: name.length,
    })
    entry.writeUInt32LE(offset, 42)
    bodies.push(local, name, packed)
    directory.push(entry, name)
    offset += local.length + name.length + packed.length
  }
  const listing = Buffer.concat(directory)
  const end = Buffer.alloc(22)
  end.writeUInt32LE(0x06054b50, 0)
  end.writeUInt16LE(parts.length, 8)
  end.writeUInt16LE(parts.length, 10)
  end.writeUInt32LE(listing.length, 12)
  end.writeUInt32LE(offset, 16)
  return Buffer.concat([...bodies, listing, end])
}

type Common = {
  header: Buffer
  at: number
  flags: number
  checksum: number
  packed: number
  size: number
  name: number
}

function writeCommon({ header, at, flags, checksum, packed, size, name }: Common): void {
  header.writeUInt16LE(20, at)
  header.writeUInt16LE(flags, at + 2)
  header.writeUInt16LE(8, at + 4)
  header.writeUInt16LE(0x21, at + 8)
  header.writeUInt32LE(checksum, at + 10)
  header.writeUInt32LE(packed, at + 14)
  header.writeUInt32LE(size, at + 18)
  header.writeUInt16LE(name, at + 22)
}
