import { AppShell } from '@client/ui/app-shell'

/** Stands while a screen's files are on their way. */
export function Opening() {
  return (
    <AppShell>
      <p role="status" className="px-5 py-8 text-pencil">
        Opening the room
      </p>
    </AppShell>
  )
}
