import { useRef, useState } from 'react'
import { Button } from '@client/ui/button'
import { useSay } from '@client/ui/live-log'
import { TextField } from '@client/ui/text-field'

/** Something to be copied: by the button, or by hand where the browser does not let pages copy. */
export function CopyField({ label, text }: { label: string; text: string }) {
  const place = useRef<HTMLDivElement>(null)
  const say = useSay()
  const [done, setDone] = useState<'not' | 'copied' | 'by hand'>('not')
  const select = (): void => place.current?.querySelector('input')?.select()
  const handleCopy = async (): Promise<void> => {
    try {
      await navigator.clipboard.writeText(text)
      setDone('copied')
      say('Copied.')
    } catch {
      select()
      setDone('by hand')
      say('Selected. Copy it by hand.')
    }
  }
  return (
    <div ref={place} className="grid gap-2">
      <TextField label={label} readOnly value={text} onFocus={select} />
      <div className="flex flex-wrap items-center gap-3">
        <Button onClick={() => void handleCopy()}>Copy</Button>
        {done === 'not' ? null : (
          <span className="text-sm text-pencil">{done === 'copied' ? 'Copied.' : 'Selected: copy it by hand.'}</span>
        )}
      </div>
    </div>
  )
}
