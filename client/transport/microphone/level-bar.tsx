import { useRef, useState } from 'react'
import { useScope } from '@client/lib/scope'
import { createLevelMeter, peakOf } from './level'

/** How loud the input is: an ink bar with the highest peak held, and words when it is too much. */
export function LevelBar({ stream }: { stream: MediaStream }) {
  const bar = useRef<HTMLSpanElement>(null)
  const held = useRef<HTMLSpanElement>(null)
  const [isTooLoud, setTooLoud] = useState(false)
  useScope(
    (scope) => {
      const context = new AudioContext()
      const source = context.createMediaStreamSource(stream)
      const splitter = context.createChannelSplitter(2)
      source.connect(splitter)
      const sides = [0, 1].map((channel) => {
        const analyser = context.createAnalyser()
        analyser.fftSize = 2048
        splitter.connect(analyser, channel)
        return { analyser, samples: new Float32Array(analyser.fftSize) }
      })
      scope.add(() => void context.close())
      const meter = createLevelMeter()
      scope.eachFrame((nowMs) => {
        const peak = Math.max(
          ...sides.map(({ analyser, samples }) => {
            analyser.getFloatTimeDomainData(samples)
            return peakOf(samples)
          })
        )
        const level = meter.read(peak, nowMs)
        if (bar.current) bar.current.style.transform = `scaleX(${level.share})`
        if (held.current) held.current.style.left = `calc(${level.heldShare * 100}% - 2px)`
        setTooLoud(level.isTooLoud)
      })
    },
    [stream]
  )
  return (
    <div className="grid gap-1">
      <div className="flex items-baseline justify-between gap-4 text-sm">
        <span className="text-pencil">How loud it comes in</span>
        <span role="status" className={isTooLoud ? 'font-semibold text-fault' : 'text-pencil'}>
          {isTooLoud ? 'Too loud: turn the input down' : ''}
        </span>
      </div>
      <div
        aria-hidden="true"
        className="relative h-3 overflow-hidden border border-pencil bg-sheet"
        data-testid="level"
      >
        <span ref={bar} className="absolute inset-0 origin-left scale-x-0 bg-ink" />
        <span ref={held} className="absolute inset-y-0 left-0 w-0.5 bg-ink" />
      </div>
    </div>
  )
}
