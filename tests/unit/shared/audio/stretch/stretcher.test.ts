// The core on tones and plucks of our own. What it is held to besides: aubio's reading of its output (tests/media/stretch),
// and the peers it is measured beside (tests/bench).
import { describe, expect, it } from 'vitest'
import { memorySource, pitchRatio, stretchSamples } from '@shared/audio/stretch/offline'
import { createOnsetFinder } from '@shared/audio/stretch/onsets'
import { createStretcher } from '@shared/audio/stretch/stretcher'
import { measureNotes } from '../../../../bench/stretch/attack-measures'
import { mixMaterial, pluckMaterial, toneMaterial } from '../../../../bench/stretch/material'
import { measureTone } from '../../../../bench/stretch/tone-measures'

const rate = 44_100
const part = (channel: Float32Array | undefined, fromSec: number, toSec: number) =>
  (channel ?? new Float32Array()).subarray(Math.round(fromSec * rate), Math.round(toSec * rate))

describe('stretchSamples', () => {
  it('hands the recording on bit for bit at full speed and pitch', () => {
    const { sound } = mixMaterial(true)
    const short = sound.channels.map((channel) => channel.subarray(0, rate))
    expect(stretchSamples(short, sound.sampleRate, { speed: 1, semitones: 0 })).toEqual(
      short.map((channel) => Float32Array.from(channel))
    )
  })

  it.each([
    [31, 0.5, 0, 0],
    [55, 1, 24, 0],
    [110, 1.5, 5, -37],
    [41, 1.2, -12, 0]
  ])(
    'keeps a tone of %d Hz in tune and level at speed %d, %d semitones, %d cents',
    (hertz, speed, semitones, cents) => {
      const { sound, tone } = toneMaterial(hertz)
      const short = sound.channels.map((channel) => channel.subarray(0, Math.round(1.5 * speed * rate + 0.5 * rate)))
      const [out] = stretchSamples(short, sound.sampleRate, { speed, semitones, cents })
      const frames = out?.length ?? 0
      const span = { from: Math.round(frames * 0.2), to: Math.round(frames * 0.85) }
      const expected = hertz * pitchRatio(semitones + cents / 100)
      const measured = measureTone(out ?? [], sound.sampleRate, expected, tone?.partials ?? 0, span)
      expect(Math.abs(measured.cents)).toBeLessThan(0.3)
      expect(measured.ripple).toBeLessThan(0.1)
      expect(measured.offPartials).toBeLessThan(-40)
    }
  )

  it.each([
    [73, 0.5],
    [98, 0.25]
  ])('keeps every attack of plucks at %d Hz once, in place and as quick at speed %d', (hertz, speed) => {
    const { sound, attacks = [] } = pluckMaterial({ hertz })
    const seconds = 2.5
    const source = part(sound.channels[0], 0, seconds)
    const heard = attacks.filter(({ sec }) => sec < seconds - 0.3)
    const [out = new Float32Array()] = stretchSamples([source], rate, { speed, semitones: 0 })
    const options = { fineSec: 0.002, noiseHz: 4500 }
    const before = measureNotes(source, rate, heard, 1, speed, options)
    const after = measureNotes(
      out,
      rate,
      heard.map((attack) => ({ ...attack, sec: attack.sec / speed })),
      1 / speed,
      1,
      options
    )
    expect(heard.length).toBeGreaterThan(4)
    after.forEach((note, i) => {
      expect(Math.abs(note.noisePlace - (before[i]?.noisePlace ?? NaN))).toBeLessThan(0.003)
      expect(note.rise).toBeLessThan(1.3 * (before[i]?.rise ?? NaN))
      expect(note.rises).toBeLessThanOrEqual(before[i]?.rises ?? NaN)
    })
  })
})

describe('createOnsetFinder', () => {
  it('finds each pluck once, within two milliseconds, and nothing in a steady low tone', () => {
    const { sound, attacks = [] } = pluckMaterial({ hertz: 73 })
    const finder = createOnsetFinder(memorySource([part(sound.channels[0], 0, 4)], rate))
    const found = finder.between(0, Math.round(3.7 * rate))?.filter(({ isEnd }) => !isEnd) ?? []
    const due = attacks.filter(({ sec }) => sec < 3.7)
    expect(found).toHaveLength(due.length)
    due.forEach(({ sec }, i) => expect(Math.abs((found[i]?.anchor ?? NaN) / rate - sec)).toBeLessThan(0.002))
    const tone = toneMaterial(31).sound
    const steady = createOnsetFinder(memorySource(tone.channels, tone.sampleRate))
    expect(steady.between(Math.round(0.5 * rate), Math.round(2 * rate))).toEqual([])
  })

  it('comes to the same whatever was asked before', () => {
    const { sound } = pluckMaterial({ hertz: 98 })
    const source = memorySource([part(sound.channels[0], 0, 3)], rate)
    const [late, early] = [createOnsetFinder(source), createOnsetFinder(source)]
    while (!early.prepare(0, rate)) early.prepare(0, rate)
    early.between(0, rate)
    expect(early.between(rate, 2 * rate)).toEqual(late.between(rate, 2 * rate))
  })
})

describe('createStretcher', () => {
  const source = memorySource([part(pluckMaterial({ hertz: 73 }).sound.channels[0], 0, 3)], rate)
  const rendered = (blocks: readonly number[], frames: number) => {
    const stretcher = createStretcher(source)
    stretcher.schedule({ outFrame: 0, sourceFrame: 0, speed: 0.6, ratio: 1 })
    // Four passes of a loop with an odd length, one leg each.
    const [start, end] = [20_000, 31_337.5]
    let at = end / 0.6
    for (let pass = 0; pass < 4; pass++, at += (end - start) / 0.6)
      stretcher.schedule({ outFrame: at, sourceFrame: start, speed: 0.6, ratio: 1 })
    const out = [new Float32Array(frames)]
    for (let done = 0, i = 0; done < frames; i++) {
      const count = Math.min(blocks[i % blocks.length] ?? 128, frames - done)
      expect(stretcher.render(out, done, count)).toBe(count)
      done += count
    }
    return out[0] ?? new Float32Array()
  }

  it('renders the same however the frames are asked for, and turns its loop on the frame', () => {
    const frames = 100_000
    const whole = rendered([frames], frames)
    expect(rendered([128], frames)).toEqual(whole)
    const period = Math.round((31_337.5 - 20_000) / 0.6)
    // From the second pass on each is the one before, once its start is past the cut.
    const first = Math.round(31_337.5 / 0.6) + period
    const [one, two] = [whole.subarray(first, first + 9000), whole.subarray(first + period, first + period + 9000)]
    const difference = Math.sqrt(one.reduce((sum, value, i) => sum + (value - (two[i] ?? 0)) ** 2, 0))
    expect(difference / Math.sqrt(one.reduce((sum, value) => sum + value ** 2, 0))).toBeLessThan(0.05)
  })

  it('says where the take is by its legs, fractions and all', () => {
    const stretcher = createStretcher(source)
    stretcher.schedule({ outFrame: 0, sourceFrame: 0.25, speed: 0.5, ratio: 1 })
    stretcher.schedule({ outFrame: 1000, sourceFrame: 7.5, speed: 1, ratio: 1 })
    expect(stretcher.sourceFrameAt(500)).toBe(250.25)
    expect(stretcher.sourceFrameAt(1010)).toBe(17.5)
  })

  it('waits where the source has nothing yet, and goes on when it has', () => {
    let isThere = false
    const stretcher = createStretcher({ ...source, read: (from, into) => isThere && source.read(from, into) })
    stretcher.schedule({ outFrame: 0, sourceFrame: 0, speed: 0.5, ratio: 2 })
    const out = [new Float32Array(1000)]
    expect(stretcher.render(out, 0, 1000)).toBe(0)
    isThere = true
    expect(stretcher.render(out, 0, 1000)).toBe(1000)
  })
})
