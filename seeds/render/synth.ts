// From events to a sound file: FluidSynth renders, ffmpeg sets the loudness and encodes. Both come from Debian packages
// (fluidsynth, fluid-soundfont-gm, ffmpeg); the licence of the sounds is in LICENCE-soundfont.md.
import { execFileSync, spawnSync } from 'node:child_process'
import { writeFileSync } from 'node:fs'
import type { Sound } from './demo-types'
import { controlEvent, midiFile, noteEvents, programEvent, type MidiEvent } from './midi-file'
import type { Hit } from './drums'
import type { PlayedNote } from './hand'
import { attackSec } from './latency'
import type { Chord } from './piano'

const soundfont = '/usr/share/sounds/sf2/FluidR3_GM.sf2'
const channel = { bass: 0, piano: 1, drums: 9 }
const control = { volume: 7, pan: 10, reverb: 91, chorus: 93 }

export interface Performance {
  bass: PlayedNote[]
  hits: Hit[]
  chords: Chord[]
  kit: number
}

export function midiEvents({ bass, hits, chords, kit }: Performance, sound: Sound): MidiEvent[] {
  const set = (on: number, program: number, volume: number, pan: number, reverb: number) => [
    programEvent(on, program),
    controlEvent(on, control.volume, volume),
    controlEvent(on, control.pan, pan),
    controlEvent(on, control.reverb, reverb),
    controlEvent(on, control.chorus, 0)
  ]
  return [
    ...set(channel.bass, sound.bass, sound.volume.bass, sound.pan.bass, 30),
    ...set(channel.piano, 0, sound.volume.piano, sound.pan.piano, 52),
    ...set(channel.drums, kit, sound.volume.drums, 64, 44),
    // The sampled strings speak a little after they are asked to: ask that much sooner, so that the truth is what is heard.
    ...bass.flatMap(({ note, velocity }, index) => {
      const asked = note.onsetSec - attackSec(sound.bass, note.midi)
      const again = bass.slice(index + 1, index + 4).find((next) => next.note.midi === note.midi)?.note
      // One key cannot end after it is struck again.
      const end = again
        ? Math.min(note.offsetSec, again.onsetSec - attackSec(sound.bass, again.midi) - 0.002)
        : note.offsetSec
      return noteEvents(channel.bass, note.midi, velocity, asked, end)
    }),
    ...chords.flatMap((chord) =>
      chord.midis.flatMap((midi, voice) =>
        noteEvents(
          channel.piano,
          midi,
          chord.velocity,
          chord.from + 0.004 * voice,
          Math.max(chord.from + 0.08, chord.to)
        )
      )
    ),
    ...hits.flatMap((hit) => noteEvents(channel.drums, hit.key, hit.velocity, hit.sec, hit.sec + 0.12))
  ]
}

/** Writes `<path>.mid` and renders it to `<path>.wav` (float samples), alike every time with one FluidSynth version. */
export function synthesize(
  events: MidiEvent[],
  endSec: number,
  sound: Pick<Sound, 'reverb' | 'sampleRate'>,
  path: string
) {
  writeFileSync(`${path}.mid`, midiFile(events, endSec))
  const { room, damp, width, level } = sound.reverb
  const settings = [
    `synth.reverb.room-size=${room}`,
    `synth.reverb.damp=${damp}`,
    `synth.reverb.width=${width}`,
    `synth.reverb.level=${level}`,
    'synth.chorus.active=0',
    'synth.cpu-cores=1'
  ].flatMap((setting) => ['-o', setting])
  const rate = String(sound.sampleRate)
  const target = ['-r', rate, '-g', '0.5', '-O', 'float', '-T', 'wav', '-F', `${path}.wav`]
  execFileSync('fluidsynth', ['-ni', '-q', ...settings, ...target, soundfont, `${path}.mid`], { stdio: 'ignore' })
}

export interface Loudness {
  lufs: number
  rangeLu: number
  truePeakDb: number
}

/** EBU R128 of a file as ffmpeg's `ebur128` measures it. */
export function loudnessOf(file: string): Loudness {
  const { stderr } = spawnSync(
    'ffmpeg',
    ['-hide_banner', '-nostats', '-i', file, '-af', 'ebur128=peak=true', '-f', 'null', '-'],
    {
      encoding: 'utf8'
    }
  )
  const summary = stderr.slice(stderr.lastIndexOf('Summary:'))
  const figure = (label: string) => Number(new RegExp(`${label}:\\s+(-?[\\d.]+)`).exec(summary)?.[1] ?? Number.NaN)
  return { lufs: figure('I'), rangeLu: figure('LRA'), truePeakDb: figure('Peak') }
}

/**
 * Encodes at the wished loudness with a steady gain, so that dynamics stay as played; a gentle compressor before it tames
 * the hardest attacks. Pink noise from a fixed seed stands for the room at about -66 dB.
 */
export function encode(wav: string, sound: Sound, durationSec: number, file: string) {
  const layout = sound.channels === 1 ? 'mono' : 'stereo'
  const tamed = [...sound.filters, 'acompressor=threshold=-18dB:ratio=1.6:attack=6:release=140:makeup=1']
  const trim = `atrim=0:${durationSec},afade=t=out:st=${(durationSec - 0.5).toFixed(3)}:d=0.5`
  const noise = `anoisesrc=c=pink:r=${sound.sampleRate}:a=0.0018:seed=7:d=${durationSec},aformat=channel_layouts=${layout}`
  const graph = (gainDb: number) =>
    `[0:a]aformat=channel_layouts=${layout},${tamed.join(',')},volume=${gainDb}dB[dry];${noise}[room];` +
    `[dry][room]amix=inputs=2:normalize=0:duration=first,apad,${trim}[out]`
  const input = ['-hide_banner', '-loglevel', 'error', '-y', '-i', wav, '-filter_complex']
  // No dates and no program versions in the file, so that the same samples give the same bytes.
  const plain = ['-map_metadata', '-1', '-fflags', '+bitexact', '-flags:a', '+bitexact']
  const run = (gainDb: number, to: string, encoder: string[]) =>
    execFileSync('ffmpeg', [...input, graph(gainDb), '-map', '[out]', ...plain, ...encoder, to])
  const draft = `${wav}.draft.wav`
  run(0, draft, ['-c:a', 'pcm_f32le'])
  const gainDb = Math.round((sound.lufs - loudnessOf(draft).lufs) * 100) / 100
  run(gainDb, file, sound.encoder)
}

/** Decoded mono samples at 44.1 kHz. */
export function decode(file: string): Float32Array {
  const pcm = execFileSync(
    'ffmpeg',
    ['-loglevel', 'error', '-i', file, '-ac', '1', '-ar', '44100', '-f', 'f32le', '-'],
    {
      maxBuffer: 1 << 28
    }
  )
  return new Float32Array(pcm.buffer.slice(pcm.byteOffset, pcm.byteOffset + pcm.byteLength))
}
export const decodedRate = 44100

/** Length of a file in seconds, as ffprobe reads it from the container. */
export function durationOf(file: string): number {
  const args = ['-v', 'error', '-show_entries', 'format=duration', '-of', 'csv=p=0', file]
  return Number(execFileSync('ffprobe', args, { encoding: 'utf8' }))
}
