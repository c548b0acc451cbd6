import { useState } from 'react'
import { limits } from '@shared/limits'
import type { ApiProblem } from '@client/lib/api'
import { Button } from '@client/ui/button'
import { Dialog } from '@client/ui/dialog'
import { Form } from '@client/ui/faults'
import { TextField } from '@client/ui/text-field'

export interface NameDialogProps {
  title: string
  name?: string
  confirm: string
  isBusy: boolean
  problem: ApiProblem | null
  onName: (name: string) => void
  onClose: () => void
}

/** Asks for the name of a group. */
export function NameDialog({ title, name: before = '', confirm, isBusy, problem, onName, onClose }: NameDialogProps) {
  const [name, setName] = useState(before)
  const [isMissing, setMissing] = useState(false)
  const handleSubmit = (): void => {
    setMissing(name.trim() === '')
    if (name.trim() !== '') onName(name.trim())
  }
  return (
    <Dialog title={title} onClose={onClose}>
      <Form
        errors={problem?.fields ?? null}
        fault={problem && problem.fields.length === 0 ? problem.message : null}
        onSubmit={handleSubmit}
      >
        <TextField
          label="Group name"
          name="name"
          autoComplete="off"
          maxLength={limits.name}
          value={name}
          fault={isMissing ? 'Write a name for the group.' : null}
          onChange={(event) => setName(event.target.value)}
        />
        <div className="flex flex-wrap justify-end gap-3 pt-2 pb-3">
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" look="primary" busy={isBusy}>
            {confirm}
          </Button>
        </div>
      </Form>
    </Dialog>
  )
}
