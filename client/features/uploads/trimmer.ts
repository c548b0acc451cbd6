// ffmpeg in the browser (see TRIMMING.md for its licence). Loaded only when a person asks to trim or shrink a recording;
// a worker mounts the file where it lies (WORKERFS), so that 2 GB of wav never enter its memory.
import { FFFSType, FFmpeg } from '@ffmpeg/ffmpeg'
import coreUrl from '@ffmpeg/core?url'
import wasmUrl from '@ffmpeg/core/wasm?url'
import { createScope } from '@client/lib/scope'
import { trimArguments, trimFormats, trimmedName, type TrimPlan } from './trim-plan'

export interface TrimSteps {
  onLoaded: () => void
  /** 0-1. */
  onProgress: (share: number) => void
  signal: AbortSignal
}

const source = '/source'

/** Cuts and encodes; throws an Error with a sentence for people, or AbortError when called off. */
export const trimFile = async (
  file: File,
  plan: TrimPlan,
  { onLoaded, onProgress, signal }: TrimSteps
): Promise<File> => {
  const ffmpeg = new FFmpeg()
  let lastWords = ''
  ffmpeg.on('log', ({ message }) => {
    lastWords = message
  })
  ffmpeg.on('progress', ({ progress }) => onProgress(Math.min(1, Math.max(0, progress))))
  const scope = createScope()
  scope.listen(signal, 'abort', () => ffmpeg.terminate())
  try {
    await ffmpeg.load({
      coreURL: new URL(coreUrl, document.baseURI).href,
      wasmURL: new URL(wasmUrl, document.baseURI).href
    })
    onLoaded()
    await ffmpeg.createDir(source)
    // A name of our own: the person's may begin with a dash or hold a slash.
    await ffmpeg.mount(FFFSType.WORKERFS, { blobs: [{ name: 'recording', data: file }] }, source)
    const { ending, mime } = trimFormats[plan.format]
    const target = `/trimmed.${ending === 'opus' ? 'ogg' : ending}`
    const code = await ffmpeg.exec(trimArguments(plan, `${source}/recording`, target))
    const bytes = code === 0 ? await ffmpeg.readFile(target) : null
    if (!(bytes instanceof Uint8Array) || bytes.byteLength === 0) throw new Error(lastWords)
    return new File([bytes.slice()], trimmedName(file.name, plan.format), { type: mime })
  } catch (error) {
    if (signal.aborted) throw new DOMException('The person called it off.', 'AbortError')
    throw new Error('This browser could not read the recording. Send it as it is: the server may know its kind.', {
      cause: error
    })
  } finally {
    scope.dispose()
    ffmpeg.terminate()
  }
}
