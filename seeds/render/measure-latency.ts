// Learns how long each bass of the soundfont takes to speak: node --import tsx seeds/render/measure-latency.ts
// Single notes, dry, at three strengths; the figures it prints are kept by hand in latency.ts.
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { controlEvent, noteEvents, programEvent } from './midi-file'
import { attackNear, quantile } from './onsets'
import { decode, decodedRate, synthesize } from './synth'

const folder = mkdtempSync(join(tmpdir(), 'latency-'))
const dry = { sampleRate: 44100 as const, reverb: { room: 0, damp: 0, width: 0, level: 0 } }
const strengths = [60, 84, 104]
const midis = Array.from({ length: 34 }, (_, index) => 28 + index)
for (const program of [32, 33, 35]) {
  const asked = midis.flatMap((midi, row) =>
    strengths.map((velocity, column) => ({ midi, velocity, sec: 0.5 + (row * strengths.length + column) * 1.2 }))
  )
  const events = asked.flatMap(({ midi, velocity, sec }) => noteEvents(0, midi, velocity, sec, sec + 0.5))
  const path = join(folder, String(program))
  synthesize([programEvent(0, program), controlEvent(0, 91, 0), ...events], 0.5 + asked.length * 1.2, dry, path)
  const samples = decode(`${path}.wav`)
  const delays = midis.map((midi) => {
    const heard = asked
      .filter((note) => note.midi === midi)
      .map(({ sec }) => attackNear(samples, decodedRate, sec, 0.01, 0.06) - sec)
    return Math.round(quantile(heard, 0.5) * 1000)
  })
  console.log(program, JSON.stringify(Object.fromEntries(midis.map((midi, index) => [midi, delays[index]]))))
}
rmSync(folder, { recursive: true })
