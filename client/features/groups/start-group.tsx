import { useState } from 'react'
import { useNavigate } from 'react-router-dom'
import { freshId } from '@client/lib/ids'
import { paths } from '@client/lib/paths'
import { Button } from '@client/ui/button'
import { useStartGroup } from './api'
import { NameDialog } from './name-dialog'

/** A button that opens another group for somebody who is signed in. */
export function StartGroup() {
  const start = useStartGroup()
  const navigate = useNavigate()
  const [id, setId] = useState<string | null>(null)
  return (
    <>
      <Button look="quiet" icon="plus" onClick={() => setId(freshId())}>
        Start a group
      </Button>
      {id ? (
        <NameDialog
          title="Start a group"
          confirm="Start it"
          isBusy={start.isPending}
          problem={start.error}
          onName={(name) =>
            start.mutate({ body: { id, name } }, { onSuccess: (group) => void navigate(paths.group(group.id)) })
          }
          onClose={() => setId(null)}
        />
      ) : null}
    </>
  )
}
