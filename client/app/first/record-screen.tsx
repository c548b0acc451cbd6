import { useState } from 'react'
import type { Me } from '@shared/contracts/account'
import { AccountMenu } from '@client/features/account/account-menu'
import { useMyGroups } from '@client/features/home/api'
import { Recorder } from '@client/features/recorder/recorder'
import { openTrial } from '@client/features/trial/trial-store'
import { useUploadQueue } from '@client/features/uploads/provider'
import { AppShell } from '@client/ui/app-shell'
import { Page } from '@client/ui/page'
import { Select } from '@client/ui/select'
import { KeepRecorded } from './keep-recorded'
import { useStep } from './use-step'

export function RecordScreen({ person }: { person: Me | null }) {
  const { go } = useStep()
  const queue = useUploadQueue()
  const groups = useMyGroups(person !== null)
  const open = groups.data?.items.filter(({ abilities }) => abilities.includes('group:add-take')) ?? []
  const [chosen, setChosen] = useState<string | null>(null)
  const group = open.find(({ id }) => id === chosen) ?? open[0]
  return (
    <AppShell crumbs={[{ label: 'Record' }]} right={<AccountMenu />}>
      <Page title="Record" lead="Plug in or sit close to the microphone, and play your loudest note first.">
        {person && groups.isPending ? (
          <p role="status" className="text-pencil">
            Opening …
          </p>
        ) : (
          <Recorder
            owner={person && group ? { ownerId: person.id, groupId: group.id } : null}
            groupChoice={
              open.length > 1 && group ? (
                <Select
                  label="Group"
                  value={group.id}
                  choices={open.map(({ id, name }) => ({ value: id, label: name }))}
                  onChange={setChosen}
                />
              ) : null
            }
            renderKeep={(slot) => <KeepRecorded {...slot} group={group} />}
            onKept={(take) => {
              if (person) queue.addSent(person.id, take)
              go(null, true)
            }}
            onFile={(file, durationSec) => {
              openTrial(file, Date.now(), durationSec)
              go('listen', true)
            }}
          />
        )}
      </Page>
    </AppShell>
  )
}
