import { useEffect, useRef } from 'react'
import { limits } from '@shared/limits'
import { Button } from '@client/ui/button'
import { TextField } from '@client/ui/text-field'

export interface GroupNameProps {
  proposed: string
  /** Null while the proposed name will do. */
  value: string | null
  onChange: (value: string) => void
}

/** Somebody who plays alone has a group of one without having to name it; who wants another name asks for the field. */
export function GroupName({ proposed, value, onChange }: GroupNameProps) {
  const place = useRef<HTMLDivElement>(null)
  const isOwn = value !== null
  useEffect(() => {
    if (isOwn) place.current?.querySelector('input')?.select()
  }, [isOwn])
  return (
    <div ref={place}>
      {isOwn ? (
        <TextField
          label="Group name"
          name="group.name"
          autoComplete="organization"
          maxLength={limits.name}
          value={value}
          onChange={(event) => onChange(event.target.value)}
        />
      ) : (
        <p className="flex flex-wrap items-center gap-x-2">
          <span className="min-w-0 break-words">
            Your group will be called <strong className="font-semibold">{proposed}</strong>.
          </span>
          <span className="-ml-3 sm:ml-0">
            <Button look="quiet" onClick={() => onChange(proposed)}>
              Name it otherwise
            </Button>
          </span>
        </p>
      )}
    </div>
  )
}
