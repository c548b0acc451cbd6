// The whole chain offline, by its samples.
import { describe, expect, it } from 'vitest'
import { plainAids } from '@shared/audio/listening'
import { createClickVoice } from '@shared/audio/click-voice'
import { createPageStore } from '@shared/audio/playback/page-store'
import type { PlanCommand, PlanLoop, PlanPart } from '@shared/audio/playback/plan-types'
import { createPlayback } from '@shared/audio/playback/render'

const rate = 48_000
const pageFrames = rate
const seconds = 12
const toneHz = 220
const plain = { rate: 1, trim: 1, ratio: 1, loop: null }
const loop: PlanLoop = { startFrame: 2 * rate, endFrame: 2.5 * rate, fadeFrames: 0, restFrames: 0, ladder: null }

type Wave = (frame: number) => number
const tone: Wave = (frame) => 0.3 * Math.sin((2 * Math.PI * toneHz * frame) / rate)
/** A ramp that tells the place in the take by its value. */
const placeWave: Wave = (frame) => frame / (seconds * rate) / 2
/** One short knock every quarter second. */
const knocks: Wave = (frame) => {
  const since = frame % (rate / 4)
  return since < 400 ? 0.5 * Math.exp(-since / 60) * Math.sin((2 * Math.PI * 1500 * since) / rate) : 0
}

const makePage = (wave: Wave, index: number) => ({
  firstFrame: index * pageFrames,
  channels: [0, 1].map(() => Float32Array.from({ length: pageFrames }, (_, n) => wave(index * pageFrames + n)))
})
const make = (wave: Wave, pages = Array.from({ length: seconds }, (_, n) => n)) => {
  const source = createPageStore({ channels: 2, sampleRate: rate, frames: seconds * rate })
  for (const index of pages) source.put(index, makePage(wave, index))
  const playback = createPlayback({ source, settings: plain, sourceFrame: 0 })
  playback.setVolume(1)
  const begun: PlanPart[] = []
  const render = (frames: number): Float32Array => {
    const sound = new Float32Array(frames)
    const block = [new Float32Array(128), new Float32Array(128)]
    for (let done = 0; done < frames; done += 128) {
      playback.process(block, 128)
      sound.set(block[0]?.subarray(0, Math.min(128, frames - done)) ?? [], done)
      begun.push(...(playback.news()?.begun ?? []))
    }
    return sound
  }
  return { source, playback, render, begun, late: playback.delayFrames }
}
const give = (made: ReturnType<typeof make>, ...commands: PlanCommand[]) =>
  commands.map((command) => made.playback.command(command))

const steepest = (sound: Float32Array): number =>
  sound.reduce((most, value, n) => Math.max(most, n > 0 ? Math.abs(value - (sound[n - 1] ?? 0)) : 0), 0)
const loudest = (sound: Float32Array): number => sound.reduce((most, value) => Math.max(most, Math.abs(value)), 0)
/** A sine of this height rises by no more than this from one sample to the next. */
const toneSlope = 0.3 * ((2 * Math.PI * toneHz) / rate)

// Stretching takes its time on a busy machine.
describe('rendering a take', { timeout: 30_000 }, () => {
  it('passes the samples on bit for bit at full speed and pitch', () => {
    const made = make(placeWave)
    const [at = 0] = give(made, { kind: 'play' })
    const sound = made.render(1.5 * rate)
    const heard = sound.subarray(at + made.late, at + made.late + rate)
    expect(heard.every((value, n) => value === Math.fround(placeWave(n)))).toBe(true)
  })

  it('comes round to the sample in every pass of a loop', () => {
    const made = make(placeWave)
    give(made, { kind: 'loop', loop }, { kind: 'play' })
    const sound = made.render(6 * rate)
    const first = sound.findIndex((value) => Math.abs(value - placeWave(loop.startFrame)) < 1e-7)
    for (let pass = 1; pass < 10; pass += 1)
      for (const n of [0, 1, 5000, 23_000])
        expect(sound[first + pass * (rate / 2) + n]).toBe(Math.fround(placeWave(loop.startFrame + n)))
  })

  it.each([1, 0.5, 0.73])(
    'makes no click at turns, seeks, pauses and changes of speed, at %f of the speed',
    (speed) => {
      const made = make(tone)
      give(made, { kind: 'rate', rate: speed }, { kind: 'loop', loop }, { kind: 'play' })
      const parts = [made.render(1.3 * rate)]
      const commands: PlanCommand[] = [
        { kind: 'seek', sourceFrame: 4.1234 * rate },
        { kind: 'pause' },
        { kind: 'play' },
        { kind: 'rate', rate: 1 },
        { kind: 'rate', rate: speed },
        { kind: 'loop', loop: { ...loop, startFrame: 5 * rate, endFrame: 6.1 * rate } }
      ]
      for (const command of commands) {
        give(made, command)
        parts.push(made.render(0.25 * rate))
      }
      for (const sound of parts) {
        expect(steepest(sound)).toBeLessThan(toneSlope * 2.5)
        expect(loudest(sound)).toBeLessThan(0.3 * 1.1)
      }
    }
  )

  it('falls to nothing and rises again where a loop asks for fades, and rests between', () => {
    const made = make(() => 0.25)
    const [at = 0] = give(
      made,
      { kind: 'loop', loop: { ...loop, fadeFrames: 4800, restFrames: rate / 4 } },
      { kind: 'play' }
    ).slice(-1)
    const sound = made.render(3 * rate).subarray(at + made.late)
    expect(sound[rate / 2 - 2400]).toBeCloseTo(0.125, 2)
    expect(loudest(sound.subarray(rate / 2 + 10, 0.75 * rate - 200))).toBeLessThan(1e-3)
    expect(sound[0.75 * rate + 2400]).toBeCloseTo(0.125, 2)
    expect(sound[rate]).toBeCloseTo(0.25, 5)
    expect(steepest(sound)).toBeLessThan(0.002)
  })

  it('strikes clicks on their frame in every pass, once each', () => {
    const made = make(() => 0)
    const clicks = [2, 2.25, 2.5].map((sec) => ({ frame: Math.round(sec * rate), accent: 1 as const }))
    made.playback.setClicks(clicks, 1)
    const speed = 0.7
    const [, , at = 0] = give(made, { kind: 'rate', rate: speed }, { kind: 'loop', loop }, { kind: 'play' })
    const sound = made.render(4 * rate)
    const { lengthFrames } = createClickVoice(rate)
    const onsets: number[] = []
    sound.forEach((value, n) => {
      if (value !== 0 && n > (onsets.at(-1) ?? -Infinity) + lengthFrames) onsets.push(n)
    })
    const expected = Array.from({ length: onsets.length }, (_, n) => at + made.late + (n * 0.25 * rate) / speed)
    expect(onsets.length).toBe(12)
    // A strike's first sample is 0, and a turn falls on the whole frame after its exact moment.
    onsets.forEach((frame, n) => expect(Math.abs(frame - 1 - (expected[n] ?? 0))).toBeLessThan(1))
  })

  it('counts in before the start, at the frames asked for', () => {
    const made = make(knocks)
    const counts = [-rate, -rate / 2].map((atFrame) => ({ atFrame, accent: 2 as const }))
    const [at = 0] = give(made, { kind: 'play', countFrames: rate, counts })
    const sound = made.render(3 * rate)
    const begins = [0, 0.5, 1].map((sec) => at + made.late + sec * rate)
    for (const frame of begins) {
      expect(loudest(sound.subarray(frame - 400, frame))).toBeLessThan(1e-4)
      expect(loudest(sound.subarray(frame, frame + 200))).toBeGreaterThan(0.1)
    }
  })

  it.each([1, 0.5, 1.25])('acts at the frame that was asked for, at %f of the speed', (speed) => {
    const made = make(knocks)
    give(made, { kind: 'rate', rate: speed }, { kind: 'seek', sourceFrame: 3 * rate })
    made.playback.command({ kind: 'play' }, 20_011)
    made.playback.command({ kind: 'seek', sourceFrame: 7 * rate }, 70_022)
    const sound = made.render(2 * rate)
    for (const frame of [20_011, 70_022]) {
      const onset = sound.subarray(frame + made.late - 200).findIndex((value) => Math.abs(value) > 0.05) - 200
      expect(Math.abs(onset)).toBeLessThan(24)
    }
    expect(made.begun.map(({ outFrame, mode }) => [mode, outFrame]).slice(-2)).toEqual([
      ['playing', 20_011],
      ['playing', 70_022]
    ])
  })

  it.each([1, 0.5])('stays in its place when the device leaves frames out, at %f of the speed', (speed) => {
    const made = make(knocks)
    give(made, { kind: 'rate', rate: speed })
    made.playback.command({ kind: 'play' }, 2000)
    made.render(128 * 200)
    made.playback.skip(5555)
    const from = made.playback.frame
    const sound = made.render(rate)
    const onset = sound.findIndex((value, n) => n > 4000 && Math.abs(value) > 0.05)
    const place = (from + onset - made.late - 2000) * speed
    expect(Math.abs(place - Math.round(place / (rate / 4)) * (rate / 4))).toBeLessThan(24)
  })

  it('makes up for a start and a jump that were asked for too late', () => {
    const made = make(placeWave)
    made.render(rate)
    made.playback.command({ kind: 'seek', sourceFrame: 3 * rate }, rate / 2)
    made.playback.command({ kind: 'play' }, rate / 2)
    const started = made.render(rate)
    expect(started[rate / 4]).toBe(Math.fround(placeWave(3 * rate + 0.75 * rate - made.late)))
    made.playback.command({ kind: 'seek', sourceFrame: 8 * rate }, 1.5 * rate)
    expect(made.render(rate / 2)[rate / 4]).toBe(Math.fround(placeWave(8 * rate + 0.75 * rate - made.late)))
  })

  it('falls silent without a click when pieces are missing, and goes on at the same place when they come', () => {
    const made = make(tone, [0, 1, 2, 3])
    give(made, { kind: 'seek', sourceFrame: 2.5 * rate }, { kind: 'play' })
    const before = made.render(3 * rate)
    expect(loudest(before.subarray(2 * rate))).toBe(0)
    const waiting = made.begun.at(-1)
    expect(waiting?.mode).toBe('waiting')
    for (const index of [4, 5]) made.source.put(index, makePage(tone, index))
    const after = made.render(rate)
    expect(made.begun.at(-1)).toMatchObject({ mode: 'playing', sourceFrame: waiting?.sourceFrame })
    expect(loudest(after)).toBeGreaterThan(0.25)
    for (const sound of [before, after]) expect(steepest(sound)).toBeLessThan(toneSlope * 1.6)
  })

  it('waits silently where nothing is there at all, and plays a place sought meanwhile', () => {
    const made = make(tone, [8, 9, 10])
    give(made, { kind: 'play' })
    expect(loudest(made.render(rate / 2))).toBe(0)
    expect(made.begun.at(-1)?.mode).toBe('waiting')
    give(made, { kind: 'seek', sourceFrame: 9 * rate })
    expect(loudest(made.render(rate / 2))).toBeGreaterThan(0.25)
  })

  it('never passes full scale, however loud volume, gain and click are', () => {
    const made = make((frame) => 3 * tone(frame))
    made.playback.setAids(plainAids, 18)
    made.playback.setClicks([{ frame: rate / 2, accent: 2 }], 1)
    give(made, { kind: 'play' })
    expect(loudest(made.render(rate))).toBeLessThan(1)
  })

  it('brings volume and loudness gain in slowly', () => {
    const made = make(tone)
    give(made, { kind: 'play' })
    made.render(rate)
    made.playback.setVolume(0.2)
    made.playback.setAids({ ...plainAids, channel: 'left', lowFocus: { isOn: true, topHz: 400 } }, -6)
    expect(steepest(made.render(rate))).toBeLessThan(toneSlope * 1.5)
  })
})
