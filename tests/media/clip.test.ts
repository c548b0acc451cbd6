// A clip as it is really made, in a process of its own, held against the core in this one, sample by sample.
import { existsSync, mkdirSync, readdirSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { plainAids } from '@shared/audio/listening'
import { stretchSamples } from '@shared/audio/stretch/offline'
import type { ClipSettings } from '@shared/contracts/clips'
import { runClip } from '@server/media/run-clip'
import type { ClipStage } from '@server/media/make-clip'
import { pitchByAubio } from '../support/aubio.ts'
import { decode, ffprobe, makeRecording, pluckedBass, scratchFolder, sine } from '../support/media.ts'

const settings: ClipSettings = {
  span: { startSec: 4, endSec: 6 },
  rate: 0.5,
  semitones: 0,
  aids: { ...plainAids, isOctaveUp: true },
  click: null,
  clickLevel: 1,
  countIn: 'none',
  format: 'wav'
}
const rate = 22_050
const side = (mixed: Float32Array, which: number): Float32Array => mixed.filter((_, at) => at % 2 === which)

describe('a clip', () => {
  it('holds what the core makes of the passage, with the gain, to the last bit of its file', async () => {
    const folder = scratchFolder()
    const source = makeRecording(folder, 'take.ogg', pluckedBass(7, rate), '-c:a', 'libvorbis')
    const target = join(folder, 'take', 'clips', 'one')
    mkdirSync(join(folder, 'take'))
    const stages = new Set<ClipStage>()
    const made = await runClip(
      { source, target, settings, barMap: null, gainDb: -3 },
      { signal: new AbortController().signal, onProgress: (stage) => stages.add(stage) }
    )
    expect(made).toMatchObject({ ok: true, value: { bytes: 44 + 4 * rate * 2 * 2 } })
    expect([...stages]).toEqual(['decoding', 'rendering', 'finishing'])
    expect(readdirSync(join(folder, 'take'))).toEqual(['clips'])

    const take = decode(source)
    const passage = [0, 1].map((which) => side(take, which).subarray(4 * rate))
    const alone = stretchSamples(passage, rate, { speed: 0.5, semitones: 12 })
    const clip = decode(target)
    expect(clip).toHaveLength(2 * 4 * rate)
    const gain = 10 ** (-3 / 20)
    // The core alone knows nothing of what sounds before the passage; from its first attack on both are the same.
    const [from, to] = [Math.round(0.3 * rate), Math.round(3.9 * rate)]
    for (const which of [0, 1]) {
      const wanted = alone[which]?.subarray(from, to).map((sample) => sample * gain) ?? new Float32Array(0)
      const got = side(clip, which).subarray(from, to)
      const furthest = got.reduce((most, sample, at) => Math.max(most, Math.abs(sample - (wanted[at] ?? NaN))), 0)
      expect(furthest).toBeLessThan(1 / 32_768)
    }
  })

  it('is encoded for phones, and stopped in the middle leaves nothing', async () => {
    const folder = scratchFolder()
    const source = makeRecording(folder, 'take.flac', sine(98, 7, rate))
    const target = join(folder, 'take', 'clips', 'one')
    mkdirSync(join(folder, 'take'))
    const order = { source, target, settings: { ...settings, format: 'm4a' as const }, barMap: null, gainDb: 0 }
    const stop = new AbortController()
    const stopped = runClip(order, {
      signal: stop.signal,
      onProgress: (stage) => stage === 'rendering' && stop.abort()
    })
    await expect(stopped).rejects.toThrow(/abort/i)
    expect([existsSync(target), readdirSync(join(folder, 'take'))]).toEqual([false, []])
    await runClip(order, { signal: new AbortController().signal, onProgress: () => undefined })
    expect(ffprobe(target, 'stream=codec_name,channels')).toBe('aac\n2')
    expect(Math.abs(Number(ffprobe(target, 'format=duration')) - 4)).toBeLessThan(0.05)
    expect(Math.abs(1200 * Math.log2(pitchByAubio(target) / 196))).toBeLessThan(2)
  })
})
