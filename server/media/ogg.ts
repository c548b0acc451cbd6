// Ogg pages (RFC 3533) and the Opus headers in them (RFC 7845): just enough to take packets out and put them in again.

const polynomial = 0x04c11db7
const crcTable = Uint32Array.from({ length: 256 }, (_, byte) => {
  let rest = byte << 24
  for (let bit = 0; bit < 8; bit++) rest = rest & 0x80000000 ? (rest << 1) ^ polynomial : rest << 1
  return rest >>> 0
})

const checksum = (bytes: Uint8Array): number => {
  let sum = 0
  for (const byte of bytes) sum = ((sum << 8) ^ (crcTable[(sum >>> 24) ^ byte] ?? 0)) >>> 0
  return sum
}

const pageHeaderBytes = 27
const mostSegments = 255

export type PageFlags = { first?: boolean; last?: boolean }

/** Segments that a packet takes on a page. */
const segmentsOf = (packet: Uint8Array): number => Math.floor(packet.length / 255) + 1

const writePage = (packets: Uint8Array[], granule: number, sequence: number, flags: PageFlags): Buffer => {
  const lacing = packets.flatMap((packet) => [...Array<number>(segmentsOf(packet) - 1).fill(255), packet.length % 255])
  const head = Buffer.alloc(pageHeaderBytes + lacing.length)
  head.write('OggS')
  head[5] = (flags.first ? 2 : 0) | (flags.last ? 4 : 0)
  head.writeBigInt64LE(BigInt(granule), 6)
  head.writeUInt32LE(1, 14)
  head.writeUInt32LE(sequence, 18)
  head[26] = lacing.length
  head.set(lacing, pageHeaderBytes)
  const page = Buffer.concat([head, ...packets])
  page.writeUInt32LE(checksum(page), 22)
  return page
}

/** Packets in groups that each fit on one page. */
const groupForPages = (packets: Uint8Array[]): Uint8Array[][] => {
  const groups: Uint8Array[][] = []
  let room = 0
  for (const packet of packets) {
    const needed = segmentsOf(packet)
    if (needed > room) {
      groups.push([])
      room = mostSegments
    }
    groups.at(-1)?.push(packet)
    room -= needed
  }
  return groups
}

const emptyTags = Buffer.concat([Buffer.from('OpusTags'), Buffer.alloc(8)])

/** Frames per second of every Opus clock, whatever went in (RFC 7845, section 4). */
export const opusRate = 48_000

/** An Ogg Opus file around packets of `framesPerPacket`: no pre-skip, no end trim, no tags, so a decoder gives all frames. */
export const writeOpusFile = (opusHead: Uint8Array, packets: Uint8Array[], framesPerPacket: number): Buffer => {
  const head = Buffer.from(opusHead)
  head.writeUInt16LE(0, 10)
  const groups = groupForPages(packets)
  let granule = 0
  const pages = groups.map((group, index) => {
    granule += group.length * framesPerPacket
    return writePage(group, granule, index + 2, { last: index === groups.length - 1 })
  })
  return Buffer.concat([writePage([head], 0, 0, { first: true }), writePage([emptyTags], 0, 1, {}), ...pages])
}

export const preSkipOf = (opusHead: Uint8Array): number =>
  Buffer.from(opusHead.buffer, opusHead.byteOffset, opusHead.byteLength).readUInt16LE(10)

/** Takes a stream of Ogg bytes apart as they come; `onPacket` gets each whole packet. Throws on what is no Ogg page. */
export const createOggReader = (onPacket: (packet: Buffer) => void) => {
  let rest: Buffer = Buffer.alloc(0)
  let parts: Buffer[] = []
  let granule = 0

  const readPage = (): boolean => {
    if (rest.length < pageHeaderBytes) return false
    if (rest.toString('latin1', 0, 4) !== 'OggS') throw new Error('Not an Ogg page')
    const segments = rest[26] ?? 0
    const lacing = rest.subarray(pageHeaderBytes, pageHeaderBytes + segments)
    const length = pageHeaderBytes + segments + lacing.reduce((sum, size) => sum + size, 0)
    if (rest.length < length) return false
    granule = Number(rest.readBigInt64LE(6))
    let offset = pageHeaderBytes + segments
    for (const size of lacing) {
      parts.push(rest.subarray(offset, offset + size))
      offset += size
      if (size < 255) {
        onPacket(Buffer.concat(parts))
        parts = []
      }
    }
    rest = rest.subarray(length)
    return true
  }

  return {
    push(chunk: Buffer): void {
      rest = rest.length === 0 ? chunk : Buffer.concat([rest, chunk])
      while (readPage());
    },
    /** Granule position of the last page read: frames up to its end, pre-skip included, end trim taken off. */
    granule: () => granule
  }
}
