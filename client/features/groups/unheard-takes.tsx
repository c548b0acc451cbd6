import { useState } from 'react'
import type { TakeCard } from '@shared/contracts/takes'
import { Figures } from '@client/ui/figures'
import { IconButton } from '@client/ui/icon-button'
import { PageSection } from '@client/ui/page'
import { RelativeTime } from '@client/ui/relative-time'
import { useToast } from '@client/ui/toasts'
import { useDeleteTake, useGroupTakes } from './api'
import { lengthWords } from './list-words'
import { SureDialog } from './sure-dialog'

/** For owners: takes of the group that were not shared with them. They see that these are there, and can take one down. */
export function UnheardTakes({ groupId }: { groupId: string }) {
  const { data } = useGroupTakes(groupId)
  const remove = useDeleteTake()
  const toast = useToast()
  const [asked, setAsked] = useState<TakeCard | null>(null)
  if (!data || data.cards.length === 0) return null
  const handleDelete = (card: TakeCard): void =>
    remove.mutate(
      { params: { takeId: card.id } },
      {
        onSuccess: () => {
          toast({ text: `${card.title} is deleted.` })
          setAsked(null)
        }
      }
    )
  return (
    <PageSection title="Not shared with you">
      <p className="text-sm text-pencil">You own the group, so you see that these are here. You cannot hear them.</p>
      <ul className="grid">
        {data.cards.map((card) => (
          <li key={card.id} className="flex items-center justify-between gap-4 border-b border-rule py-1.5">
            <div className="min-w-0">
              <p className="break-words">{card.title}</p>
              <p className="text-sm text-pencil">
                {card.uploader.name}
                {card.durationSec === null ? null : (
                  <>
                    {' · '}
                    <Figures>{lengthWords(card.durationSec)}</Figures>
                  </>
                )}
                {' · '}
                <RelativeTime at={card.createdAt} notFocusable />
              </p>
            </div>
            {card.abilities.includes('take:delete') ? (
              <IconButton icon="bin" label={`Delete ${card.title}`} onClick={() => setAsked(card)} />
            ) : null}
          </li>
        ))}
      </ul>
      {asked ? (
        <SureDialog
          title={`Delete ${asked.title}?`}
          keep="Keep it"
          confirm="Delete the take"
          isBusy={remove.isPending}
          problem={remove.error}
          onConfirm={() => handleDelete(asked)}
          onClose={() => setAsked(null)}
        >
          The recording of {asked.uploader.name} and all that was written about it go. This cannot be taken back.
        </SureDialog>
      ) : null}
    </PageSection>
  )
}
