// A Standard MIDI File (format 0, one track) at a steady 10 000 ticks a second: what happens when is reckoned in seconds
// elsewhere, and the coarsest step left is the renderer's own block of 64 samples.
export interface MidiEvent {
  sec: number
  bytes: number[]
}

const ticksPerQuarter = 5000
const microsecondsPerQuarter = 500_000
const ticksPerSec = (ticksPerQuarter * 1_000_000) / microsecondsPerQuarter

/** Variable-length quantity: seven bits a byte, high bit set on all but the last. */
function variableLength(number: number): number[] {
  const bytes = [number & 0x7f]
  for (let rest = number >> 7; rest > 0; rest >>= 7) bytes.unshift((rest & 0x7f) | 0x80)
  return bytes
}

const word = (number: number) => [(number >> 24) & 255, (number >> 16) & 255, (number >> 8) & 255, number & 255]
const ascii = (text: string) => [...text].map((letter) => letter.charCodeAt(0))

export function midiFile(events: MidiEvent[], endSec: number): Uint8Array {
  const tempo = [0, 0xff, 0x51, 3, ...word(microsecondsPerQuarter).slice(1)]
  const track = [...tempo]
  let now = 0
  const inOrder = events
    .map(({ sec, bytes }) => ({ tick: Math.max(0, Math.round(sec * ticksPerSec)), bytes }))
    // Notes end before others begin at one moment, so that a repeated pitch is not cut off.
    .sort((a, b) => a.tick - b.tick || (a.bytes[0] ?? 0) - (b.bytes[0] ?? 0))
  for (const { tick, bytes } of inOrder) {
    track.push(...variableLength(tick - now), ...bytes)
    now = tick
  }
  track.push(...variableLength(Math.max(0, Math.round(endSec * ticksPerSec) - now)), 0xff, 0x2f, 0)
  const head = [...ascii('MThd'), ...word(6), 0, 0, 0, 1, ticksPerQuarter >> 8, ticksPerQuarter & 255]
  return Uint8Array.from([...head, ...ascii('MTrk'), ...word(track.length), ...track])
}

/** Channels from 0. */
export const noteEvents = (channel: number, midi: number, velocity: number, from: number, to: number): MidiEvent[] => [
  { sec: from, bytes: [0x90 | channel, midi, velocity] },
  { sec: to, bytes: [0x80 | channel, midi, 0] }
]
export const programEvent = (channel: number, program: number): MidiEvent => ({
  sec: 0,
  bytes: [0xc0 | channel, program]
})
export const controlEvent = (channel: number, control: number, value: number): MidiEvent => ({
  sec: 0,
  bytes: [0xb0 | channel, control, value]
})
