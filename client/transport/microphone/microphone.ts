// Asking for the microphone as an instrument needs it: everything that browsers do to speech switched off.

/** What is missing for recording here, in words; null when nothing is. */
export const missingForRecording = (
  page: { isSecureContext: boolean; mediaDevices: unknown; recorder: unknown } = {
    isSecureContext: window.isSecureContext,
    mediaDevices: navigator.mediaDevices,
    recorder: typeof MediaRecorder === 'undefined' ? undefined : MediaRecorder
  }
): string | null => {
  if (!page.isSecureContext)
    return 'Browsers give the microphone only to pages that come over https, or from this very computer (localhost). Whoever runs this server can give it a certificate; until then record elsewhere and drop the file here.'
  if (!page.mediaDevices) return 'This browser gives pages no microphone. Record elsewhere and drop the file here.'
  if (!page.recorder)
    return 'This browser cannot record (it has no MediaRecorder). Record elsewhere and drop the file here.'
  return null
}

const wanted = {
  echoCancellation: false,
  noiseSuppression: false,
  autoGainControl: false,
  channelCount: { ideal: 2 }
} satisfies MediaTrackConstraints

export const openMicrophone = (deviceId: string | null): Promise<MediaStream> =>
  navigator.mediaDevices.getUserMedia({
    audio: deviceId ? { ...wanted, deviceId: { exact: deviceId } } : wanted,
    video: false
  })

/** Why the browser gave no microphone. */
export const refusalWords = (error: unknown): string => {
  const name = error instanceof DOMException ? error.name : ''
  if (name === 'NotAllowedError')
    return 'The browser was not allowed to use the microphone. Allow it beside the address of this page, then try again.'
  if (name === 'NotFoundError' || name === 'OverconstrainedError')
    return 'There is no microphone or input here. Plug one in, then try again.'
  if (name === 'NotReadableError') return 'The input is held by another program. Close that, then try again.'
  return 'The microphone could not be opened. Try again, or choose another input.'
}

export interface InputChoice {
  id: string
  name: string
}

export const listInputs = async (): Promise<InputChoice[]> => {
  const devices = await navigator.mediaDevices.enumerateDevices()
  return devices
    .filter(({ kind, deviceId }) => kind === 'audioinput' && deviceId !== '')
    .map(({ deviceId, label }, index) => ({ id: deviceId, name: label || `Input ${index + 1}` }))
}

const meddling = [
  ['echoCancellation', 'echo cancelling'],
  ['noiseSuppression', 'noise suppression'],
  ['autoGainControl', 'automatic gain']
] as const

type Settings = Pick<
  MediaTrackSettings,
  'echoCancellation' | 'noiseSuppression' | 'autoGainControl' | 'channelCount' | 'sampleRate'
>

/** Whether the browser did as it was asked, in words. */
export const obeyedWords = (settings: Settings): { hasObeyed: boolean; words: string } => {
  const on = meddling.filter(([key]) => settings[key] === true).map(([, words]) => words)
  const untold = meddling.filter(([key]) => settings[key] === undefined).map(([, words]) => words)
  const sides = settings.channelCount === undefined ? null : settings.channelCount >= 2 ? 'stereo' : 'one channel'
  const rate = settings.sampleRate ? `${Number((settings.sampleRate / 1000).toFixed(1))} kHz` : null
  const what = [sides, rate].filter(Boolean).join(', ')
  const tail = what ? ` It comes in ${what}.` : ''
  if (on.length > 0)
    return {
      hasObeyed: false,
      words: `The browser insists on ${inWords(on)}, which is made for speech and eats low and long notes. Another input or browser may leave it off.${tail}`
    }
  if (untold.length > 0)
    return {
      hasObeyed: true,
      words: `The browser does not say whether ${inWords(untold)} is off; listen for it.${tail}`
    }
  return {
    hasObeyed: true,
    words: `The sound is left as it is: no echo cancelling, noise suppression or automatic gain.${tail}`
  }
}

const inWords = (parts: readonly string[]): string =>
  parts.length < 2 ? parts.join('') : `${parts.slice(0, -1).join(', ')} and ${parts.at(-1)}`
