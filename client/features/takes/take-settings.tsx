import { useState } from 'react'
import { groupRoutes } from '@shared/contracts/groups'
import { addressOf } from '@shared/contracts/route'
import { type Reach, takeRoutes, type Take } from '@shared/contracts/takes'
import { limits } from '@shared/limits'
import { useRemoveTake, useUpdateTake } from '@client/features/takes/api'
import { useRouteQuery } from '@client/lib/query'
import { Button, buttonClass } from '@client/ui/button'
import { Checkbox } from '@client/ui/checkbox'
import { Dialog } from '@client/ui/dialog'
import { Form } from '@client/ui/faults'
import { RadioGroup } from '@client/ui/radio-group'
import { TextField } from '@client/ui/text-field'

export interface TakeSettingsProps {
  take: Take
  onClose: () => void
  onRemoved: () => void
}

const reaches: { value: Reach; label: string; note?: string }[] = [
  { value: 'only me', label: 'Only me' },
  { value: 'my teachers', label: 'Me and my teachers', note: 'those linked with you, both sides agreed' },
  { value: 'named', label: 'People I name' },
  { value: 'group', label: 'The group' }
]

/** What the one who brought a take decides about it: its name, who hears it, whether it stays. */
export function TakeSettings({ take, onClose, onRemoved }: TakeSettingsProps) {
  const mayEdit = take.abilities.includes('take:edit')
  const [title, setTitle] = useState(take.title)
  const [reach, setReach] = useState<Reach>(take.reach)
  const [named, setNamed] = useState<ReadonlySet<string>>(() => new Set(take.named.map(({ id }) => id)))
  const [isSure, setSure] = useState(false)
  const people = useRouteQuery(
    groupRoutes.people,
    { params: { groupId: take.groupId } },
    { enabled: mayEdit && reach === 'named' }
  )
  const update = useUpdateTake()
  const remove = useRemoveTake()
  const others = (people.data?.items ?? []).filter(({ id }) => id !== take.uploader.id)

  const handleSave = () =>
    update.mutate(
      {
        params: { takeId: take.id },
        body: { title: title.trim(), reach, ...(reach === 'named' ? { namedIds: [...named] } : {}) }
      },
      { onSuccess: onClose }
    )
  const handleRemove = () => remove.mutate({ params: { takeId: take.id } }, { onSuccess: onRemoved })
  const toggle = (id: string, isIn: boolean) => {
    const next = new Set(named)
    if (isIn) next.add(id)
    else next.delete(id)
    setNamed(next)
  }

  return (
    <Dialog
      title="This take"
      onClose={onClose}
      actions={
        mayEdit ? (
          <>
            <Button look="quiet" onClick={onClose}>
              Leave it as it is
            </Button>
            <Button look="primary" busy={update.isPending} disabled={title.trim() === ''} onClick={handleSave}>
              Save
            </Button>
          </>
        ) : (
          <Button onClick={onClose}>Close</Button>
        )
      }
    >
      <div className="grid gap-5">
        {mayEdit ? (
          <Form
            errors={update.error?.fields ?? null}
            fault={update.error?.fields.length ? null : (update.error?.message ?? null)}
            onSubmit={handleSave}
          >
            <TextField
              label="Title"
              name="title"
              value={title}
              maxLength={limits.title}
              onChange={(event) => setTitle(event.target.value)}
            />
            <RadioGroup legend="Who may hear it" value={reach} choices={reaches} onChange={setReach} />
            {reach === 'named' ? (
              <fieldset className="grid gap-1 border-l border-rule pl-4">
                <legend className="sr-only">People who may hear it</legend>
                {others.map(({ id, name }) => (
                  <Checkbox key={id} label={name} checked={named.has(id)} onChange={(isIn) => toggle(id, isIn)} />
                ))}
                {people.data && others.length === 0 ? (
                  <p className="text-sm text-pencil">You know nobody else in this group yet.</p>
                ) : null}
              </fieldset>
            ) : null}
          </Form>
        ) : null}
        {take.state === 'ready' && take.abilities.includes('take:hear') ? (
          <p>
            <a
              className={buttonClass('plain')}
              href={addressOf(takeRoutes.original, { params: { takeId: take.id } })}
              download
            >
              Download the recording as it was sent
            </a>
          </p>
        ) : null}
        {take.abilities.includes('take:delete') ? (
          isSure ? (
            <div role="group" aria-label="Delete this take" className="grid gap-3 border-l-[3px] border-fault pl-4">
              <p>The recording, its bars and all comments on it go for good, for everybody.</p>
              {remove.error ? <p className="text-sm text-fault">{remove.error.message}</p> : null}
              <div className="flex flex-wrap gap-3">
                <Button busy={remove.isPending} onClick={handleRemove}>
                  Delete it for good
                </Button>
                <Button look="quiet" onClick={() => setSure(false)}>
                  Keep it
                </Button>
              </div>
            </div>
          ) : (
            <div>
              <Button look="quiet" icon="bin" onClick={() => setSure(true)}>
                Delete this take
              </Button>
            </div>
          )
        ) : null}
      </div>
    </Dialog>
  )
}
