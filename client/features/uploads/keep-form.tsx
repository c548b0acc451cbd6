import { useId, useState, type ReactNode } from 'react'
import type { Group } from '@shared/contracts/groups'
import type { Reach } from '@shared/contracts/takes'
import { tuneRoutes } from '@shared/contracts/tunes'
import { limits } from '@shared/limits'
import { useRouteQuery } from '@client/lib/query'
import { Checkbox } from '@client/ui/checkbox'
import { RadioGroup } from '@client/ui/radio-group'
import { Select, type Choice } from '@client/ui/select'
import { TextField } from '@client/ui/text-field'
import type { KeepDetails } from './upload-types'

export interface KeepFormProps {
  /** Ties the form to a button outside of it. */
  formId: string
  recordings: readonly { key: string; title: string; says: ReactNode }[]
  /** Groups that take recordings from this person. None: it goes to a room of their own (`groupId` is then empty). */
  groups: readonly Group[]
  /** Fixed where the recording has begun in a group already. */
  isGroupFixed?: boolean
  /** Fixed where it is known what is played; null is no tune. */
  fixedTuneId?: string | null
  onKeep: (kept: { key: string; details: KeepDetails }[]) => void
}

const reaches: readonly Choice<Reach>[] = [
  { value: 'only me', label: 'Only me' },
  { value: 'my teachers', label: 'Me and my teachers' },
  { value: 'group', label: 'The group' }
]
/** Narrow to begin with: a member's is heard by their teachers, an owner's or teacher's by nobody else. */
const firstReach = (group: Group | undefined): Reach => (group?.role === 'member' ? 'my teachers' : 'only me')
const noTune = ''

/** What has to be said when recordings are kept: title, group, tune, who may hear them, and that everyone agreed. */
export function KeepForm({ formId, recordings, groups, isGroupFixed = false, fixedTuneId, onKeep }: KeepFormProps) {
  const [titles, setTitles] = useState<Record<string, string>>({})
  const [groupId, setGroupId] = useState(groups[0]?.id ?? '')
  const [tuneId, setTuneId] = useState(fixedTuneId ?? noTune)
  const [chosenReach, setReach] = useState<Reach | null>(null)
  const [hasAgreed, setAgreed] = useState(false)
  const [isChecked, setChecked] = useState(false)
  const titlesId = useId()
  const group = groups.find(({ id }) => id === groupId)
  const tunes = useRouteQuery(
    tuneRoutes.list,
    { params: { groupId } },
    { enabled: groupId !== '' && fixedTuneId === undefined }
  )
  const reach = chosenReach ?? firstReach(group)
  const titleOf = (key: string, first: string) => titles[key] ?? first

  const handleSubmit = () => {
    setChecked(true)
    const isWhole = recordings.every(({ key, title }) => titleOf(key, title).trim() !== '')
    if (!hasAgreed || !isWhole) return
    onKeep(
      recordings.map(({ key, title }) => ({
        key,
        details: { groupId, title: titleOf(key, title).trim(), reach, ...(tuneId ? { tuneId } : {}) }
      }))
    )
  }

  return (
    <form
      id={formId}
      noValidate
      className="grid gap-4"
      onSubmit={(event) => {
        event.preventDefault()
        handleSubmit()
      }}
    >
      <ul className="grid gap-4" id={titlesId}>
        {recordings.map(({ key, title, says }, index) => (
          <li key={key} className="grid gap-1">
            <TextField
              label={recordings.length > 1 ? `Title of recording ${index + 1}` : 'Title'}
              value={titleOf(key, title)}
              maxLength={limits.title}
              fault={isChecked && titleOf(key, title).trim() === '' ? 'Give it a title.' : null}
              onChange={(event) => setTitles({ ...titles, [key]: event.target.value })}
            />
            {says}
          </li>
        ))}
      </ul>
      {groups.length > 1 && !isGroupFixed ? (
        <Select
          label="Group"
          value={groupId}
          choices={groups.map(({ id, name }) => ({ value: id, label: name }))}
          onChange={(next) => {
            setGroupId(next)
            setTuneId(noTune)
            setReach(null)
          }}
        />
      ) : (
        <p className="text-sm text-pencil">
          {group ? `It goes to ${group.name}.` : 'It goes to a room of your own; you can ask others in later.'}
        </p>
      )}
      {fixedTuneId === undefined && (tunes.data?.items.length ?? 0) > 0 ? (
        <Select
          label="Tune"
          optional
          value={tuneId}
          choices={[
            { value: noTune, label: 'Say later' },
            ...(tunes.data?.items ?? []).map(({ id, title }) => ({ value: id, label: title }))
          ]}
          onChange={setTuneId}
        />
      ) : null}
      {group ? <RadioGroup legend="Who may hear it" value={reach} choices={reaches} onChange={setReach} /> : null}
      <Checkbox
        label="I play on this, or those who do have agreed."
        checked={hasAgreed}
        fault={isChecked && !hasAgreed ? 'Confirm that everyone on it has agreed.' : null}
        onChange={setAgreed}
      />
    </form>
  )
}
