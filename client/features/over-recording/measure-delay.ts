// Plays the test signal through the very engine that plays the take, and finds it in the microphone: whatever lies between the
// engine's clock and the recording (buffers, wires, radio, air) is in the figure.
import { findRoundTrip, roundTripSec, roundTripSignal } from '@shared/audio/round-trip'
import { plainAids } from '@shared/audio/listening'
import { passesIn } from '@shared/practice/over-recording'
import { wavHeader, wavSamples } from '@shared/audio/wav'
import { createScope } from '@client/lib/scope'
import type { Player } from '@client/transport/player'
import type { Sec } from '@shared/units'
import type { Capture, CapturedBlock } from './capture'
import { createClockPairs } from './clock-pairs'

export interface MeasuredDelay {
  delaySec: Sec
  /** 0-1, how sure it is. */
  confidence: number
}

/** The rate the engine works at: its samples pass untouched. */
const signalRate = 48_000
/** The slowest way through the air that is waited for, radio headphones included. */
const longestDelaySec = 0.7
/** A negative delay, or one longer than a recording could be waited for, is a fault of a clock. */
const isPlausible = (delaySec: Sec): boolean => delaySec > -0.1 && delaySec < longestDelaySec

const signalFile = (): Blob => {
  const signal = roundTripSignal(signalRate)
  return new Blob([wavHeader(signalRate, 1, signal.length), wavSamples([signal])], { type: 'audio/wav' })
}

/** Joins blocks into one channel, at their frames. */
export const joinBlocks = (blocks: readonly CapturedBlock[]): { firstFrame: number; samples: Float32Array } => {
  const firstFrame = blocks[0]?.frame ?? 0
  const last = blocks.at(-1)
  const samples = new Float32Array(last ? last.frame + (last.channels[0]?.length ?? 0) - firstFrame : 0)
  for (const { frame, channels } of blocks)
    for (const channel of channels)
      channel.forEach((value, n) => {
        const at = frame - firstFrame + n
        samples[at] = (samples[at] ?? 0) + value / channels.length
      })
  return { firstFrame, samples }
}

const untilOver = (player: Player, mostMs: number): Promise<void> =>
  new Promise((resolve) => {
    const scope = createScope()
    const end = (): void => {
      scope.dispose()
      resolve()
    }
    let hasPlayed = player.state === 'playing'
    scope.add(
      player.on('state', (state) => {
        if (state === 'playing') hasPlayed = true
        else if (hasPlayed && state !== 'loading') end()
      })
    )
    scope.timeout(end, mostMs)
  })

/** Takes some three seconds. Null when the signal was not found for sure. The player holds the signal afterwards. */
export const measureDelay = async (player: Player, capture: Capture, volume: number): Promise<MeasuredDelay | null> => {
  const file = signalFile()
  const url = URL.createObjectURL(file)
  const blocks: CapturedBlock[] = []
  const pairs = createClockPairs(player, capture)
  try {
    player.setClicks(null)
    player.setCountIn(null)
    player.setAids(plainAids)
    player.setPitch(0)
    player.setRate(1)
    await player.load({ url, file, durationSec: roundTripSec })
    player.setVolume(volume)
    const stop = capture.onBlock((block) => {
      blocks.push(block)
      pairs.read()
    })
    try {
      const over = untilOver(player, (roundTripSec + 3) * 1000)
      if (!(await player.play())) return null
      await over
      await wait(longestDelaySec * 1000)
      await capture.flush()
    } finally {
      stop()
    }
  } finally {
    URL.revokeObjectURL(url)
  }
  const [pass] = passesIn(pairs.heard, { startSec: 0, endSec: null })
  const { firstFrame, samples } = joinBlocks(blocks)
  const found = findRoundTrip(samples, capture.sampleRate)
  if (!pass || !found) return null
  const playedSec = pass.startClockSec - pass.placeSec / pass.rate
  const delaySec = (firstFrame + found.startFrame) / capture.sampleRate + pairs.offsetSec() - playedSec
  return isPlausible(delaySec) ? { delaySec, confidence: found.confidence } : null
}

const wait = (ms: number): Promise<void> =>
  new Promise((resolve) => {
    const scope = createScope()
    scope.timeout(() => {
      scope.dispose()
      resolve()
    }, ms)
  })
