// Processor time that a second of output costs, beside programs that do the same to the same file.
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { cpuSec } from '../processes.ts'
import { compared, type Figure } from '../report.ts'
import { commands, type Engine, ownEngine, programEngine } from '../stretch/engines.ts'
import { bandMaterial } from '../stretch/material.ts'
import type { Sound } from '../stretch/wav.ts'

const speeds = [0.25, 0.5, 1, 1.5]
const peers = ['rubberband', 'soundstretch']
const seconds = 6
const sampleRate = 48_000

/** The judge's band, called 48 kHz: a little faster and higher than it is judged. */
const stereo = (): Sound => ({
  sampleRate,
  channels: bandMaterial(0.5).sound.channels.map((channel) => channel.slice(0, seconds * sampleRate))
})

/** Our own works in this process, the others in children that have been waited for. */
const spentSec = (isOwn: boolean): number => {
  const { own, children } = cpuSec()
  return isOwn ? own : children
}

export const renderFigures = async (rounds: number): Promise<Figure[]> => {
  const folder = mkdtempSync(join(tmpdir(), 'plumbline-render-'))
  try {
    const source = stereo()
    const engines: Record<string, Engine> = { ours: await ownEngine() }
    for (const name of peers) engines[name] = programEngine(commands[name] ?? '', folder, false)
    const names = Object.keys(engines)
    const cost = async (name: string, speed: number): Promise<number> => {
      const before = spentSec(name === 'ours')
      await engines[name]?.(source, { speed, semitones: 0, cents: 0 }, name)
      return ((spentSec(name === 'ours') - before) * speed) / seconds
    }
    // Compiled before it is measured, as it is in a page after its first second.
    await cost('ours', 0.5)
    const figures: Figure[] = []
    for (const speed of speeds) {
      const spent: Record<string, number[]> = {}
      for (let round = 0; round < rounds; round += 1)
        for (const name of round % 2 === 0 ? names : names.toReversed())
          (spent[name] ??= []).push(1000 * (await cost(name, speed)))
      for (const peer of peers)
        figures.push(
          compared(
            `render x${speed}, beside ${peer}`,
            'ms/s',
            { ours: spent['ours'] ?? [], peer: spent[peer] ?? [] },
            `processor time for a second of output, ${seconds} s of a band in stereo at 48 kHz; peer: ${commands[peer]}, its reading and writing of files included`
          )
        )
    }
    return figures
  } finally {
    rmSync(folder, { recursive: true, force: true })
  }
}
