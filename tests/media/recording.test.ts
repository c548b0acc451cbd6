import { readdirSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { mediaFault } from '@server/media/faults.ts'
import { probeRecording } from '@server/media/probe.ts'
import { joinRecording } from '@server/media/recording.ts'
import { ffmpeg, makeLiveWebm, makeRecording, pluckedBass, scratchFolder } from '../support/media.ts'

/** Cuts a file at uneven places, as a recorder's time slices fall where they like. */
const slices = (folder: string, path: string): string[] => {
  const bytes = readFileSync(path)
  const cuts = [0, 700, 5000, 5001, 20_000, bytes.length]
  return cuts.slice(1).map((end, index) => {
    const slice = join(folder, `slice-${index}`)
    writeFileSync(slice, bytes.subarray(cuts[index], end))
    return slice
  })
}

const fragmentedMp4 = (folder: string): string => {
  const path = join(folder, 'live.mp4')
  const options = ['-c:a', 'aac', '-f', 'mp4', '-movflags', 'frag_keyframe+empty_moov+default_base_moof']
  writeFileSync(path, ffmpeg(...pluckedBass(4), ...options, 'pipe:1'))
  return path
}

describe('joinRecording', () => {
  it.each([
    ['WebM', (folder: string) => makeLiveWebm(folder, pluckedBass(4))],
    ['MP4', fragmentedMp4]
  ])('makes the pieces of a %s recorder one recording of full length', async (_, make) => {
    const folder = scratchFolder()
    const path = make(folder)
    const target = join(folder, 'joined')
    const joined = await joinRecording({ pieces: slices(folder, path), target, maxBytes: 1e6 })
    expect(joined).toEqual({ ok: true, value: { bytes: readFileSync(path).length } })
    expect(readFileSync(target).equals(readFileSync(path))).toBe(true)
    const probed = await probeRecording(target)
    expect(probed.ok && Math.abs(probed.value.durationSec - 4)).toBeLessThan(0.1)
  })

  it('refuses gaps, pieces out of order, two recordings in one and too much of it, and leaves nothing', async () => {
    const folder = scratchFolder()
    const pieces = slices(folder, makeLiveWebm(folder, pluckedBass(4)))
    const target = join(folder, 'joined')
    const before = readdirSync(folder)
    const fault = async (these: (string | undefined)[], maxBytes = 1e6) => {
      const joined = await joinRecording({ pieces: these, target, maxBytes })
      expect(readdirSync(folder)).toEqual(before)
      return joined.ok ? undefined : joined.error
    }
    expect(await fault([])).toEqual(mediaFault('empty'))
    expect(await fault([pieces[0], undefined, pieces[2]])).toEqual(mediaFault('incomplete'))
    expect(await fault(pieces.toReversed())).toEqual(mediaFault('incomplete'))
    expect(await fault([...pieces, ...pieces])).toEqual(mediaFault('incomplete'))
    expect(await fault(pieces, 10_000)).toEqual(mediaFault('too-large'))
    expect(await fault([makeRecording(folder, 'slice-0', pluckedBass(1), '-f', 'wav')])).toEqual(
      mediaFault('incomplete')
    )
  })

  it('throws when it is stopped, and leaves nothing', async () => {
    const folder = scratchFolder()
    const pieces = slices(folder, makeLiveWebm(folder, pluckedBass(4)))
    const target = join(folder, 'joined')
    const signal = AbortSignal.abort()
    await expect(joinRecording({ pieces, target, maxBytes: 1e6, signal })).rejects.toThrow(/abort/i)
    expect(readdirSync(folder)).not.toContain('joined')
    expect(readdirSync(folder)).not.toContain('joined.part')
  })
})
