import { useId, useMemo } from 'react'
import type { Me } from '@shared/contracts/account'
import type { Take } from '@shared/contracts/takes'
import { defaultPreferences, type Preferences } from '@shared/practice/preferences'
import type { Span } from '@shared/timing/types'
import { useMyGroups } from '@client/features/home/api'
import { OverRecording, type TryToKeep } from '@client/features/over-recording/over-recording'
import { audioUrl, piecesUrl } from '@client/features/takes/api'
import { KeepForm } from '@client/features/uploads/keep-form'
import { useUploadQueue } from '@client/features/uploads/provider'
import type { Player } from '@client/transport/player'
import { Button } from '@client/ui/button'
import { Dialog } from '@client/ui/dialog'
import { Notice } from '@client/ui/notice'
import type { DeskModel } from './desk-model'
import { PanelBoundary } from './panel-boundary'

export interface OverPanelProps {
  me: Me
  take: Take
  player: Player
  model: DeskModel
  selection: Span | null
  preferences: Pick<Preferences, 'click' | 'countIn'>
  /** Recording or measuring begins: the desk falls silent. */
  onBegin: () => void
  /** While true the desk's keys have to rest. */
  onRunning?: (isRunning: boolean) => void
  onClose: () => void
}

/** Recording over the take, under the timeline. */
export function OverPanel({ me, take, player, model, selection, preferences, ...rest }: OverPanelProps) {
  const { id, durationSec, gainDb } = take
  const source = useMemo(
    () => ({ url: audioUrl(id), piecesUrl: piecesUrl(id), durationSec: durationSec ?? 0, gainDb: gainDb ?? 0 }),
    [id, durationSec, gainDb]
  )
  return (
    <PanelBoundary name="recording over it">
      <OverRecording
        {...rest}
        take={take}
        source={source}
        player={player}
        barMap={model.barMap}
        ownerId={me.id}
        selection={selection}
        wordsFor={(span) => model.placeOf(span).place}
        click={preferences.click ?? defaultPreferences.click}
        countIn={preferences.countIn ?? defaultPreferences.countIn}
        renderKeep={(slot) => <KeepTry me={me} take={take} slot={slot} />}
      />
    </PanelBoundary>
  )
}

function KeepTry({ me, take, slot }: { me: Me; take: Take; slot: TryToKeep }) {
  const { id, title, file, over, onKept, onSent, onBack } = slot
  const formId = useId()
  const queue = useUploadQueue()
  const groups = useMyGroups()
  const group = groups.data?.items.find((one) => one.id === take.groupId)
  const mayAdd = group?.abilities.includes('group:add-take') ?? false
  return (
    <Dialog
      title="Keep this try"
      onClose={onBack}
      actions={
        <>
          <Button look="quiet" onClick={onBack}>
            Not yet
          </Button>
          {mayAdd ? (
            <Button look="primary" type="submit" form={formId}>
              Keep it
            </Button>
          ) : null}
        </>
      }
    >
      {groups.error ? <Notice kind="fault">{groups.error.message}</Notice> : null}
      {group && !mayAdd ? <Notice>In {group.name} you listen; takes are brought by its members.</Notice> : null}
      {group && mayAdd ? (
        <KeepForm
          formId={formId}
          groups={[group]}
          isGroupFixed
          fixedTuneId={take.tuneId}
          recordings={[{ key: id, title, says: null }]}
          onKeep={([kept]) => {
            if (!kept) return
            queue.add([{ id, ownerId: me.id, file, details: { ...kept.details, over }, onSent }])
            onKept()
          }}
        />
      ) : null}
    </Dialog>
  )
}
