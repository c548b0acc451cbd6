// A clip is what the desk plays: held against the stretcher alone, sample by sample, and against its own plan.
import { describe, expect, it } from 'vitest'
import { clipSec, planClip } from '@shared/audio/clips/plan-clip'
import { renderClip } from '@shared/audio/clips/render-clip'
import { plainAids } from '@shared/audio/listening'
import { memorySource } from '@shared/audio/stretch/offline'
import { createStretcher } from '@shared/audio/stretch/stretcher'
import type { ClipSettings } from '@shared/contracts/clips'
import { clipFileName, clipWords } from '@shared/practice/clip-words'
import { createBarMap } from '@shared/timing/bar-map'
import { COMMON_METER } from '@shared/timing/meter'
import { rational } from '@shared/timing/rational'

const sampleRate = 8000
/** 120 beats a minute from the first second on. */
const map = createBarMap({
  anchors: [
    { id: 'a', sec: 1, position: { bar: 1, beat: rational(1) } },
    { id: 'b', sec: 9, position: { bar: 5, beat: rational(1) } }
  ],
  meters: [{ bar: 1, meter: COMMON_METER }],
  marks: []
})
const settings = (more: Partial<ClipSettings> = {}): ClipSettings => ({
  span: { startSec: 3, endSec: 5 },
  rate: 0.5,
  semitones: 0,
  aids: plainAids,
  click: null,
  clickLevel: 1,
  countIn: 'none',
  format: 'wav',
  ...more
})
const everyBeat = { pattern: 'every beat', subdivision: 1, silence: null } as const

const tone = Float32Array.from(
  { length: 10 * sampleRate },
  (_, i) => 0.3 * Math.sin((2 * Math.PI * 110 * i) / sampleRate)
)
const render = (one: ClipSettings, sourceStart = 0, gainDb = 0, samples = tone): Float32Array => {
  const plan = planClip(one, map, sampleRate)
  const source = memorySource([samples.subarray(sourceStart)], sampleRate)
  const clip = new Float32Array(plan.totalFrames)
  let at = 0
  for (const [block] of renderClip({ plan, aids: one.aids, gainDb, clickLevel: one.clickLevel, source, sourceStart })) {
    clip.set(block ?? [], at)
    at += block?.length ?? 0
  }
  expect(at).toBe(plan.totalFrames)
  return clip
}

describe('the plan of a clip', () => {
  it('counts in at the speed of the passage and clicks on its beats', () => {
    const plan = planClip(settings({ click: everyBeat, countIn: 'one bar' }), map, sampleRate)
    expect(plan.leadFrames).toBe(4 * sampleRate)
    expect(plan.totalFrames).toBe(8 * sampleRate)
    expect(plan.clicks.map(({ frame }) => frame / sampleRate)).toEqual([0, 1, 2, 3, 4, 5, 6, 7])
    expect(plan.clicks.map(({ accent }) => accent)).toEqual([2, 1, 1, 1, 2, 1, 1, 1])
    expect(clipSec(settings({ countIn: 'one bar' }), map)).toBe(8)
  })

  it('has neither without bars', () => {
    const plan = planClip(settings({ click: everyBeat, countIn: 'two bars' }), null, sampleRate)
    expect([plan.leadFrames, plan.totalFrames, plan.clicks]).toEqual([0, 4 * sampleRate, []])
  })
})

describe('the sound of a clip', () => {
  it('is that of the stretcher, sample by sample, but for its two edges', () => {
    const one = settings({ semitones: 7 })
    const clip = render(one)
    const alone = createStretcher(memorySource([tone], sampleRate))
    const plan = planClip(one, map, sampleRate)
    alone.schedule({ outFrame: 0, sourceFrame: plan.startFrame, speed: 0.5, ratio: plan.ratio })
    const wanted = new Float32Array(plan.totalFrames)
    alone.render([wanted], 0, wanted.length)
    const [from, to] = [0.002 * sampleRate, plan.totalFrames - 0.01 * sampleRate]
    expect(clip.subarray(from, to)).toEqual(wanted.subarray(from, to))
    expect(Math.abs(clip[0] ?? 1)).toBeLessThan(0.02)
    expect(Math.abs(clip.at(-1) ?? 1)).toBeLessThan(0.02)
  })

  it('is the take itself at full speed, wherever the part that was read begins', () => {
    const one = settings({ rate: 1 })
    const clip = render(one, 17_003)
    expect(clip.subarray(100, 15_000)).toEqual(tone.subarray(24_100, 39_000))
  })

  it('waits in silence through the count-in, with clicks on it and along the passage', () => {
    const silence = new Float32Array(tone.length)
    const clip = render(settings({ click: everyBeat, countIn: 'one bar' }), 0, 0, silence)
    const isLoud = (sec: number) =>
      clip.subarray(sec * sampleRate, (sec + 0.03) * sampleRate).some((sample) => Math.abs(sample) > 0.1)
    for (const beat of [0, 1, 2, 3, 4, 5, 6, 7])
      expect([beat, isLoud(beat), isLoud(beat + 0.5)]).toEqual([beat, true, false])
    const quiet = render(settings({ countIn: 'one bar', clickLevel: 0 }))
    expect(quiet.subarray(0, 4 * sampleRate - 1).every((sample) => sample === 0)).toBe(true)
    expect(quiet.subarray(4 * sampleRate).some((sample) => sample > 0.25)).toBe(true)
  })

  it('follows the loudness gain and never passes full scale', () => {
    const clip = render(settings({ rate: 1 }), 0, 18)
    const loudest = clip.reduce((most, sample) => Math.max(most, Math.abs(sample)), 0)
    expect(loudest).toBeGreaterThan(0.7)
    expect(loudest).toBeLessThan(0.9)
  })
})

describe('the words of a clip', () => {
  it('say what is in it', () => {
    const full = settings({
      semitones: -2,
      aids: { lowFocus: { isOn: true, topHz: 250 }, channel: 'left', isOctaveUp: true, cents: -15 },
      click: { ...everyBeat, pattern: '2 and 4' },
      countIn: 'one bar'
    })
    expect(clipWords(full, map)).toEqual([
      '50 % speed',
      '+10 semitones and −15 cents',
      'low focus to 250 Hz',
      'left side',
      'click: 2 and 4',
      'one bar count-in',
      '0:08.0 long'
    ])
    expect(clipWords(settings({ rate: 1 }), null)).toEqual(['full speed', '0:02.0 long'])
  })

  it('call the file by its take and place', () => {
    const named = { title: 'Slack Tide', place: null, map }
    expect(clipFileName(named, settings())).toBe('Slack Tide, bar 2, 50 %.wav')
    expect(clipFileName(named, settings({ span: { startSec: 1, endSec: 5 }, rate: 1, format: 'm4a' }))).toBe(
      'Slack Tide, bars 1 to 2.m4a'
    )
    expect(clipFileName({ ...named, map: null }, settings({ rate: 1 }))).toBe('Slack Tide, 0.03.0 to 0.05.0.wav')
    expect(clipFileName({ ...named, place: 'pick-up' }, settings({ rate: 1 }))).toBe('Slack Tide, pick-up.wav')
  })
})
