import { useState } from 'react'
import { tuneRoutes } from '@shared/contracts/tunes'
import type { Take } from '@shared/contracts/takes'
import { useUpdateTake } from '@client/features/takes/api'
import { freshId } from '@client/lib/ids'
import { useRouteMutation, useRouteQuery } from '@client/lib/query'
import { Button } from '@client/ui/button'
import { Dialog } from '@client/ui/dialog'
import { Notice } from '@client/ui/notice'
import { Select } from '@client/ui/select'
import { TextField } from '@client/ui/text-field'

export interface PutToTuneProps {
  take: Take
  onClose: () => void
}

const fresh = 'a new tune'

/** Chooses the tune a take is of, or names a new one; its form and chart then stand over the sound. */
export function PutToTune({ take, onClose }: PutToTuneProps) {
  const tunes = useRouteQuery(tuneRoutes.list, { params: { groupId: take.groupId } })
  const create = useRouteMutation(tuneRoutes.create)
  const update = useUpdateTake()
  const [chosen, setChosen] = useState(take.tuneId ?? '')
  const [title, setTitle] = useState('')
  // A second press sends the same tune again, not another one.
  const [newId] = useState(freshId)
  const items = tunes.data?.items ?? []
  const choice = chosen || items[0]?.id || fresh
  const problem = create.error ?? update.error ?? tunes.error

  const put = (tuneId: string) =>
    update.mutate({ params: { takeId: take.id }, body: { tuneId } }, { onSuccess: onClose })
  const handlePut = () => {
    if (choice !== fresh) return put(choice)
    create.mutate(
      { params: { groupId: take.groupId }, body: { id: newId, title: title.trim() } },
      { onSuccess: (tune) => put(tune.id) }
    )
  }

  return (
    <Dialog
      title="Which tune is this?"
      onClose={onClose}
      actions={
        <>
          <Button look="quiet" onClick={onClose}>
            Not now
          </Button>
          <Button
            look="primary"
            busy={create.isPending || update.isPending}
            disabled={choice === fresh && title.trim() === ''}
            onClick={handlePut}
          >
            Put it to the tune
          </Button>
        </>
      }
    >
      <div className="grid gap-4">
        <Select
          label="Tune"
          value={choice}
          choices={[
            ...items.map(({ id, title: name }) => ({ value: id, label: name })),
            { value: fresh, label: 'A new tune' }
          ]}
          onChange={setChosen}
        />
        {choice === fresh ? (
          <TextField
            label="Its title"
            value={title}
            maxLength={120}
            onChange={(event) => setTitle(event.target.value)}
          />
        ) : null}
        <p className="text-sm text-pencil">
          Its form and chords stand over the sound, and bars are counted in its form.
        </p>
        {problem ? <Notice kind="fault">{problem.message}</Notice> : null}
      </div>
    </Dialog>
  )
}
