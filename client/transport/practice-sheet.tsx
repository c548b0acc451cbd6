import type { ReactNode } from 'react'
import { Button } from '@client/ui/button'
import { Popover } from '@client/ui/popover'
import { ClickChoices, ClickSwitch } from './click-part'
import { hearingNote } from './hearing'
import { LadderPart } from './ladder-part'
import { ListeningSettings, LowFocusSwitch } from './listening-part'
import { LoopSettings } from './loop-part'
import type { TransportBarProps } from './transport-bar'
import { usePlayer } from './use-player'
import { VolumeSlider } from './volume'

type PracticeSheetProps = TransportBarProps & Record<'tapButton' | 'againButton' | 'keysButton', ReactNode>

/** On a phone: all that has no room in the bar, behind one button. */
export function PracticeSheet(props: PracticeSheetProps) {
  const { player, listening, manner, click, kept, tapping, isShared = false } = props
  const { capabilities } = usePlayer(player)
  return (
    <Popover
      label="Practice"
      align="end"
      renderTrigger={(trigger) => (
        <Button {...trigger} aria-haspopup="dialog">
          Practice
        </Button>
      )}
    >
      {() => (
        <div className="grid w-80 max-w-full gap-4">
          <div className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1">
            <span>again {props.againButton}</span>
            {props.tapButton}
            {props.keysButton}
          </div>
          {tapping.words ? <p className="text-sm text-pencil">{tapping.words}</p> : null}
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
        </div>
      )}
    </Popover>
  )
}

const Group = ({ title, children }: { title: string; children: ReactNode }) => (
  <section aria-label={title} className="grid gap-3 border-t border-rule pt-3">
    <h3 className="font-semibold">{title}</h3>
    {children}
  </section>
)
