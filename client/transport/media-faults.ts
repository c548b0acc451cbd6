// What a media element's error means to a person, and whether trying again can help.

/** MediaError codes (HTML standard, "MediaError"): 1 aborted, 2 network, 3 decode, 4 source not supported. */
export interface MediaFault {
  message: string
  /** The connection may come back; the file will not get better. */
  canRetry: boolean
}

export const explainMediaError = (code: number | undefined, hasPlayedBefore: boolean): MediaFault => {
  if (code === 3) return { message: 'The recording is damaged here and cannot be played on.', canRetry: false }
  // A source that worked a moment ago is "not supported" when its server stopped answering.
  if (code === 2 || (code === 4 && hasPlayedBefore))
    return { message: 'The connection was lost. Playing goes on by itself when it is back.', canRetry: true }
  return { message: 'This recording cannot be played in this browser, or it is no longer there.', canRetry: false }
}

export const gaveUpMessage = 'The recording cannot be reached. Check the connection, then press play.'

/** Waiting times before trying again, in ms. About a minute in all. */
export const retryDelaysMs = [500, 1000, 2000, 4000, 8000, 15_000, 30_000]
