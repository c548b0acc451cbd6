import type { TakePlan } from '../demo-types'
import { quayLantern } from '../tunes'

export const quayLanternPell: TakePlan = {
  slug: 'quay-lantern-pell-free-introduction',
  title: 'Quay Lantern with a free introduction',
  tune: quayLantern,
  player: 'pell',
  with: 'fretless bass alone',
  reach: 'group',
  named: [],
  leadSec: 0.6,
  firstBar: 1,
  bars: [
    // Out of time: tenths over G, A and B, then a long D
    'G1+B2H',
    'A1+C3h B2',
    'B1+D3h C3',
    'D2h r',
    // A
    'G1 D2 F#2',
    'E2 D2e B1e G1',
    'A1 C2 E2',
    'F#2 E2e D2e C2',
    'B1 D2 F#2',
    'G#2 F2 D2',
    'C2 E2 G2',
    'A2 G2 Eb2',
    // B
    'D2 F2 A2',
    'G#2 E2 D2',
    'C2h B1e A1e',
    'F1 C2 Eb2',
    'D2 F#2 A2',
    'Bb1 E2 Db2',
    'A1 G2e E2e C2',
    'D2 F#1 A1',
    // A
    'G1 B1 D2',
    'E2 G2 B2',
    'C3 A2 E2',
    'D2 A1e C2e F#2',
    'D2 B1 F#1',
    'E1 G#1 D2',
    'C2 E2 A2',
    'G2 Eb2 C2',
    // C
    'C2 E2 B2',
    'A2 G2 Eb2',
    'D2 F#2 B1',
    'E2 F2 G#1',
    'A1 C2t E2t G2t A2',
    'C3 A2 F#2',
    'G2h D2',
    'A1 C2 D2',
    'G1+B2H'
  ],
  form: [
    { bar: 1, formBar: null, newPass: false },
    { bar: 5, formBar: 1, newPass: true },
    { bar: 37, formBar: null, newPass: false }
  ],
  tempo: { bpm: 144, creep: 0.01, stretch: { 1: 1.9, 2: 1.75, 3: 1.8, 4: 2.3, 35: 1.05, 36: 1.25, 37: 1.7 } },
  swing: 0.6,
  hand: { leanMs: -2, scatterMs: 8, wanderMs: 7, legato: 0.95, velocity: 86, late: {} },
  dynamics: { 1: -6, 5: 0, 13: 5, 21: 1, 25: 4, 29: 7, 35: -6 },
  drums: null,
  piano: null,
  countIn: false,
  sound: {
    bass: 35,
    pan: { bass: 64, piano: 64 },
    volume: { bass: 116, drums: 0, piano: 0 },
    reverb: { room: 0.7, damp: 0.25, width: 0.9, level: 0.55 },
    sampleRate: 48000,
    channels: 2,
    filters: ['highpass=f=28'],
    lufs: -17,
    extension: 'webm',
    encoder: ['-c:a', 'libopus', '-b:a', '96k']
  }
}
