import { useEffect, useId, useRef, useState } from 'react'
import type { ReactNode } from 'react'
import { useScope } from '@client/lib/scope'
import { Button } from './button'
import { cx } from './classes'

export interface DropZoneProps {
  /** The sentence on it: "Drop a recording here". */
  title: ReactNode
  /** What may be dropped: "wav, flac, mp3 … up to 1 GB each". */
  says: ReactNode
  /** On the picker's button. */
  pick?: string
  /** For the picker's filter, as in the `accept` attribute. Dropped files are not filtered: say in words what is refused. */
  accept?: string
  multiple?: boolean
  disabled?: boolean
  /** The brass button of the screen. */
  primary?: boolean
  /** Files dropped anywhere in the window count too. */
  wholeWindow?: boolean
  /** The heart of its screen: high enough to be aimed at from across a desktop. */
  tall?: boolean
  onFiles: (files: File[]) => void
  children?: ReactNode
}

const carriesFiles = (event: DragEvent) => event.dataTransfer?.types.includes('Files') ?? false

export function DropZone(props: DropZoneProps) {
  const { title, says, pick = 'Choose a file', accept, multiple = false, disabled = false, onFiles, children } = props
  const { primary = false, wholeWindow = false, tall = false } = props
  const id = useId()
  const zone = useRef<HTMLDivElement>(null)
  const picker = useRef<HTMLInputElement>(null)
  const [isOver, setOver] = useState(false)
  const give = (files: File[]) => {
    const taken = multiple ? files : files.slice(0, 1)
    if (taken.length > 0) onFiles(taken)
  }
  const latest = useRef(give)
  useEffect(() => {
    latest.current = give
  })

  useScope(
    (scope) => {
      const target: HTMLElement | null = wholeWindow ? document.body : zone.current
      if (!target || disabled) return
      // Entering a child fires before leaving its parent, so the depth is counted.
      let depth = 0
      const settle = (next: number) => {
        depth = Math.max(0, next)
        setOver(depth > 0)
      }
      scope.listen(target, 'dragenter', (event) => {
        if (!carriesFiles(event)) return
        event.preventDefault()
        settle(depth + 1)
      })
      scope.listen(target, 'dragover', (event) => {
        if (!carriesFiles(event)) return
        event.preventDefault()
        if (event.dataTransfer) event.dataTransfer.dropEffect = 'copy'
      })
      scope.listen(target, 'dragleave', (event) => {
        if (carriesFiles(event)) settle(depth - 1)
      })
      scope.listen(target, 'drop', (event) => {
        if (!carriesFiles(event)) return
        event.preventDefault()
        settle(0)
        latest.current([...(event.dataTransfer?.files ?? [])])
      })
    },
    [disabled, wholeWindow]
  )

  return (
    <div
      ref={zone}
      className={cx(
        'grid justify-items-start gap-2 rounded border-[1.5px] border-dashed bg-sheet px-5 py-6',
        tall && 'min-h-[min(22rem,50dvh)] content-center sm:px-10',
        isOver ? 'border-ink bg-wash' : 'border-pencil'
      )}
    >
      <p className="text-lg font-semibold">{isOver ? 'Let go to hand it over' : title}</p>
      <p id={id} className="max-w-prose text-pencil">
        {says}
      </p>
      <input
        ref={picker}
        type="file"
        hidden
        tabIndex={-1}
        accept={accept}
        multiple={multiple}
        aria-hidden="true"
        onChange={(event) => {
          give([...(event.target.files ?? [])])
          // The same file can then be chosen again.
          event.target.value = ''
        }}
      />
      <div className="mt-2 flex flex-wrap items-center gap-3">
        <Button
          look={primary ? 'primary' : 'plain'}
          icon="upload"
          disabled={disabled}
          aria-describedby={id}
          onClick={() => picker.current?.click()}
        >
          {pick}
        </Button>
        {children}
      </div>
    </div>
  )
}
