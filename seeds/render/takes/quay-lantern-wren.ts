import type { TakePlan } from '../demo-types'
import { quayLantern } from '../tunes'

export const quayLanternWren: TakePlan = {
  slug: 'quay-lantern-wren-practice',
  title: 'Quay Lantern, practice on Sunday',
  tune: quayLantern,
  player: 'wren',
  with: 'bass alone',
  reach: 'named',
  named: ['mara', 'ines'],
  leadSec: 1.4,
  firstBar: 1,
  bars: [
    // A
    'G1h D2',
    'E1h B1',
    'A1h E2',
    'D2 C2 A1',
    'B1h F#2',
    'E2 D2 B1',
    'A1 C2 E2',
    'Eb2 C2 A1',
    // B
    'B1h F2',
    'E2 D2 G#1',
    'A1h C2',
    'F1 A1 Eb2',
    'D2 B1 F#1',
    'Bb1 Db2 E2',
    'A1 E2 C2',
    'D2 C2 F#1',
    // A: a search for the G♯ in 22, E where the chart has E♭ in 24
    'G1 B1 D2',
    'E2 B1 G1',
    'A1 C2 E2',
    'D2 A1 F#1',
    'B1 D2 F#2',
    'E2e rQ G#1',
    'A1 E2 G2',
    'C2 E2> A1',
    // C
    'C2h G2',
    'Eb2 C2 G1',
    'B1 D2 F#2',
    'E2 D2 G#1',
    'A1 B1 C2',
    'D2 A1 F#1',
    'G1h D2',
    'F#1 A1 D2',
    'G1H'
  ],
  form: [
    { bar: 1, formBar: 1, newPass: true },
    { bar: 33, formBar: null, newPass: false }
  ],
  tempo: { bpm: 129, creep: -0.012, stretch: { 22: 1.38, 33: 1.2 } },
  swing: 0.58,
  hand: { leanMs: 4, scatterMs: 13, wanderMs: 10, legato: 0.86, velocity: 78, late: { 10: 55, 14: 70 } },
  dynamics: { 9: 3, 17: 0, 22: -8, 23: -4, 25: 5, 31: -3 },
  drums: null,
  piano: null,
  countIn: false,
  sound: {
    bass: 33,
    pan: { bass: 64, piano: 64 },
    volume: { bass: 112, drums: 0, piano: 0 },
    reverb: { room: 0.45, damp: 0.6, width: 0, level: 0.5 },
    sampleRate: 44100,
    channels: 1,
    // A telephone on a music stand: little below the open E, nothing above 9 kHz.
    filters: ['highpass=f=45', 'lowpass=f=9000'],
    lufs: -18,
    extension: 'mp3',
    encoder: ['-c:a', 'libmp3lame', '-b:a', '96k']
  }
}
