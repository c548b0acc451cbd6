// The single buttons of the transport.
import { IconButton } from '@client/ui/icon-button'
import type { KeyBinding } from './keys'
import { ActButton } from './part'
import type { Player } from './player'
import type { TransportCommands } from './transport-commands'
import { usePlayer } from './use-player'

interface ButtonProps {
  player: Player
  commands: TransportCommands
  keyMap: readonly KeyBinding[]
}

export const keysOf = (map: readonly KeyBinding[], action: KeyBinding['action']): string | undefined =>
  map.find((binding) => binding.action === action)?.keys[0]

export function StartButtons({ player, commands, keyMap }: ButtonProps) {
  const { state } = usePlayer(player)
  const isPlaying = state === 'playing'
  const isReady = state === 'ready' || isPlaying
  return (
    <div className="flex flex-none items-center gap-1 sm:gap-1.5">
      <IconButton
        icon="stepBack"
        label="Back a bar"
        keys={keysOf(keyMap, 'backBar')}
        disabled={!isReady}
        onClick={() => commands.nudge(-1)}
      />
      <IconButton
        look="round"
        icon={isPlaying ? 'pause' : 'play'}
        label={isPlaying ? 'Pause' : state === 'loading' ? 'Play when it is loaded' : 'Play'}
        keys={keysOf(keyMap, 'playPause')}
        disabled={state === 'empty'}
        onClick={commands.playPause}
      />
      <IconButton
        icon="stepForward"
        label="On a bar"
        keys={keysOf(keyMap, 'onBar')}
        disabled={!isReady}
        onClick={() => commands.nudge(1)}
      />
    </div>
  )
}

export function AgainButton({ player, commands, keyMap }: ButtonProps) {
  const { state } = usePlayer(player)
  return (
    <ActButton
      disabled={state !== 'ready' && state !== 'playing'}
      aria-label="Again from two bars before"
      aria-keyshortcuts={keysOf(keyMap, 'againBefore')}
      onClick={commands.againBefore}
    >
      two bars before
    </ActButton>
  )
}

export const TapButton = ({ onTap, keyMap }: { onTap: () => void; keyMap: readonly KeyBinding[] }) => (
  <ActButton aria-label="Tap the tempo" aria-keyshortcuts={keysOf(keyMap, 'tapTempo')} onClick={onTap}>
    tap<span className="sm:max-xl:hidden"> the tempo</span>
  </ActButton>
)

export const KeysButton = ({ onKeySheet }: { onKeySheet: () => void }) => (
  <button
    type="button"
    aria-label="Keys and pedals"
    aria-haspopup="dialog"
    aria-keyshortcuts="?"
    className="min-h-8 min-w-8 rounded px-1 text-sm whitespace-nowrap text-pencil hover:bg-wash hover:text-ink sm:px-2"
    onClick={onKeySheet}
  >
    ? keys
  </button>
)
