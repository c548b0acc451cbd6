import { mkdirSync, readdirSync, readFileSync, readlinkSync, renameSync } from 'node:fs'
import { join } from 'node:path'
import { afterEach, describe, expect, it } from 'vitest'
import ffmpegCommand from 'fluent-ffmpeg'
import { fromSamples, fromSource, mediaSandbox, startFfmpeg, type ProcessLimits } from '@server/media/ffmpeg.ts'
import { ingestRecording } from '@server/media/ingest.ts'
import { decodeCommand } from '@server/media/commands.ts'
import { linkSource } from '@server/media/work-folder.ts'
import { makeRecording, pluckedBass, scratchFolder } from '../support/media.ts'

type Seen = { argv: string[]; env: string; limits: string; cwd: string; net: string }

const read = <T>(take: () => T): T | undefined => {
  try {
    return take()
  } catch {
    return undefined
  }
}

/** The ffmpeg processes that this one has started, as the system sees them. */
const children = (): Seen[] =>
  readdirSync('/proc')
    .filter((pid) => read(() => readFileSync(`/proc/${pid}/status`, 'utf8'))?.includes(`\nPPid:\t${process.pid}\n`))
    .flatMap((pid) => {
      const seen = read(() => ({
        argv: readFileSync(`/proc/${pid}/cmdline`, 'utf8').split('\0'),
        env: readFileSync(`/proc/${pid}/environ`, 'utf8'),
        limits: readFileSync(`/proc/${pid}/limits`, 'utf8'),
        cwd: readlinkSync(`/proc/${pid}/cwd`),
        net: readlinkSync(`/proc/${pid}/ns/net`)
      }))
      return seen?.argv[0] === 'ffmpeg' ? [seen] : []
    })

const roomy: ProcessLimits = { cpuSec: 60, wallSec: 60, memoryBytes: 2 ** 31, outputBytes: 2 ** 26 }

afterEach(() => {
  delete process.env['SESSION_SECRET']
})

describe('the processes of an ingest', () => {
  it('are told nothing of a file name, work in a folder of their own, within limits and without secrets', async () => {
    process.env['SESSION_SECRET'] = 'CANARY-secret'
    const folder = scratchFolder()
    const hostile = '-i ;id $(id) `id` "x"\n\u202egpj.wav'
    const own = join(folder, hostile)
    mkdirSync(own)
    renameSync(makeRecording(folder, 'a.wav', pluckedBass(20)), join(own, hostile))
    const seen: Seen[] = []
    const onProgress = (stage: string) => {
      if (stage === 'decoding' && seen.length === 0) seen.push(...children())
    }
    const made = await ingestRecording({ source: join(own, hostile), outDir: join(folder, 'media'), onProgress })
    expect(made.ok).toBe(true)
    expect(seen.length).toBe(3)
    for (const { argv, env, limits, cwd, net } of seen) {
      expect(argv.join(' ')).not.toMatch(/gpj|\$\(|;id|plumbline-media|\n/)
      expect(argv).toEqual(
        expect.arrayContaining(['-nostdin', '-hide_banner', '-format_whitelist', '-protocol_whitelist'])
      )
      expect(argv.indexOf('-format_whitelist')).toBeLessThan(argv.indexOf('-i'))
      expect(env).not.toContain('CANARY-secret')
      expect(cwd).toMatch(/\/\.work-\d+-\d+-[0-9a-f]{32}$/)
      if (mediaSandbox().prlimit) {
        expect(limits).not.toMatch(/Max (cpu time|file size|address space) +unlimited/)
        expect(limits).toMatch(/Max core file size +0 /)
      }
      if (mediaSandbox().unshare.length > 0) expect(net).not.toBe(readlinkSync('/proc/self/ns/net'))
    }
  })
})

describe('startFfmpeg', () => {
  const decodeInto = async (limits: Partial<ProcessLimits>, seconds = 5, signal?: AbortSignal) => {
    const folder = scratchFolder()
    await linkSource(folder, makeRecording(folder, 'a.wav', pluckedBass(seconds)))
    const command = fromSource().audioCodec('pcm_s16le').format('wav').output('out')
    return startFfmpeg(command, { cwd: folder, limits: { ...roomy, ...limits }, signal }).exit
  }

  it('ends by itself when all is well', async () => {
    expect(await decodeInto({})).toEqual({ outcome: 'done', stderr: '' })
  })

  it('stops at the size limit, the time limit and on request', async () => {
    expect((await decodeInto({ outputBytes: 100_000 })).outcome).toBe('too-large')
    expect((await decodeInto({ wallSec: 0.001 }, 20)).outcome).toBe('too-slow')
    expect((await decodeInto({}, 20, AbortSignal.abort())).outcome).toBe('aborted')
  })

  it('stops at the limit of computing time', async () => {
    const folder = scratchFolder()
    const endless = ffmpegCommand().input('/dev/zero').inputFormat('f32le').inputOptions(['-ar', '48000', '-ac', '2'])
    const command = endless.audioCodec('aac').format('null').output('-')
    const limits = { ...roomy, cpuSec: 1 }
    expect((await startFfmpeg(command, { cwd: folder, limits }).exit).outcome).toBe('too-slow')
  })

  it('fails without enough memory rather than taking more', async () => {
    expect((await decodeInto({ memoryBytes: 40_000_000 })).outcome).toBe('failed')
  })

  it('keeps only a little of what is said', async () => {
    const folder = scratchFolder()
    const command = fromSamples(48_000, 2)
      .outputOptions(['-nonsense', 'x'.repeat(20_000)])
      .format('null')
      .output('-')
    const { outcome, stderr } = await startFfmpeg(command, { cwd: folder, limits: roomy }).exit
    expect(outcome).toBe('failed')
    expect(stderr.length).toBeLessThanOrEqual(4096)
  })

  it('reads no codec off the list', async () => {
    const folder = scratchFolder()
    await linkSource(folder, makeRecording(folder, 'a.wav', pluckedBass(1), '-c:a', 'adpcm_swf'))
    const running = startFfmpeg(decodeCommand({ sampleRate: 44_100, channels: 2 }, 10), { cwd: folder, limits: roomy })
    running.stdout.resume()
    const exit = await running.exit
    expect(exit.outcome).toBe('failed')
    expect(exit.stderr).toContain('not on whitelist')
  })
})
