// Signed in: a place to drop recordings, and what waits. Nothing else.
import { useState } from 'react'
import type { Me } from '@shared/contracts/account'
import { AccountMenu } from '@client/features/account/account-menu'
import { useMyGroups } from '@client/features/home/api'
import { GroupLinks } from '@client/features/home/group-links'
import { Waiting } from '@client/features/home/waiting'
import { Unfinished } from '@client/features/recorder/unfinished'
import { LeftHere } from '@client/features/trial/left-here'
import { dropTrial, openTrial, useTrial } from '@client/features/trial/trial-store'
import { recordingTypes, recordingWords } from '@client/features/uploads/check-file'
import { useUploadQueue, useUploads } from '@client/features/uploads/provider'
import { UploadList } from '@client/features/uploads/upload-list'
import { freshId } from '@client/lib/ids'
import { AppShell } from '@client/ui/app-shell'
import { Button } from '@client/ui/button'
import { DropZone } from '@client/ui/drop-zone'
import { Page } from '@client/ui/page'
import { Sheet } from '@client/ui/sheet'
import { FollowGroup } from './follow-group'
import { KeepDialog, type Recording } from './keep-dialog'
import { KeepRecorded } from './keep-recorded'
import { TakeRow } from './take-row'
import { useStep } from './use-step'

export function HomeScreen({ person }: { person: Me }) {
  const { go } = useStep()
  const groups = useMyGroups().data?.items ?? []
  const queue = useUploadQueue()
  const uploads = useUploads(person.id)
  const trial = useTrial()
  const [several, setSeveral] = useState<Recording[] | null>(null)
  const isOnItsWay = trial ? uploads.some(({ id }) => id === trial.id) : false

  const listen = (file: File, durationSec?: number): void => {
    openTrial(file, Date.now(), durationSec)
    go('listen')
  }
  // One is heard first; several are kept together and heard on their desks.
  const handleFiles = (files: File[]): void => {
    const [only] = files
    if (files.length === 1 && only) listen(only)
    else setSeveral(files.map((file) => ({ id: freshId(), file })))
  }

  return (
    <AppShell right={<AccountMenu />}>
      {groups.map(({ id }) => (
        <FollowGroup key={id} groupId={id} />
      ))}
      <Page title="What you play and hear">
        <DropZone
          primary
          multiple
          wholeWindow
          title="Drop recordings here"
          says={`One plays at once; several are kept together: ${recordingWords}.`}
          pick="Choose recordings"
          accept={recordingTypes}
          onFiles={handleFiles}
        >
          <Button icon="microphone" onClick={() => go('record')}>
            Record now
          </Button>
        </DropZone>
        {trial && !isOnItsWay ? <LeftHere trial={trial} onOpen={() => go('listen')} /> : null}
        <Unfinished
          ownerId={person.id}
          renderKeep={(slot, groupId) => (
            <Sheet title="Keep the recording">
              <KeepRecorded {...slot} look="plain" group={groups.find(({ id }) => id === groupId)} />
            </Sheet>
          )}
          onKept={(take) => queue.addSent(person.id, take)}
          onFile={listen}
        />
        <UploadList ownerId={person.id} renderTake={(takeId, onDone) => <TakeRow takeId={takeId} onDone={onDone} />} />
        <Waiting meId={person.id} groups={groups} />
        <GroupLinks groups={groups} />
      </Page>
      {several ? (
        <KeepDialog
          person={person}
          recordings={several}
          onSent={(id) => trial?.id === id && dropTrial()}
          onKept={() => setSeveral(null)}
          onClose={() => setSeveral(null)}
          onIn={() => undefined}
        />
      ) : null}
    </AppShell>
  )
}
