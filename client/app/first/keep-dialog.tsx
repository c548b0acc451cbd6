// Keeping recordings of this browser: who, where, of what, for whom. Asked only now, after they have been heard.
import { useId, useState } from 'react'
import type { Me } from '@shared/contracts/account'
import { groupRoutes } from '@shared/contracts/groups'
import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'
import { roomOf } from '@client/features/account/entry-faults'
import { SignInForm } from '@client/features/account/sign-in-form'
import { SignUpForm } from '@client/features/account/sign-up-form'
import { useMyGroups } from '@client/features/home/api'
import { bytesWords } from '@client/features/uploads/bytes-words'
import { faultOfFile, titleOfFile } from '@client/features/uploads/check-file'
import { KeepForm } from '@client/features/uploads/keep-form'
import { useUploadQueue } from '@client/features/uploads/provider'
import { TrimDialog } from '@client/features/uploads/trim-dialog'
import type { KeepDetails } from '@client/features/uploads/upload-types'
import { freshId } from '@client/lib/ids'
import { paths } from '@client/lib/paths'
import { useRouteMutation } from '@client/lib/query'
import { Button } from '@client/ui/button'
import { Dialog } from '@client/ui/dialog'
import { Notice } from '@client/ui/notice'
import { Tabs } from '@client/ui/tabs'
import { stepPath } from './use-step'

export interface Recording {
  /** The take's id to be. */
  id: string
  file: File
  durationSec?: Sec
}

export interface KeepDialogProps {
  person: Me | null
  recordings: readonly Recording[]
  /** What was selected while listening: where trimming begins. */
  span?: Span | null
  /** One of them has reached the server. */
  onSent: (id: string) => void
  onKept: () => void
  onClose: () => void
  /** Somebody has signed in or up on the way. */
  onIn: (me: Me) => void
}

export function KeepDialog({ person, ...rest }: KeepDialogProps) {
  const [entrance, setEntrance] = useState<'new' | 'known'>('new')
  if (person) return <KeepAs {...rest} person={person} />
  return (
    <Dialog title={rest.recordings.length > 1 ? 'Keep these recordings' : 'Keep this recording'} onClose={rest.onClose}>
      <div className="grid gap-4 pb-4">
        <p className="text-pencil">
          To be kept it needs somebody it belongs to. It stays in this browser meanwhile, and nobody hears it but you.
        </p>
        <Tabs
          label="Who you are"
          chosen={entrance}
          onChoose={setEntrance}
          tabs={[
            {
              key: 'new',
              label: 'I am new here',
              panel: <SignUpForm signInTo={paths.signIn(stepPath('keep'))} submitLabel="Go on" onIn={rest.onIn} />
            },
            { key: 'known', label: 'I have an account', panel: <SignInForm onIn={rest.onIn} /> }
          ]}
        />
      </div>
    </Dialog>
  )
}

function KeepAs({
  person,
  recordings,
  span = null,
  onSent,
  onKept,
  onClose
}: Omit<KeepDialogProps, 'person' | 'onIn'> & { person: Me }) {
  const formId = useId()
  const queue = useUploadQueue()
  const groups = useMyGroups()
  const createGroup = useRouteMutation(groupRoutes.create)
  const [roomId] = useState(freshId)
  const [trimmed, setTrimmed] = useState<Record<string, File>>({})
  const [trimming, setTrimming] = useState<Recording | null>(null)
  const fileOf = ({ id, file }: Recording): File => trimmed[id] ?? file
  const open = groups.data?.items.filter(({ abilities }) => abilities.includes('group:add-take'))
  const problem = groups.error ?? createGroup.error

  const handleKeep = async (kept: { key: string; details: KeepDetails }[]): Promise<void> => {
    // Somebody without a group that takes recordings gets a room of their own, without having to name it.
    const needsRoom = kept.some(({ details }) => details.groupId === '')
    if (needsRoom) await createGroup.mutateAsync({ body: { id: roomId, name: roomOf(person.name) } })
    queue.add(
      kept.flatMap(({ key, details }) => {
        const recording = recordings.find(({ id }) => id === key)
        if (!recording) return []
        const where = details.groupId === '' ? { ...details, groupId: roomId } : details
        return [{ id: key, ownerId: person.id, file: fileOf(recording), details: where, onSent: () => onSent(key) }]
      })
    )
    onKept()
  }

  return (
    <Dialog
      title={recordings.length > 1 ? 'Keep these recordings' : 'Keep this recording'}
      onClose={onClose}
      actions={
        <>
          <Button look="quiet" onClick={onClose}>
            Not yet
          </Button>
          <Button look="primary" type="submit" form={formId} busy={!open || createGroup.isPending}>
            {recordings.length > 1 ? 'Keep them' : 'Keep it'}
          </Button>
        </>
      }
    >
      {problem ? <Notice kind="fault">{problem.message}</Notice> : null}
      {open ? (
        <KeepForm
          formId={formId}
          groups={open}
          recordings={recordings.map((recording) => ({
            key: recording.id,
            title: titleOfFile(recording.file.name),
            says: <FileWords file={fileOf(recording)} onTrim={() => setTrimming(recording)} />
          }))}
          onKeep={(kept) => void handleKeep(kept).catch(() => undefined)}
        />
      ) : null}
      {trimming ? (
        <TrimDialog
          file={trimming.file}
          durationSec={trimming.durationSec ?? null}
          span={recordings.length === 1 ? span : null}
          onDone={(file) => {
            setTrimmed({ ...trimmed, [trimming.id]: file })
            setTrimming(null)
          }}
          onClose={() => setTrimming(null)}
        />
      ) : null}
    </Dialog>
  )
}

function FileWords({ file, onTrim }: { file: File; onTrim: () => void }) {
  const fault = faultOfFile(file)
  return (
    <div className="flex flex-wrap items-center justify-between gap-x-4">
      <span className="min-w-0 text-sm break-words text-pencil">
        {file.name} · {bytesWords(file.size)}
      </span>
      <Button look="quiet" onClick={onTrim}>
        Trim or shrink before sending
      </Button>
      {fault ? <span className="w-full text-sm text-fault">! {fault}</span> : null}
    </div>
  )
}
