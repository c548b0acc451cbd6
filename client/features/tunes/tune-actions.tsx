import { useState } from 'react'
import type { Tune } from '@shared/contracts/tunes'
import { limits } from '@shared/limits'
import { Button } from '@client/ui/button'
import { Dialog } from '@client/ui/dialog'
import { Form } from '@client/ui/faults'
import { Menu } from '@client/ui/menu'
import { Notice } from '@client/ui/notice'
import { TextField } from '@client/ui/text-field'
import { useRemoveTune, useRenameTune } from '@client/features/tunes/api'

interface TuneActionsProps {
  tune: Tune
  onRemoved(): void
}

/** Renaming and deleting, for those who may. */
export function TuneActions({ tune, onRemoved }: TuneActionsProps) {
  const [open, setOpen] = useState<'none' | 'rename' | 'remove'>('none')
  const close = (): void => setOpen('none')
  const may = (ability: string): boolean => tune.abilities.includes(ability)
  const items = [
    ...(may('tune:edit')
      ? [{ key: 'rename', label: 'Rename', icon: 'pencil' as const, onChoose: () => setOpen('rename') }]
      : []),
    ...(may('tune:delete')
      ? [
          {
            key: 'remove',
            label: 'Delete the tune',
            icon: 'bin' as const,
            grave: true,
            onChoose: () => setOpen('remove')
          }
        ]
      : [])
  ]
  if (items.length === 0) return null
  return (
    <>
      <Menu label="Tune" items={items} />
      {open === 'rename' ? <Rename tune={tune} onClose={close} /> : null}
      {open === 'remove' ? <Remove tune={tune} onClose={close} onRemoved={onRemoved} /> : null}
    </>
  )
}

function Rename({ tune, onClose }: { tune: Tune; onClose(): void }) {
  const [title, setTitle] = useState(tune.title)
  const rename = useRenameTune()
  const handleSubmit = (): void =>
    rename.mutate({ params: { tuneId: tune.id }, body: { title: title.trim() } }, { onSuccess: onClose })
  return (
    <Dialog
      title="Rename the tune"
      onClose={onClose}
      actions={
        <>
          <Button look="quiet" onClick={onClose}>
            Leave it
          </Button>
          <Button look="primary" type="submit" form="rename-tune" busy={rename.isPending} disabled={!title.trim()}>
            Rename
          </Button>
        </>
      }
    >
      <Form
        id="rename-tune"
        errors={rename.error?.fields ?? null}
        fault={rename.error?.message ?? null}
        onSubmit={handleSubmit}
      >
        <TextField
          label="Title"
          name="title"
          value={title}
          maxLength={limits.title}
          onChange={(event) => setTitle(event.target.value)}
        />
      </Form>
    </Dialog>
  )
}

function Remove({ tune, onClose, onRemoved }: TuneActionsProps & { onClose(): void }) {
  const remove = useRemoveTune()
  return (
    <Dialog
      title={`Delete ${tune.title}?`}
      onClose={onClose}
      actions={
        <>
          <Button onClick={onClose}>Keep it</Button>
          <Button
            icon="bin"
            busy={remove.isPending}
            onClick={() => remove.mutate({ params: { tuneId: tune.id } }, { onSuccess: onRemoved })}
          >
            Delete the tune
          </Button>
        </>
      }
    >
      <p>Its chart and form go. Takes of it stay, without a tune. This cannot be undone.</p>
      {remove.error ? <Notice kind="fault">{remove.error.message}</Notice> : null}
    </Dialog>
  )
}
