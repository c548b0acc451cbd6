import { readFileSync, rmSync, statSync } from 'node:fs'
import { createServer, type Server } from 'node:http'
import type { AddressInfo } from 'node:net'
import { join } from 'node:path'
import { chromium, type Browser, type Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { piecesBetween } from '@shared/audio/piece-manifest.ts'
import { ingestRecording, type IngestResult } from '@server/media/ingest.ts'
import { decode, makeRecording, makeScratch, pluckedBass } from '../support/media.ts'

const seconds = 34.567
let folder: string
let outDir: string
let result: IngestResult
/** The recording itself, decoded and brought to the pieces' rate by ffmpeg. */
let whole: Float32Array
/** Every piece decoded alone by ffmpeg, without what is to be dropped. */
let parts: Float32Array[]

const piecePath = (file: string) => join(outDir, 'pieces', file)

beforeAll(async () => {
  folder = makeScratch()
  outDir = join(folder, 'media')
  const source = makeRecording(folder, 'a.wav', pluckedBass(seconds))
  const made = await ingestRecording({ source, outDir })
  if (!made.ok) throw new Error(made.error.code)
  result = made.value
  whole = decode(source, '-ar', '48000')
  parts = result.manifest.pieces.map(({ file, preroll, frames }) =>
    decode(piecePath(file)).subarray(preroll * 2, (preroll + frames) * 2)
  )
}, 60_000)
afterAll(() => rmSync(folder, { recursive: true, force: true }))

const join2 = (arrays: Float32Array[]): Float32Array => {
  const joined = new Float32Array(arrays.reduce((sum, array) => sum + array.length, 0))
  arrays.reduce((at, array) => (joined.set(array, at), at + array.length), 0)
  return joined
}

const rms = (values: Float32Array): number =>
  Math.sqrt(values.reduce((sum, value) => sum + value * value, 0) / values.length)

/** Lag in frames (left side) at which `b` fits `a` best, over a second around `frame`. */
const bestLag = (a: Float32Array, b: Float32Array, frame: number): number => {
  const [from, to, reach] = [frame - 24_000, frame + 24_000, 40]
  let best = { lag: 0, sum: -Infinity }
  for (let lag = -reach; lag <= reach; lag++) {
    let sum = 0
    for (let at = from; at < to; at++) sum += (a[at * 2] ?? 0) * (b[(at + lag) * 2] ?? 0)
    if (sum > best.sum) best = { lag, sum }
  }
  return best.lag
}

const seams = () => result.manifest.pieces.slice(1).map(({ firstSample }) => firstSample)

describe('pieces', () => {
  it('lie in order without gap or overlap and cover the take', () => {
    const { pieces, totalFrames, sampleRate } = result.manifest
    expect(pieces.length).toBe(4)
    expect(pieces.reduce((at, piece) => (expect(piece.firstSample).toBe(at), at + piece.frames), 0)).toBe(totalFrames)
    expect(Math.abs(totalFrames - seconds * sampleRate)).toBeLessThanOrEqual(1)
    expect(pieces.map(({ file, bytes }) => statSync(piecePath(file)).size - bytes)).toEqual([0, 0, 0, 0])
  })

  it('give as many frames as the manifest says', () => {
    const { pieces, totalFrames } = result.manifest
    expect(pieces.map(({ file }) => decode(piecePath(file)).length / 2)).toEqual(
      pieces.map((piece) => piece.decodedFrames)
    )
    expect(join2(parts).length / 2).toBe(totalFrames)
    expect(whole.length / 2).toBe(totalFrames)
  })

  it('stand at their exact frame: cross-correlation with the recording peaks at lag 0', () => {
    const joined = join2(parts)
    const places = [48_000, ...seams(), result.manifest.totalFrames - 48_000]
    expect(places.map((frame) => bestLag(whole, joined, frame))).toEqual(places.map(() => 0))
  })

  it('finds a lag when there is one', () => {
    expect(bestLag(whole, join2(parts).subarray(14), 480_000)).toBe(-7)
  })

  it('leave no seam: what the codec changes is no larger around a cut than elsewhere', () => {
    const joined = join2(parts)
    const residual = joined.map((value, at) => value - (whole[at] ?? 0))
    const around = (frame: number) => rms(residual.subarray((frame - 2400) * 2, (frame + 2400) * 2))
    // The tones repeat every four seconds and the cuts fall every ten: compare with the same place four seconds away.
    for (const seam of seams()) {
      const elsewhere = [seam - 192_000, seam + 192_000]
        .filter((at) => at + 2400 < result.manifest.totalFrames)
        .map(around)
      expect(around(seam)).toBeLessThan(1.5 * Math.max(...elsewhere))
    }
    expect(20 * Math.log10(rms(residual) / rms(whole))).toBeLessThan(-20)
  })

  it('differ from one continuous decode by less than 24 bits can hold', async () => {
    // Neighbours share their pre-roll, so a piece's own beginning can be compared with nothing but a longer run-up.
    const { pieces } = result.manifest
    for (const [index, piece] of pieces.entries()) {
      const before = pieces[index - 1]
      if (before === undefined) continue
      const tail = decode(piecePath(before.file)).subarray((before.preroll + before.frames) * 2)
      const head = (parts[index] ?? new Float32Array()).subarray(0, tail.length)
      expect(tail.length).toBeGreaterThan(200)
      const worst = tail.reduce((most, value, at) => Math.max(most, Math.abs(value - (head[at] ?? 0))), 0)
      expect(20 * Math.log10(worst + 1e-12), piece.file).toBeLessThan(-130)
    }
  })

  it('are small enough for a phone: under a third of a megabyte for ten seconds of stereo', () => {
    expect(Math.max(...result.manifest.pieces.map(({ bytes }) => bytes))).toBeLessThan(333_000)
  })
})

describe('piecesBetween', () => {
  it('names the pieces that hold a span', () => {
    expect(piecesBetween(result.manifest, 0, 1)).toEqual([0])
    expect(piecesBetween(result.manifest, 479_999, 480_001)).toEqual([0, 1])
    expect(piecesBetween(result.manifest, 480_000, 480_000)).toEqual([])
    expect(piecesBetween(result.manifest, -5, 1e9)).toEqual([0, 1, 2, 3])
  })
})

describe('pieces in a browser', () => {
  let server: Server
  let browser: Browser
  beforeAll(async () => {
    server = createServer((request, response) => {
      const file = /^\/(\d{5}\.ogg)$/.exec(request.url ?? '')?.[1]
      response.setHeader('content-type', file ? 'audio/ogg' : 'text/html')
      response.end(file ? readFileSync(piecePath(file)) : '<!doctype html><title>pieces</title>')
    }).listen(0, '127.0.0.1')
    browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu'] })
  }, 60_000)
  afterAll(async () => {
    await browser.close()
    server.close()
  })

  /** Left side of a piece as the browser decodes it, at the pieces' own rate. */
  const decodeInPage = async (page: Page, file: string) => {
    const decoded = await page.evaluate(
      async ({ name, rate }) => {
        const bytes = await (await fetch(`/${name}`)).arrayBuffer()
        const buffer = await new OfflineAudioContext(2, 1, rate).decodeAudioData(bytes)
        const left = buffer.getChannelData(0)
        const view = new Uint8Array(left.buffer, left.byteOffset, left.byteLength)
        let text = ''
        for (let at = 0; at < view.length; at += 32_768) text += String.fromCharCode(...view.subarray(at, at + 32_768))
        return { channels: buffer.numberOfChannels, left: btoa(text) }
      },
      { name: file, rate: result.manifest.sampleRate }
    )
    expect(decoded.channels).toBe(2)
    return new Float32Array(Uint8Array.from(Buffer.from(decoded.left, 'base64')).buffer)
  }

  it('decode alone to the same frames as in ffmpeg, and join without a seam', async () => {
    const page = await browser.newPage()
    await page.goto(`http://127.0.0.1:${(server.address() as AddressInfo).port}/`)
    let tail = new Float32Array()
    for (const [index, piece] of result.manifest.pieces.entries()) {
      const left = await decodeInPage(page, piece.file)
      expect(left.length).toBe(piece.decodedFrames)
      const part = (parts[index] ?? new Float32Array()).filter((_, at) => at % 2 === 0)
      const heard = left.subarray(piece.preroll, piece.preroll + piece.frames)
      const residual = heard.map((value, at) => value - (part[at] ?? 0))
      // Two decoders of one standard (RFC 6716) round differently, most at attacks; one frame of lag would give -20 dB.
      expect(20 * Math.log10(rms(residual) / rms(part)), piece.file).toBeLessThan(-60)
      // What the piece before holds beyond its own frames is the same sound as this one's beginning, to 16 bits.
      const worst = tail.reduce((most, value, at) => Math.max(most, Math.abs(value - (heard[at] ?? 0))), 0)
      expect(20 * Math.log10(worst + 1e-12), piece.file).toBeLessThan(-84)
      tail = left.slice(piece.preroll + piece.frames)
      expect(tail.length).toBeGreaterThan(200)
    }
  })
})
