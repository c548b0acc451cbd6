import { readdirSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { mediaFaultCodes } from '@server/media/faults.ts'
import { ingestRecording } from '@server/media/ingest.ts'
import { acceptedFormats, makeRecording, pluckedBass, scratchFolder } from '../support/media.ts'

/** Lehmer's generator (modulus 2^31 - 1): the same damage in every run. */
const randomFrom = (seed: number) => {
  let state = seed
  return (below: number) => (state = (state * 48_271) % 2_147_483_647) % below
}

type Damage = (bytes: Buffer, random: (below: number) => number) => Buffer

const flip =
  (from: number, share: number): Damage =>
  (bytes, random) => {
    const end = Math.max(from + 1, Math.floor(bytes.length * share))
    for (let turn = 0; turn < Math.max(4, end / 250); turn++) bytes[from + random(end - from)] = random(256)
    return bytes
  }

const damages: Record<string, Damage> = {
  'bytes anywhere': flip(4, 1),
  'bytes of the header': flip(4, 0.02),
  'a part cut out': (bytes, random) => {
    const at = random(bytes.length)
    return Buffer.concat([bytes.subarray(0, at), bytes.subarray(at + random(bytes.length >> 2))])
  },
  'a part repeated': (bytes, random) => {
    const at = random(bytes.length)
    return Buffer.concat([bytes.subarray(0, at), bytes.subarray(random(at + 1))])
  },
  'a run of 0xff': (bytes, random) => {
    const at = random(bytes.length)
    return bytes.fill(0xff, at, at + random(2000))
  }
}

/** Three kinds of damage for each format, every kind done to formats of all sorts. */
const damagesFor = (turn: number) => Object.entries(damages).filter((_, at, all) => (at + turn) % all.length < 3)

describe('damaged recordings', () => {
  it.each(Object.entries(acceptedFormats).map(([name, format], turn) => [name, format, turn] as const))(
    'of %s are taken or refused, never more, and leave nothing else',
    async (_, format, turn) => {
      const folder = scratchFolder()
      const whole = readFileSync(makeRecording(folder, format.name, pluckedBass(1.5), ...format.options))
      const seed = [...format.name].reduce((sum, letter) => sum * 31 + letter.charCodeAt(0), 1)
      const random = randomFrom(seed)
      const damaged = damagesFor(turn).map(([kind, damage]) => {
        const source = join(folder, `damaged by ${kind}`)
        writeFileSync(source, damage(Buffer.from(whole), random))
        return { kind, source, parent: join(folder, kind) }
      })
      // All at once: most of the time goes by in starting ffmpeg.
      await Promise.all(
        damaged.map(async ({ kind, source, parent }) => {
          const made = await ingestRecording({ source, outDir: join(parent, 'media') })
          if (!made.ok) expect(mediaFaultCodes).toContain(made.error.code)
          expect(readdirSync(parent), kind).toEqual(made.ok ? ['media'] : [])
        })
      )
    }
  )
})
