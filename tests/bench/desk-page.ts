// What runs inside the page: when the desk is usable, what came over the wire until then, and every frame.

export interface Usable {
  /** Since the navigation began: Play can be pressed and the sound is drawn. */
  usableMs: number
  /** When Play could first be pressed, and when the sound was first drawn. */
  playMs: number
  drawnMs: number
  firstPaintMs: number
  largestPaintMs: number
  nodes: number
  requests: number
  /** By ending: number, bytes on the wire, bytes unpacked. */
  bytes: Record<string, { files: number; wire: number; raw: number }>
}

export interface LongFrame {
  ms: number
  /** Longest scripts in it, and what style and layout took. */
  scripts: { what: string; ms: number }[]
  layoutMs: number
}

export interface Frames {
  gaps: number[]
  /** Turns of the wheel that something on the page took for itself. */
  taken: number
  long: LongFrame[]
}

interface LongFrameEntry extends PerformanceEntry {
  styleAndLayoutStart: number
  scripts: { duration: number; sourceURL: string; sourceFunctionName: string; invoker: string }[]
}

declare global {
  interface Window {
    benchUsable: Promise<Usable>
    benchFrames: (ms: number) => Promise<Frames>
  }
}

/** tsx names functions through a helper that no page has. */
export const helper = 'globalThis.__name = (value) => value'

/** Runs before anything of the page. */
export const watchPage = (): void => {
  let largestPaintMs = 0
  new PerformanceObserver((list) => {
    for (const entry of list.getEntries()) largestPaintMs = entry.startTime
  }).observe({ type: 'largest-contentful-paint', buffered: true })

  const bytesSoFar = (): Pick<Usable, 'requests' | 'bytes'> => {
    const entries = performance.getEntriesByType('resource') as PerformanceResourceTiming[]
    const bytes: Usable['bytes'] = {}
    for (const entry of entries) {
      const path = new URL(entry.name).pathname
      const ending = path.startsWith('/api/') ? 'api' : (/\.(\w+)$/.exec(path)?.[1] ?? 'other')
      const sum = (bytes[ending] ??= { files: 0, wire: 0, raw: 0 })
      sum.files += 1
      // Nothing was sent for what the browser had kept.
      sum.wire += entry.transferSize === 0 ? 0 : entry.encodedBodySize
      sum.raw += entry.decodedBodySize
    }
    return { requests: entries.length, bytes }
  }

  const canPlay = (): boolean => {
    const button = document.querySelector<HTMLButtonElement>('button[aria-label="Play"]')
    return button !== null && !button.disabled
  }

  const probe = document.createElement('canvas')
  probe.width = 64
  probe.height = 16
  const ink = probe.getContext('2d', { willReadFrequently: true })
  /** A drawn sound has height; a line for what is not there yet has none. */
  const isDrawn = (): boolean => {
    const hosts = document.querySelectorAll('section[aria-label="Timeline"] [data-testid="sound"] *')
    const canvases = [...hosts].flatMap((host) => [...(host.shadowRoot?.querySelectorAll('canvas') ?? [])])
    return canvases.some((canvas) => {
      if (!ink || canvas.width === 0 || canvas.height === 0) return false
      ink.clearRect(0, 0, 64, 16)
      ink.drawImage(canvas, 0, 0, 64, 16)
      const { data } = ink.getImageData(0, 0, 64, 16)
      const rows = Array.from({ length: 16 }, (_, row) =>
        data.subarray(row * 256, row * 256 + 256).some((value, i) => i % 4 === 3 && value > 8)
      )
      return rows.filter(Boolean).length >= 5
    })
  }

  window.benchUsable = new Promise((done) => {
    let playMs = NaN
    let drawnMs = NaN
    const look = (): void => {
      if (Number.isNaN(playMs) && canPlay()) playMs = performance.now()
      if (Number.isNaN(drawnMs) && isDrawn()) drawnMs = performance.now()
      const usableMs = Math.max(playMs, drawnMs)
      if (Number.isNaN(usableMs)) {
        requestAnimationFrame(look)
        return
      }
      const [paint] = performance.getEntriesByName('first-contentful-paint')
      const sofar = bytesSoFar()
      const nodes = document.querySelectorAll('*').length
      done({ usableMs, playMs, drawnMs, firstPaintMs: paint?.startTime ?? NaN, largestPaintMs, nodes, ...sofar })
    }
    requestAnimationFrame(look)
  })

  window.benchFrames = (ms) =>
    new Promise((done) => {
      const gaps: number[] = []
      const long: LongFrame[] = []
      let taken = 0
      const count = (event: WheelEvent): void => {
        if (event.defaultPrevented) taken += 1
      }
      window.addEventListener('wheel', count, { passive: true })
      const observer = new PerformanceObserver((list) => {
        for (const entry of list.getEntries() as LongFrameEntry[]) {
          const scripts = entry.scripts.map(({ duration, sourceURL, sourceFunctionName, invoker }) => ({
            what: `${sourceFunctionName || invoker} ${sourceURL.split('/').pop() ?? ''}`,
            ms: Math.round(duration)
          }))
          const layoutMs = Math.round(entry.startTime + entry.duration - entry.styleAndLayoutStart)
          long.push({
            ms: Math.round(entry.duration),
            scripts: scripts.sort((a, b) => b.ms - a.ms).slice(0, 3),
            layoutMs
          })
        }
      })
      observer.observe({ type: 'long-animation-frame' })
      const began = performance.now()
      let last = began
      const frame = (): void => {
        const now = performance.now()
        gaps.push(now - last)
        last = now
        if (now - began < ms) {
          requestAnimationFrame(frame)
          return
        }
        observer.disconnect()
        window.removeEventListener('wheel', count)
        done({ gaps, taken, long: long.sort((a, b) => b.ms - a.ms).slice(0, 5) })
      }
      requestAnimationFrame(frame)
    })
}
