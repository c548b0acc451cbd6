import { readdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { mediaFault, mediaFaultCodes, type MediaFaultCode } from '@server/media/faults.ts'
import { probeRecording } from '@server/media/probe.ts'
import {
  acceptedFormats,
  ffmpeg,
  ffprobe,
  makeLiveWebm,
  makeRecording,
  makeScratch,
  pluckedBass
} from '../support/media.ts'

let folder: string
beforeAll(() => {
  folder = makeScratch()
})
afterAll(() => rmSync(folder, { recursive: true, force: true }))

const write = (name: string, content: string | Uint8Array): string => {
  const path = join(folder, name)
  writeFileSync(path, content)
  return path
}

const workFolders = (): string[] => readdirSync(tmpdir()).filter((name) => name.startsWith(`.work-${process.pid}-`))

const expectFault = async (path: string, code: MediaFaultCode): Promise<void> => {
  expect(await probeRecording(path), path).toEqual({ ok: false, error: mediaFault(code) })
  expect(workFolders()).toEqual([])
}

describe('probeRecording', () => {
  it.each(Object.entries(acceptedFormats))(
    'knows %s and agrees with ffprobe on its length',
    async (_, { name, options }) => {
      const path = makeRecording(folder, name, pluckedBass(4.3), ...options)
      const probed = await probeRecording(path)
      if (!probed.ok) throw new Error(probed.error.code)
      // Raw AAC states no length: ffprobe guesses it from the bit rate, we count packets of 1024 frames.
      const tolerance = name.endsWith('.aac') ? 0.1 : 0.001
      expect(Math.abs(probed.value.durationSec - Number(ffprobe(path, 'format=duration')))).toBeLessThan(tolerance)
      expect(Math.abs(probed.value.durationSec - 4.3)).toBeLessThan(0.1)
      expect(probed.value.channels).toBe(2)
      expect(probed.value.codec).toBe(ffprobe(path, 'stream=codec_name'))
      expect(probed.value.sampleRate).toBe(Number(ffprobe(path, 'stream=sample_rate')))
    }
  )

  it('measures a browser recording without a length in its header', async () => {
    const path = makeLiveWebm(folder, pluckedBass(6.5))
    expect(ffprobe(path, 'format=duration')).toBe('N/A')
    const probed = await probeRecording(path)
    expect(probed).toMatchObject({ ok: true, value: { container: 'webm', codec: 'opus', durationFrom: 'packets' } })
    expect(probed.ok && Math.abs(probed.value.durationSec - 6.5)).toBeLessThan(0.03)
  })

  it('does not take a variable rate for a length when an mp3 has no index', async () => {
    const path = makeRecording(folder, 'bare.mp3', pluckedBass(20), '-q:a', '6', '-write_xing', '0')
    const probed = await probeRecording(path)
    expect(probed.ok && Math.abs(probed.value.durationSec - 20)).toBeLessThan(0.1)
  })

  it.each(['mp3', 'm4a', 'flac'])('accepts %s with a cover picture', async (kind) => {
    const cover = makeRecording(folder, 'cover.png', ['-f', 'lavfi', '-i', 'color=red:s=64x64'], '-frames:v', '1')
    const path = join(folder, `cover.${kind}`)
    const sound = makeRecording(folder, 'plain.wav', pluckedBass(1))
    ffmpeg('-i', sound, '-i', cover, '-map', '0', '-map', '1', '-c:v', 'copy', '-disposition:v', 'attached_pic', path)
    expect(await probeRecording(path)).toMatchObject({ ok: true, value: { channels: 2 } })
  })

  it('believes the content and not the name', async () => {
    const path = makeRecording(folder, 'really.wav', pluckedBass(1), '-f', 'flac')
    expect(await probeRecording(path)).toMatchObject({ ok: true, value: { container: 'flac' } })
  })

  it('accepts a wav whose header was never completed', async () => {
    const path = write('open.wav', ffmpeg(...pluckedBass(2), '-f', 'wav', 'pipe:1'))
    expect(readFileSync(path).readUInt32LE(4)).toBe(0xffffffff)
    const probed = await probeRecording(path)
    expect(probed.ok && Math.abs(probed.value.durationSec - 2)).toBeLessThan(0.01)
  })

  it.each<[string, MediaFaultCode, string | Uint8Array]>([
    ['empty.wav', 'empty', ''],
    ['hls.mp3', 'playlist', '#EXTM3U\n#EXT-X-TARGETDURATION:9\n#EXTINF:9,\ncanary.wav\n#EXT-X-ENDLIST\n'],
    ['hls.wav', 'playlist', '\ufeff#EXTM3U\n#EXTINF:9,\nfile:canary.wav\n'],
    ['list.wav', 'playlist', 'ffconcat version 1.0\nfile canary.wav\n'],
    ['list.mp3', 'playlist', 'ffconcat version 1.0\nfile canary.wav\nduration 9\n'],
    ['pls.mp3', 'playlist', '[playlist]\nFile1=canary.wav\n'],
    ['dash.m4a', 'playlist', '<?xml version="1.0"?>\n<MPD type="static"><BaseURL>canary.wav</BaseURL></MPD>'],
    ['asx.wav', 'playlist', '<asx version="3.0"><entry><ref href="canary.wav"/></entry></asx>'],
    ['page.mp3', 'not-audio', '<!doctype html><html><body>hello</body></html>'],
    ['drawing.wav', 'not-audio', '<svg xmlns="http://www.w3.org/2000/svg"><script>alert(1)</script></svg>'],
    ['text.wav', 'not-audio', 'a line about nothing\n'.repeat(500)],
    ['archive.flac', 'not-audio', Buffer.concat([Buffer.from('PK\x03\x04'), Buffer.alloc(5000, 7)])],
    ['program.ogg', 'not-audio', Buffer.concat([Buffer.from('\x7fELF'), Buffer.alloc(5000, 1)])],
    ['notes.mp3', 'unsupported', Buffer.concat([Buffer.from('MThd'), Buffer.alloc(500, 1)])],
    ['zeros.wav', 'not-audio', Buffer.alloc(50_000)],
    ['noise.mp3', 'not-audio', Buffer.from(Array.from({ length: 30_000 }, (_, at) => (at * at * 7919 + at * 31) & 255))]
  ])('refuses %s as %s and leaves nothing behind', async (name, code, content) => {
    await expectFault(write(name, content), code)
  })

  it('refuses lists that point at a recording beside them, in every disguise', async () => {
    const canary = makeRecording(folder, 'canary.wav', pluckedBass(9))
    for (const name of ['c.mp3', 'c.wav', 'c.flac', 'c.m4a', 'c.webm', 'c.ogg', 'c.aiff', 'c.aac', 'c.txt']) {
      await expectFault(write(name, `ffconcat version 1.0\nfile '${canary}'\n`), 'playlist')
      await expectFault(
        write(name, `#EXTM3U\n#EXT-X-TARGETDURATION:9\n#EXTINF:9,\nfile://${canary}\n#EXT-X-ENDLIST\n`),
        'playlist'
      )
    }
  })

  it('refuses a zip archive that holds a recording', async () => {
    const sound = readFileSync(makeRecording(folder, 'inside.wav', pluckedBass(1)))
    const name = Buffer.from('inside.wav')
    const local = Buffer.alloc(30)
    local.writeUInt32LE(0x04034b50, 0)
    local.writeUInt32LE(sound.length, 18)
    local.writeUInt32LE(sound.length, 22)
    local.writeUInt16LE(name.length, 26)
    await expectFault(write('zip.mp3', Buffer.concat([local, name, sound])), 'not-audio')
  })

  it.each(['mp4', 'webm', 'mkv', 'mov'])('refuses a %s film even when it is called .wav', async (kind) => {
    const film = join(folder, `film.${kind}`)
    ffmpeg(...pluckedBass(1), '-f', 'lavfi', '-i', 'testsrc=s=64x64:d=1', film)
    const disguised = write('film.wav', readFileSync(film))
    await expectFault(disguised, 'video')
  })

  it('refuses a film of a kind it does not open', async () => {
    const film = join(folder, 'film.avi')
    ffmpeg(...pluckedBass(1), '-f', 'lavfi', '-i', 'testsrc=s=64x64:d=1', film)
    await expectFault(film, 'video')
  })

  it('refuses a codec off the list', async () => {
    await expectFault(
      makeRecording(folder, 'old.wav', pluckedBass(1), '-c:a', 'adpcm_swf', '-f', 'wav', '-ar', '44100'),
      'unsupported'
    )
  })

  it.each(['wav', 'm4a'])('refuses a %s that was cut off on its way', async (kind) => {
    const whole = readFileSync(makeRecording(folder, `whole.${kind}`, pluckedBass(5)))
    await expectFault(write(`cut.${kind}`, whole.subarray(0, whole.length / 2)), 'truncated')
  })

  it('refuses what is longer than the limit, also when the header hides the length', async () => {
    const flac = makeRecording(folder, 'long.flac', ['-f', 'lavfi', '-i', 'anullsrc=r=48000:cl=mono:d=130'])
    expect(statSync(flac).size).toBeLessThan(1_000_000)
    const limits = { maxDurationSec: 120 }
    expect(await probeRecording(flac, { limits })).toEqual({ ok: false, error: mediaFault('too-long') })
    const hidden = write(
      'hidden.webm',
      ffmpeg('-i', flac, '-c:a', 'libopus', '-b:a', '8k', '-f', 'webm', '-live', '1', 'pipe:1')
    )
    expect(await probeRecording(hidden, { limits })).toEqual({ ok: false, error: mediaFault('too-long') })
    expect(workFolders()).toEqual([])
  })

  it('throws when it is stopped, and leaves nothing', async () => {
    const path = makeRecording(folder, 'stop.wav', pluckedBass(1))
    await expect(probeRecording(path, { signal: AbortSignal.abort(new Error('stopped')) })).rejects.toThrow('stopped')
    expect(workFolders()).toEqual([])
  })
})

describe('the disguises', () => {
  it('would fool a plain ffmpeg, so that refusing them is worth a test', () => {
    const canary = makeRecording(folder, 'bait.wav', pluckedBass(3))
    const list = write('bait.mp3', `ffconcat version 1.0\nfile '${canary.split('/').at(-1)}'\n`)
    const read = ffmpeg('-protocol_whitelist', 'file,pipe', '-i', list, '-f', 'f32le', 'pipe:1')
    expect(read.length).toBe(3 * 44_100 * 2 * 4)
  })
})

describe('mediaFault', () => {
  it('speaks to a person: whole sentences without the words of programs', () => {
    for (const code of mediaFaultCodes) {
      expect(mediaFault(code).sentence).toMatch(/^[A-Z][^:]+\. Please [^:]+\.$|^[A-Z].*\.$/)
      expect(mediaFault(code).sentence).not.toMatch(/ffmpeg|ffprobe|codec|stream|exit|error|null/i)
    }
  })
})
