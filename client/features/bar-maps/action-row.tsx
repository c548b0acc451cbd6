import type { ReactNode } from 'react'

/** One thing that can be done to bars: its buttons, and a line that says what they do. */
export function ActionRow({ says, children }: { says: ReactNode; children: ReactNode }) {
  return (
    <div className="grid content-start gap-1 border-t border-rule py-2.5">
      <div className="flex flex-wrap items-center gap-x-2 gap-y-1.5">{children}</div>
      <p className="text-sm text-pencil">{says}</p>
    </div>
  )
}

/** Two columns where there is room. */
export function ActionRows({ children }: { children: ReactNode }) {
  return <div className="grid gap-x-8 md:grid-cols-2">{children}</div>
}
