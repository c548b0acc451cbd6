import { readdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { bucketRange, decodeBuckets, decodePeakHeader, peakFileBytes, toPeak } from '@shared/audio/peaks.ts'
import { mediaFault, type MediaFaultCode } from '@server/media/faults.ts'
import { ingestRecording, readIngestResult, type IngestOptions, type IngestResult } from '@server/media/ingest.ts'
import { gainFor } from '@server/media/loudness.ts'
import {
  acceptedFormats,
  decode,
  ffmpeg,
  ffprobe,
  makeLiveWebm,
  makeRecording,
  makeScratch,
  pluckedBass,
  scratchFolder,
  sine
} from '../support/media.ts'

let folder: string
beforeAll(() => {
  folder = makeScratch()
})
afterAll(() => rmSync(folder, { recursive: true, force: true }))

const ingest = async (source: string, outDir: string, more: Partial<IngestOptions> = {}): Promise<IngestResult> => {
  const made = await ingestRecording({ source, outDir, ...more })
  if (!made.ok) throw new Error(`${made.error.code}: ${source}`)
  return made.value
}

describe('ingestRecording', () => {
  it.each(Object.entries(acceptedFormats))('takes %s', async (_, { name, options }) => {
    const scratch = scratchFolder()
    const source = makeRecording(scratch, name, pluckedBass(2.5), ...options)
    const outDir = join(scratch, 'take', 'media')
    const result = await ingest(source, outDir)
    expect(Math.abs(result.durationSec - Number(ffprobe(source, 'format=duration')))).toBeLessThan(0.1)
    expect(result.durationSec).toBe(decode(source).length / 2 / result.sampleRate)
    expect(
      Math.abs(Number(ffprobe(join(outDir, result.rendition.file), 'format=duration')) - result.durationSec)
    ).toBeLessThan(0.03)
    expect(ffprobe(join(outDir, result.rendition.file), 'stream=codec_name')).toBe('aac')
    expect(result.rendition.bytes).toBe(statSync(join(outDir, result.rendition.file)).size)
    expect(Math.abs(result.manifest.totalFrames / 48_000 - result.durationSec)).toBeLessThan(1e-4)
    expect(readdirSync(outDir).sort()).toEqual(['peaks.bin', 'pieces', 'rendition.m4a', 'result.json'])
    expect(readdirSync(join(scratch, 'take'))).toEqual(['media'])
    expect(await readIngestResult(outDir)).toEqual(result)
  })

  it('takes a browser recording, one channel and six channels', async () => {
    const scratch = scratchFolder()
    const live = await ingest(makeLiveWebm(scratch, pluckedBass(2)), join(scratch, '1', 'media'))
    expect(live.durationSec).toBeCloseTo(2, 1)
    const mono = makeRecording(scratch, 'mono.wav', pluckedBass(2), '-ac', '1', '-ar', '22050')
    expect(await ingest(mono, join(scratch, '2', 'media'))).toMatchObject({
      channels: 1,
      sampleRate: 22_050,
      durationSec: 2
    })
    const wide = makeRecording(scratch, 'wide.flac', pluckedBass(2), '-ac', '6', '-ar', '96000')
    expect(await ingest(wide, join(scratch, '3', 'media'))).toMatchObject({
      channels: 2,
      sampleRate: 96_000,
      durationSec: 2
    })
  })

  it('says how far it is, never backwards, and ends at the end', async () => {
    const scratch = scratchFolder()
    const told: [string, number][] = []
    const source = makeRecording(scratch, 'a.wav', pluckedBass(8))
    await ingest(source, join(scratch, 'media'), { onProgress: (stage, fraction) => told.push([stage, fraction]) })
    expect(told[0]).toEqual(['probing', 0])
    expect(told.at(-1)).toEqual(['finishing', 1])
    const fractions = told.filter(([stage]) => stage === 'decoding').map(([, fraction]) => fraction)
    expect(fractions.length).toBeGreaterThan(5)
    expect(fractions).toEqual([...fractions].sort((a, b) => a - b))
  })

  it('strips names, places, pictures and chapters from what others hear', async () => {
    const scratch = scratchFolder()
    const secret = 'CANARY-7f3a'
    const cover = makeRecording(scratch, 'cover.png', ['-f', 'lavfi', '-i', 'color=red:s=64x64'], '-frames:v', '1')
    const sound = makeRecording(scratch, 'plain.wav', pluckedBass(1))
    const source = join(scratch, 'tagged.m4a')
    const tags = ['title', 'artist', 'comment', 'location'].flatMap((key) => ['-metadata', `${key}=${secret}`])
    ffmpeg(
      '-i',
      sound,
      '-i',
      cover,
      '-map',
      '0',
      '-map',
      '1',
      '-c:v',
      'copy',
      '-disposition:v',
      'attached_pic',
      ...tags,
      source
    )
    expect(readFileSync(source).includes(secret)).toBe(true)
    const outDir = join(scratch, 'media')
    const result = await ingest(source, outDir)
    const files = [result.rendition.file, 'result.json', ...result.manifest.pieces.map(({ file }) => `pieces/${file}`)]
    for (const file of files) expect(readFileSync(join(outDir, file)).includes(secret), file).toBe(false)
    expect(ffprobe(join(outDir, result.rendition.file), 'stream=codec_type')).toBe('audio')
  })

  it('puts the index of the rendition in front, where a browser finds it first', async () => {
    const scratch = scratchFolder()
    const outDir = join(scratch, 'media')
    const { rendition } = await ingest(makeRecording(scratch, 'a.wav', pluckedBass(1)), outDir)
    const bytes = readFileSync(join(outDir, rendition.file)).toString('latin1')
    expect(bytes.indexOf('moov')).toBeGreaterThan(0)
    expect(bytes.indexOf('moov')).toBeLessThan(bytes.indexOf('mdat'))
  })
})

describe('peaks', () => {
  it.each([1, 2])('are the true extremes of the decoded samples (%i channels)', async (channels) => {
    const scratch = scratchFolder()
    const source = makeRecording(scratch, 'a.wav', pluckedBass(7.777), '-ac', String(channels))
    const outDir = join(scratch, 'media')
    const { peaks } = await ingest(source, outDir)
    const file = readFileSync(join(outDir, peaks.file))
    const header = decodePeakHeader(file)
    if (!header.ok) throw new Error(header.error)
    expect(header.value.levels).toEqual(peaks.levels)
    expect(peakFileBytes(header.value)).toBe(file.length)
    const samples = decode(source)
    expect(header.value.frames).toBe(samples.length / channels)
    for (const level of peaks.levels) {
      const { start, end } = bucketRange(header.value, level)
      decodeBuckets(file.subarray(start, end), channels).forEach((values, channel) => {
        const own = samples.filter((_, at) => at % channels === channel)
        for (let bucket = 0; bucket < level.buckets; bucket++) {
          const part = own.subarray(bucket * level.samplesPerBucket, (bucket + 1) * level.samplesPerBucket)
          const [low, high] = [toPeak(Math.min(...part)) / 32768, toPeak(Math.max(...part)) / 32768]
          expect([values[bucket * 2], values[bucket * 2 + 1]]).toEqual([low, high])
        }
      })
    }
  })
})

describe('tuning', () => {
  it('is told of chords 18 cents low on either side of the picture, and of hiss it is not', async () => {
    const scratch = scratchFolder()
    const tones = [45, 52, 55, 60, 65].map((midi) => `sin(2*PI*${440 * 2 ** ((midi - 69) / 12 - 18 / 1200)}*t)`)
    const chord = ['-f', 'lavfi', '-i', `aevalsrc='0.1*(${tones.join('+')})|0':s=44100:d=4`]
    const { tuningCents } = await ingest(makeRecording(scratch, 'chord.wav', chord), join(scratch, '1', 'media'))
    expect(Math.abs((tuningCents ?? Infinity) + 18)).toBeLessThanOrEqual(1)
    const hiss = ['-f', 'lavfi', '-i', 'anoisesrc=d=4:a=0.2:seed=5']
    const told = await ingest(makeRecording(scratch, 'hiss.wav', hiss), join(scratch, '2', 'media'))
    expect(told.tuningCents).toBeNull()
  })
})

describe('loudness', () => {
  // EBU Tech 3341, table 1, test case 1: stereo sine of 1000 Hz at -23.0 dBFS on both channels, 20 s: I = -23.0 +-0.1 LUFS.
  // Test case 2: the same at -33.0 dBFS. Levels of sines are those of their peaks.
  it.each([-23, -33])('reads the test tone of EBU Tech 3341 at %i LUFS', async (level) => {
    const scratch = scratchFolder()
    const amplitude = 10 ** (level / 20)
    const tone = `aevalsrc='${amplitude}*sin(2*PI*1000*t)|${amplitude}*sin(2*PI*1000*t)':s=48000:d=20`
    const source = makeRecording(scratch, 'tone.wav', ['-f', 'lavfi', '-i', tone], '-c:a', 'pcm_f32le')
    const { loudness } = await ingest(source, join(scratch, 'media'))
    expect(Math.abs(loudness.integratedLufs - level)).toBeLessThanOrEqual(0.1)
    expect(Math.abs(loudness.truePeakDb - level)).toBeLessThanOrEqual(0.2)
    expect(Math.abs(loudness.gainDb - (-18 - level))).toBeLessThanOrEqual(0.2)
  })

  // After the true-peak cases of EBU Tech 3341 (from memory: 0.5 of full scale at a quarter of the rate, 45 degrees off, so
  // that every sample misses the crest; read within +0.2 and -0.4 dB).
  it('sees a peak between the samples', async () => {
    const scratch = scratchFolder()
    // Faded in and out: a tone that is switched on has a true peak of its own at the edge.
    const crest = '0.5*min(1,5*min(t,3-t))*sin(2*PI*12000*t+PI/4)'
    const tone = `aevalsrc='${crest}|${crest}':s=48000:d=3`
    const source = makeRecording(scratch, 'tone.wav', ['-f', 'lavfi', '-i', tone], '-c:a', 'pcm_f32le')
    expect(decode(source).every((sample) => Math.abs(sample) < 0.36)).toBe(true)
    const { loudness } = await ingest(source, join(scratch, 'media'))
    expect(loudness.truePeakDb).toBeGreaterThanOrEqual(-6.4)
    expect(loudness.truePeakDb).toBeLessThanOrEqual(-5.8)
  })

  it('never lifts a true peak above -1 dBTP', () => {
    expect(gainFor(-30, -20)).toBe(12)
    expect(gainFor(-30, -6)).toBe(5)
    expect(gainFor(-10, 0.5)).toBe(-8)
    expect(gainFor(-70, -60)).toBe(0)
    expect(gainFor(-70, 0)).toBe(-1)
  })
})

describe('a recording that is no good', () => {
  const expectFault = async (path: string, code: MediaFaultCode, limits: IngestOptions['limits'] = {}) => {
    const parent = scratchFolder()
    const made = await ingestRecording({ source: path, outDir: join(parent, 'media'), limits })
    expect(made, path).toEqual({ ok: false, error: mediaFault(code) })
    expect(readdirSync(parent)).toEqual([])
  }

  it('is refused when silent, also with noise below -60 dB', async () => {
    await expectFault(makeRecording(folder, 's.wav', ['-f', 'lavfi', '-i', 'anullsrc=d=3']), 'silent')
    const hiss = `aevalsrc='0.0009*(2*random(0)-1)':s=44100:d=3`
    await expectFault(makeRecording(folder, 'hiss.wav', ['-f', 'lavfi', '-i', hiss], '-c:a', 'pcm_s24le'), 'silent')
  })

  it('is refused when it is more than an hour of silence in a few kilobytes, before all of it is read', async () => {
    const bomb = makeRecording(folder, 'bomb.flac', ['-f', 'lavfi', '-i', 'anullsrc=r=44100:cl=stereo:d=4000'])
    expect(statSync(bomb).size).toBeLessThan(5_000_000)
    const told: number[] = []
    const parent = scratchFolder()
    const made = await ingestRecording({
      source: bomb,
      outDir: join(parent, 'media'),
      limits: { maxLeadingSilenceSec: 60 },
      onProgress: (_, fraction) => told.push(fraction)
    })
    expect(made).toEqual({ ok: false, error: mediaFault('silent') })
    expect(Math.max(...told)).toBeLessThan(0.05)
    expect(readdirSync(parent)).toEqual([])
    await expectFault(bomb, 'too-long', { maxDurationSec: 3600 })
  })

  it.each(['flac', 'mp3', 'aiff'])('is refused when a %s was cut off on its way', async (kind) => {
    const whole = readFileSync(makeRecording(folder, `whole.${kind}`, pluckedBass(6)))
    const path = join(folder, `cut.${kind}`)
    writeFileSync(path, whole.subarray(0, whole.length / 2))
    await expectFault(path, 'truncated')
  })

  it('is refused when an m4a with its index in front was cut off', async () => {
    const whole = readFileSync(makeRecording(folder, 'f.m4a', pluckedBass(6), '-c:a', 'aac', '-movflags', '+faststart'))
    const path = join(folder, 'cut.m4a')
    writeFileSync(path, whole.subarray(0, whole.length / 2))
    await expectFault(path, 'truncated')
  })

  it('is refused when it claims to be short and goes on', async () => {
    const path = join(folder, 'liar.flac')
    const bytes = readFileSync(makeRecording(folder, 'honest.flac', pluckedBass(10)))
    // Total samples: 36 bits that end at byte 26 (RFC 9639, section 8.2); 44100 of them is one second.
    bytes[21] = (bytes[21] ?? 0) & 0xf0
    bytes.writeUInt32BE(44_100, 22)
    writeFileSync(path, bytes)
    await expectFault(path, 'too-long', { maxDurationSec: 5 })
  })

  it('never has another recording decoded into it', async () => {
    const canary = makeRecording(folder, 'canary.wav', sine(997, 4))
    const lists = [
      `ffconcat version 1.0\nfile '${canary}'\n`,
      `#EXTM3U\n#EXT-X-TARGETDURATION:4\n#EXTINF:4,\nfile://${canary}\n#EXT-X-ENDLIST\n`
    ]
    for (const [turn, list] of lists.entries()) {
      const path = join(folder, `list-${turn}.wav`)
      writeFileSync(path, list)
      await expectFault(path, 'playlist')
    }
  })
})

describe('being stopped', () => {
  it('throws, ends its processes and leaves nothing behind', async () => {
    const parent = scratchFolder()
    const source = makeRecording(folder, 'long.wav', pluckedBass(30))
    const stop = new AbortController()
    const onProgress = (stage: string, fraction: number) => {
      if (stage === 'decoding' && fraction > 0.2) stop.abort(new Error('stopped by a person'))
    }
    const run = ingestRecording({ source, outDir: join(parent, 'media'), signal: stop.signal, onProgress })
    await expect(run).rejects.toThrow('stopped by a person')
    expect(readdirSync(parent)).toEqual([])
  })
})
