/**
 * Milliseconds from a note's start in the MIDI file to its attack in the sound, by General MIDI program (from 0), for
 * each key from 28 (E1) up: FluidSynth 2.3.1 with FluidR3_GM, printed by measure-latency.ts. The acoustic and the
 * fretless bass speak at once; the fingered one has up to 47 ms of finger noise before its low notes. Below zero: the
 * judge of attacks hears a high note's first bright millisecond that much early.
 */
const attackMs: Record<number, number[]> = {
  32: [
    9, 9, 6, 6, 5, 5, 5, 3, 4, 3, 2, 3, 2, 2, 3, 1, 1, 2, 0, 0, -1, -1, 0, -1, -1, -1, -2, -2, -3, -3, -2, -3, -3, -1
  ],
  33: [
    13, 21, 18, 47, 43, 18, 18, 17, 16, 15, 29, 28, 8, 8, 8, 10, 10, 9, 8, 7, 8, 8, 8, 6, 6, 6, 4, 4, 3, 3, 3, 2, 2, 2
  ],
  35: [4, 2, 1, 1, 2, 2, 2, 1, 1, 1, 0, 3, 2, 2, 2, 1, 1, 2, 1, 1, 0, 6, 6, 4, 4, 4, 3, 3, 2, 2, 2, 1, 1, 1]
}

/** Seconds that a note must be asked for before it is to be heard. */
export function attackSec(program: number, midi: number): number {
  const ms = attackMs[program]?.[midi - 28]
  if (ms === undefined) throw new Error(`no measured attack for program ${program}, key ${midi}`)
  return ms / 1000
}
