import type { BarFault } from '@shared/music/chart-text'

/** Bars that cannot be read, by number, with the reason. */
export function BarFaults({ faults }: { faults: readonly BarFault[] }) {
  if (faults.length === 0) return null
  return (
    <ul aria-label="Bars that cannot be read" className="grid gap-0.5 text-sm text-fault">
      {faults.map(({ bar, message }, i) => (
        <li key={`${bar}-${i}`}>
          <span aria-hidden="true">! </span>
          {message}
        </li>
      ))}
    </ul>
  )
}
