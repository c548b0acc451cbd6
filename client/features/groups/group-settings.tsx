import { useState } from 'react'
import type { Group } from '@shared/contracts/groups'
import { Button } from '@client/ui/button'
import { Checkbox } from '@client/ui/checkbox'
import { Notice } from '@client/ui/notice'
import { PageSection } from '@client/ui/page'
import { useUpdateGroup } from './api'
import { NameDialog } from './name-dialog'

/** Name and roster, for those who may edit the group. */
export function GroupSettings({ group }: { group: Group }) {
  const rename = useUpdateGroup()
  const show = useUpdateGroup()
  const [isNaming, setNaming] = useState(false)
  const params = { groupId: group.id }
  return (
    <PageSection title="This group">
      <div className="flex flex-wrap items-center gap-x-4 gap-y-1">
        <span className="min-w-0 break-words">
          It is called <strong className="font-semibold">{group.name}</strong>.
        </span>
        <Button look="quiet" icon="pencil" onClick={() => setNaming(true)}>
          Rename
        </Button>
      </div>
      {show.error ? <Notice kind="fault">{show.error.message}</Notice> : null}
      <Checkbox
        label="Everybody sees who is in the group"
        hint="While this is off, members see the owner, their own teachers and students, and those they listen with."
        checked={show.isPending ? show.variables.body?.isRosterShown === true : group.isRosterShown}
        onChange={(isRosterShown) => show.mutate({ params, body: { isRosterShown } })}
      />
      {isNaming ? (
        <NameDialog
          title="Rename the group"
          name={group.name}
          confirm="Rename"
          isBusy={rename.isPending}
          problem={rename.error}
          onName={(name) => rename.mutate({ params, body: { name } }, { onSuccess: () => setNaming(false) })}
          onClose={() => setNaming(false)}
        />
      ) : null}
    </PageSection>
  )
}
