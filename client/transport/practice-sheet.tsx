import { useEffect, useRef, type ReactNode } from 'react'
import { IconButton } from '@client/ui/icon-button'
import { ClickChoices, ClickSwitch } from './click-part'
import { hearingNote } from './hearing'
import { LadderPart } from './ladder-part'
import { ListeningSettings, LowFocusSwitch } from './listening-part'
import { LoopSettings } from './loop-part'
import type { BarProps } from './transport-bar'
import { AgainButton, KeysButton, TapButton } from './transport-buttons'
import { usePlayer } from './use-player'
import { VolumeSlider } from './volume'

/** On a phone: all that has no room in the bar, above it, while the bar goes on being there. Esc closes it. */
export function PracticeSheet({ onClose, ...props }: BarProps & { onClose: () => void }) {
  const { player, commands, listening, manner, click, kept, tapping, isShared, keyMap } = props
  const { capabilities } = usePlayer(player)
  const box = useRef<HTMLElement>(null)
  useEffect(() => {
    box.current?.focus()
  }, [])
  return (
    // Esc does from the keyboard what the cross does.
    // oxlint-disable-next-line jsx-a11y/no-noninteractive-element-interactions
    <section
      ref={box}
      tabIndex={-1}
      aria-label="Practice"
      className="-mx-3 mb-2 grid max-h-[50dvh] gap-4 overflow-y-auto border-b border-rule px-3 pb-3"
      onKeyDown={(event) => {
        if (event.key !== 'Escape' || event.defaultPrevented) return
        event.preventDefault()
        onClose()
      }}
    >
      <div className="flex items-center justify-between gap-x-4">
        <h2 className="font-semibold">Practice</h2>
        <div className="flex items-center gap-1">
          <KeysButton onKeySheet={props.onKeySheet} />
          <IconButton icon="close" label="Close practice" onClick={onClose} />
        </div>
      </div>
      <div className="flex flex-wrap items-center gap-x-6 gap-y-1">
        <span>
          again from <AgainButton player={player} commands={commands} keyMap={keyMap} />
        </span>
        <TapButton onTap={tapping.tap} keyMap={keyMap} />
      </div>
      <LadderPart manner={manner} isShared={isShared} />
      <Group title="Listening">
        <LowFocusSwitch {...listening} />
        <ListeningSettings listening={listening} />
      </Group>
      {click ? (
        <Group title="Click">
          <ClickSwitch click={click} />
          {click.meter === null ? (
            <p className="text-sm text-pencil">It clicks once the bars of this take are laid.</p>
          ) : (
            <ClickChoices click={click} />
          )}
        </Group>
      ) : null}
      <Group title="Loop">
        <LoopSettings manner={manner} canRest={capabilities.clicks} isShared={isShared} kept={kept} />
      </Group>
      <Group title="Volume">
        <VolumeSlider volume={props.volume} onVolume={props.onVolume} />
        <p className="text-sm text-pencil">{hearingNote}</p>
      </Group>
    </section>
  )
}

const Group = ({ title, children }: { title: string; children: ReactNode }) => (
  <section aria-label={title} className="grid gap-3 border-t border-rule pt-3">
    <h3 className="font-semibold">{title}</h3>
    {children}
  </section>
)
