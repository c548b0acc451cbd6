// What MediaRecorder is asked to write.
const mimes = ['audio/webm;codecs=opus', 'audio/mp4;codecs=mp4a.40.2', 'audio/mp4', 'audio/webm']

/** What this browser records into; empty for its own choice. */
export const chooseMime = (isSupported: (mime: string) => boolean): string => mimes.find(isSupported) ?? ''

/** Opus and AAC keep a bass whole at these, bits per second. */
export const bitsPerSecond = (channels: number): number => (channels >= 2 ? 192_000 : 128_000)
