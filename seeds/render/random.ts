import { createHash } from 'node:crypto'

/** Numbers from a seed, alike on every machine: `next` in 0..1, `normal` with mean 0 and deviation 1. */
export interface Random {
  next(): number
  normal(): number
  pick<T>(list: readonly [T, ...T[]]): T
}

/** Mulberry32 (public domain, Tommy Ettinger); the seed is the hash of a name, so adding a take shifts no other. */
export function randomFrom(name: string): Random {
  let state = createHash('sha256').update(name).digest().readUInt32LE(0)
  const next = () => {
    state = (state + 0x6d2b79f5) | 0
    let t = Math.imul(state ^ (state >>> 15), 1 | state)
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296
  }
  // Box-Muller; 1 - next() keeps the logarithm finite.
  const normal = () => Math.sqrt(-2 * Math.log(1 - next())) * Math.cos(2 * Math.PI * next())
  return { next, normal, pick: (list) => list[Math.floor(next() * list.length)] ?? list[0] }
}

/** An id that stays the same from one rendering to the next: a name-based UUID (version 5 in shape, RFC 9562). */
export function idFrom(name: string): string {
  const bytes = createHash('sha1').update(`plumbline demo: ${name}`).digest().subarray(0, 16)
  bytes[6] = ((bytes[6] ?? 0) & 0x0f) | 0x50
  bytes[8] = ((bytes[8] ?? 0) & 0x3f) | 0x80
  const hex = bytes.toString('hex')
  return [hex.slice(0, 8), hex.slice(8, 12), hex.slice(12, 16), hex.slice(16, 20), hex.slice(20)].join('-')
}
