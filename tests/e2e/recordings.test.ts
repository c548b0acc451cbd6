// Ways in for a recording: files of every kind through the picker, one heard before anybody signs in, one played here.
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, expect, it } from 'vitest'
import type { Page } from 'playwright-core'
import { ffprobe } from '../support/media.ts'
import { openLink, pluck } from './support/bring.ts'
import { deskIsReady, isMoving, loopButton, pause, placeSec, play, soon, speed, transport } from './support/desk.ts'
import { useVisits } from './support/visit.ts'

const folder = mkdtempSync(join(tmpdir(), 'plumbline-e2e-'))
const played = join(folder, 'played.wav')
const visits = useVisits(['--use-fake-device-for-media-stream', `--use-file-for-fake-audio-capture=${played}%noloop`])
beforeAll(() => void pluck(folder, 'played.wav', 30, '-ac', '2'))
afterAll(() => rmSync(folder, { recursive: true, force: true }))

const kinds: Record<string, string[]> = {
  'wav.wav': [],
  'flac.flac': [],
  'mp3.mp3': ['-b:a', '192k'],
  'm4a.m4a': ['-c:a', 'aac'],
  'ogg.ogg': ['-c:a', 'libopus'],
  'webm.webm': ['-c:a', 'libopus'],
  'aiff.aiff': []
}

const choose = async (page: Page, button: string, files: string[]): Promise<void> => {
  const [chooser] = await Promise.all([
    page.waitForEvent('filechooser'),
    page.getByRole('button', { name: button }).click()
  ])
  await chooser.setFiles(files)
}

/** Pixels that are not bare paper, on every canvas of the lanes: wavesurfer's lie in a shadow of their own. */
const drawnPixels = (page: Page): Promise<number> =>
  page.evaluate(() => {
    const canvases: HTMLCanvasElement[] = []
    const look = (at: ParentNode): void => {
      for (const element of at.querySelectorAll('*')) {
        if (element instanceof HTMLCanvasElement) canvases.push(element)
        if (element.shadowRoot) look(element.shadowRoot)
      }
    }
    look(document)
    return canvases.reduce((sum, canvas) => {
      const pixels = canvas.getContext('2d')?.getImageData(0, 0, canvas.width, canvas.height).data ?? []
      let drawn = 0
      for (let n = 3; n < pixels.length; n += 4) if ((pixels[n] ?? 0) > 128) drawn += 1
      return sum + drawn
    }, 0)
  })

it('takes a recording of every kind through the picker and plays it on its desk', async () => {
  const page = await visits.visit('jory')
  await page.goto('/')
  // A line slow enough for the progress to be seen.
  const line = await page.context().newCDPSession(page)
  await line.send('Network.enable')
  await line.send('Network.emulateNetworkConditions', {
    offline: false,
    latency: 20,
    downloadThroughput: -1,
    uploadThroughput: 600_000
  })
  const files = Object.entries(kinds).map(([name, options]) => pluck(folder, name, 4, ...options))
  await choose(page, 'Choose recordings', files)
  const keep = page.getByRole('dialog', { name: 'Keep these recordings' })
  await keep.getByRole('checkbox', { name: /those who do have agreed/ }).check()
  await keep.getByRole('button', { name: 'Keep them' }).click()
  await page
    .getByRole('progressbar', { name: /^Sending/ })
    .first()
    .waitFor()
  const percent = await page
    .getByRole('progressbar', { name: /^Sending/ })
    .first()
    .getAttribute('value')
  expect(Number(percent)).toBeLessThanOrEqual(100)
  for (const name of Object.keys(kinds)) await openLink(page, name.split('.')[0] ?? '').waitFor({ timeout: 90_000 })

  const told: string[] = []
  for (const [index, name] of Object.keys(kinds).entries()) {
    const title = name.split('.')[0] ?? ''
    await openLink(page, title).click()
    await deskIsReady(page)
    const id = new URL(page.url()).pathname.split('/').at(-1)
    const [take] = await visits.house.rows<{ duration_sec: number }>('select duration_sec from takes where id = $1', [
      id
    ])
    const wanted = Number(ffprobe(files[index] ?? '', 'format=duration'))
    told.push(`${title} ${Number(take?.duration_sec).toFixed(3)} (${wanted.toFixed(3)})`)
    expect(Math.abs(Number(take?.duration_sec) - wanted)).toBeLessThan(0.1)
    await soon(async () => expect(await drawnPixels(page)).toBeGreaterThan(500))
    await play(page)
    await isMoving(page)
    await page.goBack()
    await page.getByRole('heading', { name: 'What you play and hear' }).waitFor()
  }
  process.stderr.write(`lengths, s (ffprobe's): ${told.join(', ')}\n`)
})

it('says what is wrong with a playlist that calls itself a recording, and keeps nothing of it', async () => {
  // Chromium itself reads playlists, and says what it would not fetch.
  visits.expectTrouble(/Not allowed to load local resource/)
  const page = await visits.visit('jory')
  await page.goto('/')
  const list = join(folder, 'chorus.mp3')
  writeFileSync(list, '#EXTM3U\n#EXT-X-TARGETDURATION:4\n#EXTINF:4,\nfile:///etc/hostname\n#EXT-X-ENDLIST\n')
  await choose(page, 'Choose recordings', [list])
  await page.getByRole('button', { name: 'Keep this recording' }).click()
  const keep = page.getByRole('dialog', { name: 'Keep this recording' })
  await keep.getByRole('checkbox', { name: /those who do have agreed/ }).check()
  await keep.getByRole('button', { name: 'Keep it' }).click()
  await page.getByText('This file is a playlist, a list of other files.').waitFor()
  expect(await visits.house.rows("select 1 from takes where title = 'chorus'")).toEqual([])
})

it('plays, loops and slows a dropped file before anybody signs in, sends nothing, and keeps it through sign-up', async () => {
  const page = await visits.visit(null)
  const sent: string[] = []
  page.on('request', (request) => {
    if (request.method() !== 'GET' && new URL(request.url()).pathname.startsWith('/api/')) sent.push(request.url())
  })
  await page.goto('/')
  const path = pluck(folder, 'evening line.mp3', 8, '-b:a', '192k')
  const handle = await page.evaluateHandle(async (base64) => {
    const bytes = Uint8Array.from(atob(base64), (sign) => sign.charCodeAt(0))
    const data = new DataTransfer()
    data.items.add(new File([bytes], 'evening line.mp3', { type: 'audio/mpeg' }))
    return data
  }, readFileSync(path).toString('base64'))
  for (const type of ['dragenter', 'dragover', 'drop']) await page.dispatchEvent('body', type, { dataTransfer: handle })
  await page.getByRole('heading', { name: 'evening line.mp3' }).waitFor()
  await deskIsReady(page)
  await play(page)
  await isMoving(page)
  await page.keyboard.press('[')
  await soon(async () => expect(await placeSec(page)).toBeGreaterThan(2))
  await page.keyboard.press(']')
  await loopButton(page).click()
  await speed(page).focus()
  for (let step = 0; step < 5; step += 1) await page.keyboard.press('PageDown')
  expect(await speed(page).inputValue()).toBe('50')
  await transport(page).getByText('2nd time').waitFor()
  expect(await placeSec(page)).toBeLessThan(5)
  await pause(page)
  await soon(async () => expect(await drawnPixels(page)).toBeGreaterThan(500))
  expect(sent).toEqual([])

  await page.getByRole('button', { name: 'Keep this recording' }).click()
  const keep = page.getByRole('dialog', { name: 'Keep this recording' })
  await keep.getByRole('textbox', { name: 'Your name' }).fill('Ada Brink')
  await keep.getByRole('textbox', { name: 'E-mail' }).fill('ada@brink.example')
  await keep.getByLabel('Password', { exact: true }).fill('seven quiet lanterns')
  await keep.getByRole('button', { name: 'Go on' }).click()
  await keep.getByRole('checkbox', { name: /those who do have agreed/ }).check()
  await keep.getByRole('button', { name: 'Keep it' }).click()
  await openLink(page, 'evening line').click({ timeout: 60_000 })
  await deskIsReady(page)
  const [take] = await visits.house.rows<{ duration_sec: number }>(
    "select duration_sec from takes where title = 'evening line'"
  )
  expect(Math.abs(Number(take?.duration_sec) - 8)).toBeLessThan(0.1)
})

it('records what is played here, with everything made for speech switched off', async () => {
  const page = await visits.visit('ines', {
    permissions: ['microphone'],
    before: `
      const media = navigator.mediaDevices
      const ask = media?.getUserMedia.bind(media)
      window.asked = []
      if (media) media.getUserMedia = async (wanted) => {
        const stream = await ask(wanted)
        window.asked.push({ wanted: wanted.audio, got: stream.getAudioTracks()[0].getSettings() })
        return stream
      }`
  })
  await page.goto('/')
  await page.getByRole('button', { name: 'Record now' }).click()
  await page.getByRole('button', { name: 'Use the microphone' }).click()
  await page.getByRole('button', { name: 'Record', exact: true }).click()
  await page.getByRole('button', { name: 'Stop' }).waitFor()
  await page.waitForTimeout(5000)
  await page.getByRole('button', { name: 'Stop' }).click()
  await page.getByRole('button', { name: 'Listen to it' }).waitFor()
  const place = page.getByRole('slider', { name: 'Place' })
  const recordedSec = Number(await place.getAttribute('max'))
  expect(recordedSec).toBeGreaterThan(4)
  await page.getByRole('button', { name: 'Keep it' }).click()
  await page.getByRole('textbox', { name: 'Title' }).fill('Played into the page')
  await page.getByRole('checkbox', { name: /those who do have agreed/ }).check()
  await page.getByRole('button', { name: 'Keep it' }).click()
  await openLink(page, 'Played into the page').click({ timeout: 60_000 })
  await deskIsReady(page)
  const [take] = await visits.house.rows<{ duration_sec: number }>(
    "select duration_sec from takes where title = 'Played into the page'"
  )
  process.stderr.write(`recorded ${recordedSec} s, take ${take?.duration_sec} s\n`)
  expect(Math.abs(Number(take?.duration_sec) - recordedSec)).toBeLessThan(0.5)
  await soon(async () => expect(await drawnPixels(page)).toBeGreaterThan(500))
  const off = { echoCancellation: false, noiseSuppression: false, autoGainControl: false }
  const asked = await page.evaluate(() => (window as unknown as { asked: { wanted: object; got: object }[] }).asked)
  for (const { wanted, got } of asked) {
    expect(wanted).toMatchObject(off)
    expect(got).toMatchObject(off)
  }
  expect(asked.length).toBeGreaterThan(0)
})
