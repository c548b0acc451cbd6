// What the first bytes say about a file that ffprobe refused: only to choose the right sentence, never to accept anything.
import { open } from 'node:fs/promises'
import type { MediaFaultCode } from './faults.ts'

const headBytes = 4096

export const readHead = async (path: string): Promise<Buffer> => {
  const file = await open(path, 'r')
  try {
    const { buffer, bytesRead } = await file.read(Buffer.alloc(headBytes), 0, headBytes, 0)
    return buffer.subarray(0, bytesRead)
  } finally {
    await file.close()
  }
}

type Mark = { code: MediaFaultCode; matches: (head: Buffer, text: string) => boolean }

const at =
  (offset: number, ...words: string[]) =>
  (_: Buffer, text: string) =>
    words.some((word) => text.startsWith(word, offset))

const marks: Mark[] = [
  { code: 'empty', matches: (head) => head.length === 0 },
  { code: 'playlist', matches: (_, text) => /^\s*(#EXTM3U|ffconcat\b|\[playlist\]|#EXTINF|file\s+\S)/i.test(text) },
  { code: 'playlist', matches: (_, text) => /^[^]{0,400}<(asx|smil|mpd|playlist|xspf)\b/i.test(text) },
  // AVI, Flash video, MPEG programme and transport streams.
  { code: 'video', matches: (_, text) => text.startsWith('RIFF') && text.startsWith('AVI ', 8) },
  { code: 'video', matches: at(0, 'FLV', '\x00\x00\x01\xba') },
  { code: 'video', matches: (head) => head[0] === 0x47 && head[188] === 0x47 && head[376] === 0x47 },
  // MIDI, Monkey's Audio, WavPack, Core Audio, AMR, Windows Media, Musepack.
  { code: 'unsupported', matches: at(0, 'MThd', 'MAC ', 'wvPk', 'caff', '#!AMR', '\x30\x26\xb2\x75', 'MPCK', 'MP+') },
  // The beginning of a recording that then could not be read.
  { code: 'truncated', matches: at(0, 'RIFF', 'RF64', 'fLaC', 'OggS', 'ID3', '\x1a\x45\xdf\xa3') },
  { code: 'truncated', matches: (_, text) => text.startsWith('FORM') && /^AIF[FC]/.test(text.slice(8, 12)) },
  { code: 'truncated', matches: at(4, 'ftyp', 'moov', 'mdat') }
]

export const faultOfHead = (head: Buffer): MediaFaultCode => {
  const text = head.toString('latin1').replace(/^\xef\xbb\xbf/, '')
  return marks.find((mark) => mark.matches(head, text))?.code ?? 'not-audio'
}

/** Sizes that a recorder writes before it knows the length, or never comes back to correct. */
const isPlaceholder = (size: number): boolean => size === 0 || size >= 0x7ffff000

/**
 * Whether a WAV promises clearly more sound than the file holds: an upload or copy that was cut off. A header that was
 * never completed promises nothing and is no fault.
 */
export const wavIsCutOff = (head: Buffer, fileBytes: number): boolean => {
  if (head.toString('latin1', 0, 4) !== 'RIFF') return false
  for (let offset = 12; offset + 8 <= head.length;) {
    const size = head.readUInt32LE(offset + 4)
    if (head.toString('latin1', offset, offset + 4) === 'data') {
      const missing = size - (fileBytes - offset - 8)
      return !isPlaceholder(size) && missing > Math.max(65_536, size * 0.02)
    }
    offset += 8 + size + (size % 2)
  }
  return false
}
