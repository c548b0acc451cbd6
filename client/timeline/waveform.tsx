import { memo, useRef } from 'react'
import WaveSurfer from 'wavesurfer.js'
import { useScope } from '@client/lib/scope'
import { styleNonce } from '@client/lib/style-nonce'
import { useLatest } from '@client/lib/use-latest'
import type { Player } from '@client/transport/player'
import { readTokens, watchTokens } from '@client/ui/tokens'
import type { Sec } from '@shared/units'
import { drawWaveform } from './draw-waveform'
import { contentPx, type View } from './geometry'
import type { PeaksSource } from './peaks-source'
import { playerAsMedia } from './player-media'
import type { ViewStore } from './view-store'

export const soundHeightPx = 96

export interface WaveformProps {
  store: ViewStore
  /** Wavesurfer follows it. */
  player: Player
  durationSec: Sec
  peaks: PeaksSource | null
  /** Linear. */
  gain: number
}

/**
 * Wavesurfer lays out and recycles the canvases; what is on them is drawn from our own peaks, so that it needs no decoding,
 * no copy of the peaks and stays sharp at every zoom. It is driven by the player, whatever engine that is; our own line shows
 * the place, so its cursor and progress are off.
 */
export const Waveform = memo(function Waveform({ store, player, durationSec, peaks, gain }: WaveformProps) {
  const box = useRef<HTMLDivElement>(null)
  const model = useLatest({ peaks, gain })
  const redraw = useRef<() => void>(() => {})

  useScope(
    (scope) => {
      const container = box.current
      if (!container || !(durationSec > 0)) return
      let ink = readTokens(container).ink
      let isReady = false
      let shown: View = store.get()
      const surfer = WaveSurfer.create({
        container,
        media: playerAsMedia(player, scope),
        duration: durationSec,
        peaks: [new Float32Array(2)],
        height: soundHeightPx,
        interact: false,
        dragToSeek: false,
        autoScroll: false,
        hideScrollbar: true,
        cursorWidth: 0,
        cspNonce: styleNonce(),
        minPxPerSec: wantedPxPerSec(shown),
        renderFunction: (_peaks, ctx) => {
          const { canvas } = ctx
          const secPerPx = durationSec / contentPx(store.get()) / (canvas.width / (parseFloat(canvas.style.width) || 1))
          const startSec = (parseFloat(canvas.style.left) || 0) * (durationSec / contentPx(store.get()))
          const { peaks: source, gain: linear } = model.current
          drawWaveform(ctx, canvas.width, canvas.height, {
            peaks: source ?? { levels: [] },
            startSec,
            secPerPx,
            gain: linear,
            ink
          })
        }
      })
      scope.add(() => surfer.destroy())
      still(surfer)

      const follow = () => {
        if (!isReady) return
        const view = store.get()
        const isZoomed = view.pxPerSec !== shown.pxPerSec || view.widthPx !== shown.widthPx
        shown = view
        if (isZoomed) surfer.zoom(wantedPxPerSec(view))
        if (surfer.getScroll() !== view.scrollPx) surfer.setScroll(view.scrollPx)
      }
      redraw.current = () => {
        if (isReady) surfer.zoom(wantedPxPerSec(store.get()))
      }
      scope.add(
        surfer.on('ready', () => {
          isReady = true
          shown = { ...shown, pxPerSec: -1 }
          follow()
        })
      )
      scope.add(store.subscribe(follow))
      watchTokens(scope, (tokens) => {
        ink = tokens.ink
        redraw.current()
      })
      scope.add(() => {
        redraw.current = () => {}
      })
    },
    [store, player, durationSec]
  )
  useScope(() => redraw.current(), [peaks, gain])

  return <div ref={box} className="pointer-events-none absolute inset-0" aria-hidden="true" />
})

/** Half a pixel less than wanted, since wavesurfer rounds the width up. */
const wantedPxPerSec = (view: View): number => Math.max(0, (contentPx(view) - 0.5) / view.durationSec)

/**
 * Its progress overlay is a second drawing clipped anew every frame: switched off, in a style sheet of its own that also
 * holds where a content security policy refuses the style element wavesurfer brings along.
 */
const still = (surfer: WaveSurfer): void => {
  surfer.getRenderer().renderProgress = () => {}
  const shadow = surfer.getWrapper().getRootNode()
  if (!(shadow instanceof ShadowRoot) || !('adoptedStyleSheets' in shadow)) return
  const sheet = new CSSStyleSheet()
  sheet.replaceSync(`
    .scroll { overflow: hidden !important; width: 100%; position: relative; }
    .wrapper { position: relative; }
    .canvases > div { position: relative; }
    .progress, .cursor { display: none !important; }
    canvas { display: block; position: absolute; top: 0; }
  `)
  shadow.adoptedStyleSheets = [sheet]
}
