import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { chooseMime } from '@client/features/recorder/mime'
import { createLevelMeter, holdMs, peakOf, shareOfPeak, tooLoudMs } from '@client/transport/microphone/level'
import { missingForRecording, obeyedWords } from '@client/transport/microphone/microphone'

const off = { echoCancellation: false, noiseSuppression: false, autoGainControl: false }

describe('obeyedWords', () => {
  it('says that the sound is left as it is, in how many channels', () => {
    expect(obeyedWords({ ...off, channelCount: 2, sampleRate: 44_100 })).toEqual({
      hasObeyed: true,
      words:
        'The sound is left as it is: no echo cancelling, noise suppression or automatic gain. It comes in stereo, 44.1 kHz.'
    })
  })
  it('names what the browser insists on', () => {
    const { hasObeyed, words } = obeyedWords({ ...off, noiseSuppression: true, autoGainControl: true })
    expect(hasObeyed).toBe(false)
    expect(words).toMatch(/insists on noise suppression and automatic gain/)
  })
  it('does not claim what the browser does not tell', () => {
    expect(obeyedWords({ echoCancellation: false }).words).toMatch(
      /does not say whether noise suppression and automatic/
    )
  })
})

describe('missingForRecording', () => {
  it('says what is missing: a safe origin first, then the browser', () => {
    expect(missingForRecording({ isSecureContext: false, mediaDevices: undefined, recorder: {} })).toMatch(/https/)
    expect(missingForRecording({ isSecureContext: true, mediaDevices: {}, recorder: undefined })).toMatch(
      /MediaRecorder/
    )
    expect(missingForRecording({ isSecureContext: true, mediaDevices: {}, recorder: {} })).toBeNull()
  })
})

describe('chooseMime', () => {
  it('takes Opus where there is Opus, else what there is, else the choice of the browser', () => {
    expect(chooseMime(() => true)).toBe('audio/webm;codecs=opus')
    expect(chooseMime((mime) => mime === 'audio/mp4')).toBe('audio/mp4')
    expect(chooseMime(() => false)).toBe('')
  })
})

describe('level', () => {
  it('finds the highest peak on either side of zero', () => {
    expect(peakOf(new Float32Array([0.1, -0.5, 0.25]))).toBe(0.5)
  })
  it('rises with the peak, from the floor to full scale', () => {
    const peak = fc.double({ min: 0, max: 1.2, noNaN: true })
    fc.assert(
      fc.property(peak, peak, (a, b) => {
        const [low, high] = [Math.min(a, b), Math.max(a, b)]
        expect(shareOfPeak(low)).toBeLessThanOrEqual(shareOfPeak(high))
        expect(shareOfPeak(high)).toBeGreaterThanOrEqual(0)
        expect(shareOfPeak(high)).toBeLessThanOrEqual(1)
      })
    )
    // 20·log10(0.1) = -20 dB, a third of the way down to the floor of -60.
    expect(shareOfPeak(0.1)).toBeCloseTo(2 / 3, 6)
  })
  it('holds the highest peak for a moment, and the warning long enough to be read', () => {
    const meter = createLevelMeter()
    expect(meter.read(1, 0)).toMatchObject({ heldShare: 1, isTooLoud: true })
    expect(meter.read(0.1, holdMs - 1).heldShare).toBe(1)
    expect(meter.read(0.1, holdMs + 1).heldShare).toBeCloseTo(2 / 3, 6)
    expect(meter.read(0.1, tooLoudMs - 1).isTooLoud).toBe(true)
    expect(meter.read(0.1, tooLoudMs).isTooLoud).toBe(false)
  })
})
