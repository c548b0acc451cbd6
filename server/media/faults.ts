// What can be wrong with a recording, in words for the person who sent it. Faults of the server are not here: they are thrown.

const sentences = {
  'not-audio':
    'This file is not a recording. Please choose an audio file such as WAV, FLAC, MP3, M4A, Ogg, WebM or AIFF.',
  empty: 'There is no sound in this file. Please check that the recording was saved completely and try again.',
  truncated: 'This recording is cut off or damaged. Please copy or export it again and send the new file.',
  silent: 'This recording is silent from beginning to end. Please check the input it was recorded from.',
  'too-long': 'This recording is longer than this server accepts. Please cut it into shorter recordings.',
  video: 'This file is a video. Please export only its sound, for example as M4A or WAV.',
  playlist: 'This file is a playlist, a list of other files. Please send the recording itself.',
  unsupported: 'This kind of audio cannot be read here. Please convert it to WAV, FLAC, MP3, M4A, Ogg or WebM.',
  'too-heavy':
    'This recording took more work to read than this server allows. Please export it as WAV or MP3 and try again.',
  'too-large': 'This recording is larger than this server accepts. Please shorten or compress it.',
  incomplete: 'Some pieces of this recording are missing. Please record it again.'
} as const

export type MediaFaultCode = keyof typeof sentences

export type MediaFault = { code: MediaFaultCode; sentence: string }

export const mediaFault = (code: MediaFaultCode): MediaFault => ({ code, sentence: sentences[code] })

export const mediaFaultCodes = Object.keys(sentences) as MediaFaultCode[]

/** The server has no room left: nobody's recording is at fault, and the same work may be tried again later. */
export class StorageFull extends Error {
  override name = 'StorageFull'
  constructor(options?: ErrorOptions) {
    super('No room left on the storage', options)
  }
}

const fullCodes = new Set(['ENOSPC', 'EDQUOT'])

/** Turns the file system's "no room" into `StorageFull`; every other error stays what it is. */
export const storageError = (error: unknown): unknown =>
  error instanceof Error && 'code' in error && fullCodes.has(String(error.code))
    ? new StorageFull({ cause: error })
    : error
