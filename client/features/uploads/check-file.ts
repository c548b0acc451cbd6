// What can be told of a file before it is sent. Whether it really is a recording, only the server can say.
import { limits } from '@shared/limits'
import { bytesWords } from './bytes-words'

/** For the picker's filter; the server believes only what is in the file. */
export const recordingTypes =
  'audio/*,.wav,.flac,.mp3,.m4a,.aac,.ogg,.oga,.opus,.webm,.aif,.aiff,video/webm,application/ogg'

export const recordingWords = `wav, flac, mp3, m4a, aac, ogg, opus, webm or aiff, up to ${bytesWords(limits.uploadBytes)} each`

/** Why this file need not be sent at all, or null. */
export const faultOfFile = ({ size }: Pick<File, 'size'>): string | null => {
  if (size === 0) return 'This file is empty.'
  if (size > limits.uploadBytes)
    return `This file has ${bytesWords(size)}; ${bytesWords(limits.uploadBytes)} is the most that may be sent. Trim or shrink it first.`
  return null
}

/** A title to begin with: the file's name as a person would say it. */
export const titleOfFile = (name: string): string => {
  const bare = name
    .replace(/\.[a-z0-9]{1,5}$/i, '')
    .replace(/\p{Cc}/gu, ' ')
    .replace(/[_\s]+/g, ' ')
    .trim()
  return bare.slice(0, limits.title).trim() || 'Untitled recording'
}
