// Before signing in: what this is, and a place to drop a recording.
import { AccountMenu } from '@client/features/account/account-menu'
import { Unfinished } from '@client/features/recorder/unfinished'
import { LeftHere } from '@client/features/trial/left-here'
import { openTrial, useTrial } from '@client/features/trial/trial-store'
import { recordingTypes, recordingWords } from '@client/features/uploads/check-file'
import { AppShell } from '@client/ui/app-shell'
import { Button } from '@client/ui/button'
import { DropZone } from '@client/ui/drop-zone'
import { useStep } from './use-step'

export function FirstScreen() {
  const { go } = useStep()
  const trial = useTrial()
  const open = (file: File, durationSec?: number): void => {
    openTrial(file, Date.now(), durationSec)
    go('listen')
  }
  return (
    <AppShell right={<AccountMenu />}>
      <div className="mx-auto grid w-full max-w-3xl gap-6 px-3 pt-6 pb-12 sm:px-5 sm:pt-14">
        <title>Plumbline: a study room for recorded lines</title>
        <header>
          <h1 className="text-xl font-semibold">A study room for recorded lines</h1>
          <p className="mt-2 max-w-prose text-pencil">
            Slow a recording until every note is clear, lay the form under it, and ask the people you play with what
            they hear in bar 19.
          </p>
        </header>
        <DropZone
          primary
          tall
          wholeWindow
          title="Drop a recording here"
          says={`It plays at once, and stays in this browser until you keep it: ${recordingWords}.`}
          pick="Choose a recording"
          accept={recordingTypes}
          onFiles={([file]) => file && open(file)}
        >
          <Button icon="microphone" onClick={() => go('record')}>
            Record now
          </Button>
        </DropZone>
        {trial ? <LeftHere trial={trial} onOpen={() => go('listen')} /> : null}
        <Unfinished ownerId={null} renderKeep={nothing} onKept={nothing} onFile={open} />
      </div>
    </AppShell>
  )
}

/** Without an account nothing began on the server, so there is nothing to keep there. */
const nothing = () => null
