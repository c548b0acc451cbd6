import type { TakePlan } from '../demo-types'
import { slackTide } from '../tunes'

/** Bars that Inés plays late, by milliseconds; the notes in her comments name them. */
const late = { 11: 75, 12: 85, 13: 60, 43: 65 }

export const slackTideInes: TakePlan = {
  slug: 'slack-tide-ines-second-try',
  title: 'Slack Tide, second try',
  tune: slackTide,
  player: 'ines',
  with: 'bass and brushes',
  reach: 'group',
  named: [],
  leadSec: 0.9,
  firstBar: 1,
  bars: [
    // Chorus 1. A
    'G1 Bb1 D2 F2',
    'G2 F2 D2 Bb1',
    'G1 A1 Bb1 D2',
    'C2 Bb1 A1 F#1',
    'G1 D2e (D2)e G2 F2',
    'E2 D2 C2 Bb1',
    'A1 Bb1 C2 C#2',
    'D2 C2 A1 F#1',
    // A
    'G1 G1 Bb1 Bb1',
    'D2 D2 F2 D2',
    'G2 F2 E2 D2',
    'C2 D2 Bb1 A1',
    'G1 F1 E1 F1',
    'G1 A1 Bb1 C2',
    'D2 F2 G2e (D2)e F2',
    'G1 A1 Bb1 B1',
    // B
    'C2 Eb2 G2 Bb2',
    'A2 G2 F2 Eb2',
    'C2 D2 Eb2 G2',
    'F2 Eb2 D2 B1',
    'C2 G1 C2e (G1)e Eb2',
    'D2 Eb2 F2 G2',
    'Bb2 G2 F2 Eb2',
    'C2 Bb1 A1 Ab1',
    // A
    'G1 Bb1 D2 G2',
    'F2 D2 C2 Bb1',
    'G1 G1e (G1)e D2 E2',
    'F2 E2 D2 Bb1',
    'C2 D2 E2 F2',
    'G2 F2 D2t C2t Bb1t A1',
    'Bb1 A1 G1 F1',
    'D2 C2 A1 F#1',
    // Chorus 2. A
    'G1 D2 Bb1 F2',
    'D2 G2 F2 E2',
    'D2 C2 Bb1 A1',
    'G1 F#1 G1 A1',
    'Bb1 D2 F2 A2',
    'G2 F2e (D2)e D2 C2',
    'Bb1 C2 C#2 D2',
    'Eb2 D2 A1 Ab1',
    // A: the B natural in 41 is the wrong note, the hole in 45 the hesitation.
    'G1 B1> D2 F2',
    'G2 D2 Bb1 G1',
    'A1 Bb1 C2 D2',
    'F2 D2 C2 A1',
    'G1e rQ r D2',
    'G1 Bb1 C2 D2',
    'F2 G2 F2 D2',
    'Bb1 A1 G1 B1',
    // B: B♮ D F A♭ in 50, B♭ D F A♭ in 52: one note apart, over a Cm7 that stands still.
    'C2 Eb2 G2 Eb2',
    'B1 D2 F2 Ab2',
    'G2 Eb2 C2 G1',
    'Bb1 D2 F2 Ab2',
    'G2 Bb2 G2 Eb2',
    'C2 D2 Eb2 F2',
    'G2 Eb2 D2 C2',
    'C2 Bb1 A1 Ab1',
    // A
    'G1e (G1)e Bb1 D2 F2',
    'G2 A2 Bb2 A2',
    'G2 F2 D2 C2',
    'Bb1 D2 C2 A1',
    'G1 F1 E1 F1',
    'G1 Bb1 D2 C#2',
    'D2 F2 D2 Bb1',
    'A1 C2 A1 F#1',
    'G1w'
  ],
  form: [
    { bar: 1, formBar: 1, newPass: true },
    { bar: 33, formBar: 1, newPass: true },
    { bar: 65, formBar: null, newPass: false }
  ],
  tempo: { bpm: 138, creep: 0.004, stretch: { 65: 1.25 } },
  swing: 0.64,
  hand: { leanMs: 6, scatterMs: 9, wanderMs: 7, legato: 0.88, velocity: 84, late },
  dynamics: { 17: 4, 25: 0, 33: 3, 41: -2, 45: -8, 49: 6, 57: 2, 64: -4 },
  drums: { kit: 40, style: 'brushes', until: 65, twoFeel: null },
  piano: null,
  countIn: false,
  sound: {
    bass: 32,
    pan: { bass: 58, piano: 64 },
    volume: { bass: 78, drums: 127, piano: 0 },
    reverb: { room: 0.35, damp: 0.4, width: 0.6, level: 0.35 },
    sampleRate: 44100,
    channels: 2,
    filters: ['highpass=f=28'],
    lufs: -17,
    extension: 'm4a',
    encoder: ['-c:a', 'aac', '-b:a', '112k', '-movflags', '+faststart']
  }
}
