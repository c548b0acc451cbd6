import { useMemo } from 'react'
import { hatchOf, hatchPath, initialsOf } from './hatch'

export interface InitialsProps {
  /** Decides the hatch: the member's id, never the name. */
  id: string
  name: string
  /** Pixels. */
  size?: number
  /** Leads the session: a brass underline as well. */
  leads?: boolean
  /** The name stands beside it anyway. */
  decorative?: boolean
}

/** A member as a small box: initials over the hatch pattern that is theirs alone. */
export function Initials({ id, name, size = 24, leads = false, decorative = false }: InitialsProps) {
  const hatch = useMemo(() => hatchOf(id), [id])
  const words = leads ? `${name}, leads` : name
  return (
    <svg
      width={size}
      height={size}
      viewBox="0 0 24 24"
      role={decorative ? undefined : 'img'}
      aria-label={decorative ? undefined : words}
      aria-hidden={decorative || undefined}
      className="flex-none overflow-hidden bg-sheet text-pencil"
    >
      {decorative ? null : <title>{words}</title>}
      <path
        d={hatchPath(hatch)}
        stroke="currentColor"
        strokeWidth="0.9"
        strokeDasharray={hatch.broken ? '2 2' : undefined}
        opacity="0.7"
        fill="none"
      />
      <rect x="0.5" y="0.5" width="23" height="23" fill="none" stroke="currentColor" />
      <text
        x="12"
        y="15.6"
        textAnchor="middle"
        fontSize="10"
        fontWeight="600"
        fill="var(--ink)"
        stroke="var(--sheet)"
        strokeWidth="2.25"
        strokeLinejoin="round"
        paintOrder="stroke"
      >
        {initialsOf(name)}
      </text>
      {leads ? <path d="M0 22.75h24" stroke="var(--brass)" strokeWidth="2.5" /> : null}
    </svg>
  )
}
