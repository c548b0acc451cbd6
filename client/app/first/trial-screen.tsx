// A recording of this browser: heard first, kept when the person says so.
import { useState } from 'react'
import type { Me } from '@shared/contracts/account'
import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'
import { AccountMenu } from '@client/features/account/account-menu'
import { TrialDesk } from '@client/features/trial/trial-desk'
import { dropTrial, type Trial } from '@client/features/trial/trial-store'
import { AppShell } from '@client/ui/app-shell'
import { Button } from '@client/ui/button'
import { KeepDialog } from './keep-dialog'
import { useStep } from './use-step'

export interface TrialScreenProps {
  trial: Trial
  person: Me | null
  isKeeping: boolean
  onIn: (me: Me) => void
}

export function TrialScreen({ trial, person, isKeeping, onIn }: TrialScreenProps) {
  const { go } = useStep()
  const [span, setSpan] = useState<Span | null>(null)
  const [durationSec, setDurationSec] = useState<Sec | null>(trial.durationSec ?? null)
  return (
    <AppShell crumbs={[{ label: 'Your recording' }]} right={<AccountMenu />}>
      <TrialDesk
        key={trial.id}
        trial={trial}
        onSelection={setSpan}
        onLength={setDurationSec}
        isCovered={isKeeping}
        actions={
          <>
            <Button onClick={() => go('keep')}>Keep this recording</Button>
            <Button
              look="quiet"
              onClick={() => {
                dropTrial()
                go(null, true)
              }}
            >
              Put it away
            </Button>
          </>
        }
      />
      {isKeeping ? (
        <KeepDialog
          person={person}
          recordings={[{ id: trial.id, file: trial.file, ...(durationSec ? { durationSec } : {}) }]}
          span={span}
          onSent={dropTrial}
          onKept={() => go(null, true)}
          onClose={() => go('listen', true)}
          onIn={onIn}
        />
      ) : null}
    </AppShell>
  )
}
