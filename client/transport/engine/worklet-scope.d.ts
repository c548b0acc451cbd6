// What stands in an AudioWorkletGlobalScope (Web Audio API 1.1, section 1.32); TypeScript's libraries do not know it.
declare class AudioWorkletProcessor {
  readonly port: MessagePort
}
declare function registerProcessor(name: string, processor: new () => AudioWorkletProcessor): void
declare const currentFrame: number
declare const currentTime: number
declare const sampleRate: number
