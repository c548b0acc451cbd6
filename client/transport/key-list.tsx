import { shownKey, type KeyBinding } from './keys'

/** Every action with its keys, as they stand on the key sheet and in the help. */
export function KeyList({ map }: { map: readonly KeyBinding[] }) {
  return (
    <dl className="grid max-w-prose grid-cols-[auto_minmax(0,1fr)] gap-x-4 gap-y-1.5">
      {map.map(({ action, label, keys }) => (
        <div key={action} className="col-span-2 grid grid-cols-subgrid items-baseline">
          <dt className="flex flex-wrap gap-1">
            {keys.map((key) => (
              <kbd key={key} className="rounded border border-pencil px-1.5 font-sans text-sm whitespace-nowrap">
                {shownKey(key)}
              </kbd>
            ))}
          </dt>
          <dd>{label}</dd>
        </div>
      ))}
    </dl>
  )
}
