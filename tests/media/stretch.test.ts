// The command that stretches a recording, measured by aubio (Debian's aubio-tools), which knows nothing of our core.
import { spawnSync } from 'node:child_process'
import { existsSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs'
import { join, resolve } from 'node:path'
import { describe, expect, it } from 'vitest'
import { onsetsByAubio, pitchByAubio } from '../support/aubio.ts'
import { decode, ffmpeg, ffprobe, makeRecording, pluckedBass, scratchFolder } from '../support/media.ts'

const cli = resolve(import.meta.dirname, '../../server/setup/cli.mjs')

const stretch = (...args: string[]) => {
  const { status, stdout, stderr } = spawnSync(process.execPath, [cli, 'stretch', ...args], { encoding: 'utf8' })
  return { status, stdout, stderr }
}
const silent = { status: 0, stdout: '', stderr: '' }

const tone = (hertz: number, sec: number) => [
  '-f',
  'lavfi',
  '-i',
  `aevalsrc='0.4*sin(2*PI*${hertz}*t)':s=44100:d=${sec}`
]

describe('npm run stretch', () => {
  it('leaves every sample as it was at speed 1 and unshifted, at the depth of the source', () => {
    const folder = scratchFolder()
    const out = join(folder, 'out.wav')
    const sources = [
      { name: 'a.flac', options: ['-sample_fmt', 's32'], codec: 'pcm_s24le' },
      { name: 'b.mp3', options: ['-b:a', '128k'], codec: 'pcm_s16le' }
    ]
    for (const { name, options, codec } of sources) {
      const source = makeRecording(folder, name, pluckedBass(1.37), ...options)
      expect(stretch(source, out)).toEqual(silent)
      const raw = (path: string) => ffmpeg('-i', path, '-c:a', codec, '-f', codec.slice(4), 'pipe:1')
      expect(raw(out).equals(raw(source)), name).toBe(true)
      expect(ffprobe(out, 'stream=codec_name')).toBe(codec)
    }
  })

  it('puts pitch and attacks where they were asked for', () => {
    const folder = scratchFolder()
    const out = join(folder, 'out.wav')
    const steady = makeRecording(folder, 'steady.wav', tone(110, 4))
    expect(stretch(steady, out, '--speed', '0.5', '--semitones=7', '--cents', '-30')).toEqual(silent)
    const wanted = 110 * 2 ** (6.7 / 12)
    // aubio reads a steady tone of a known pitch off by up to a cent: its own reading of that tone is the measure.
    const reading = pitchByAubio(makeRecording(folder, 'wanted.wav', tone(wanted, 4)))
    expect(Math.abs(1200 * Math.log2(pitchByAubio(out) / reading))).toBeLessThan(1)

    const struck = makeRecording(folder, 'struck.wav', [
      '-f',
      'lavfi',
      '-i',
      `aevalsrc='if(lt(t,0.3),0,0.5*exp(-9*mod(t-0.3,0.5))*sin(2*PI*330*mod(t-0.3,0.5)))':s=44100:d=4.3`
    ])
    const before = onsetsByAubio(struck)
    expect(before).toHaveLength(8)
    expect(stretch(struck, out, '--speed', '0.5')).toEqual(silent)
    const after = onsetsByAubio(out)
    expect(after).toHaveLength(8)
    after.forEach((sec, index) => expect(Math.abs(sec - (before[index] ?? NaN) * 2)).toBeLessThan(0.01))
    expect(decode(out)).toHaveLength(Math.round(4.3 * 44_100) * 2)
  })

  it('says in one line what is wrong, and leaves what stood at the target', () => {
    const folder = scratchFolder()
    const text = join(folder, 'text.wav')
    const out = join(folder, 'out.wav')
    writeFileSync(text, 'no sound at all')
    writeFileSync(out, 'precious')
    for (const args of [
      [text, out],
      [join(folder, 'missing.wav'), out],
      [text, out, '--speed', '1.6'],
      [text, out, '--cents']
    ]) {
      const { status, stdout, stderr } = stretch(...args)
      expect({ status, stdout, lines: stderr.trim().split('\n').length }).toEqual({ status: 2, stdout: '', lines: 1 })
    }
    expect(readFileSync(out, 'utf8')).toBe('precious')
    expect(readdirSync(folder).sort()).toEqual(['out.wav', 'text.wav'])
  })

  it('mixes many channels down to two and never clips', () => {
    const folder = scratchFolder()
    const loud = ['-f', 'lavfi', '-i', `aevalsrc='1.6*sin(2*PI*98*t)|1.6*sin(2*PI*98*t)|0':s=48000:d=1:c=3.0`]
    const source = makeRecording(folder, 'loud.wav', loud, '-c:a', 'pcm_f32le')
    const out = join(folder, 'out.wav')
    const { status, stderr } = stretch(source, out, '--speed', '0.8')
    expect(status).toBe(0)
    expect(stderr).toContain('1.0 dB quieter')
    const samples = decode(out)
    expect(ffprobe(out, 'stream=channels,sample_rate')).toBe('48000\n2')
    expect(samples).toHaveLength(2 * 60_000)
    expect(samples.reduce((most, sample) => Math.max(most, Math.abs(sample)), 0)).toBeLessThan(1)
    expect(existsSync(out) && statSync(out).size).toBe(44 + 60_000 * 2 * 3)
  })
})
