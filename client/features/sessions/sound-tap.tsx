import { Button } from '@client/ui/button'
import { Dialog } from '@client/ui/dialog'

interface SoundTapProps {
  leaderName: string | null
  onAllow: () => void
  onLeave: () => void
}

/** Browsers let sound out only after a tap: the one tap of joining. */
export function SoundTap({ leaderName, onAllow, onLeave }: SoundTapProps) {
  return (
    <Dialog
      title="Listening together"
      mustAnswer
      onClose={onLeave}
      actions={
        <>
          <Button look="primary" onClick={onAllow}>
            Let me hear it
          </Button>
          <Button onClick={onLeave}>Not now</Button>
        </>
      }
    >
      <p>
        {leaderName ? `${leaderName} is playing this take for everybody.` : 'This take is playing for everybody.'} Your
        browser wants one tap before it lets the sound out.
      </p>
    </Dialog>
  )
}
