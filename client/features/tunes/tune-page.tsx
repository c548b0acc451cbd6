// A tune: what it is called, its key, meter and tempo, its form, and its chart set and edited.
import { useState, type ReactNode } from 'react'
import type { Tune } from '@shared/contracts/tunes'
import type { ChartOperation } from '@shared/music/chart-schema'
import type { InstrumentPitch } from '@shared/music/transpose'
import type { ChartBody } from '@shared/music/types'
import { keyText, readKey, transposeKey } from '@shared/music/key'
import { INSTRUMENT_SEMITONES } from '@shared/music/transpose'
import { handleUndoKey } from '@client/lib/undo-keys'
import { Button } from '@client/ui/button'
import { Empty } from '@client/ui/empty'
import { IconButton } from '@client/ui/icon-button'
import { Page } from '@client/ui/page'
import { Sentence, SentenceChoice } from '@client/ui/sentence'
import { Sheet } from '@client/ui/sheet'
import { ChartSheet } from '@client/features/tunes/chart-sheet'
import { ChartTextEditor } from '@client/features/tunes/chart-text-editor'
import { useChordStyle } from '@client/features/tunes/chord-style'
import { ChordStyleChoice } from '@client/features/tunes/chord-style-choice'
import { FormEditor } from '@client/features/tunes/form-editor'
import { RefusedChart } from '@client/features/tunes/refused-chart'
import { TuneFacts } from '@client/features/tunes/tune-facts'
import type { LiveChart } from '@client/features/tunes/use-chart'

export interface TunePageProps {
  tune: Tune
  document: LiveChart
  /** Beside the title: rename, delete. */
  actions?: ReactNode
  /** Below the chart: takes of the tune. */
  children?: ReactNode
}

export function TunePage({ tune, document, actions, children }: TunePageProps) {
  const { body } = document
  const canEdit = tune.abilities.includes('tune:edit')
  return (
    // Undo and redo from the keyboard wherever the focus is on the page; the controls are the buttons.
    // oxlint-disable-next-line jsx-a11y/no-static-element-interactions
    <div onKeyDown={(event) => canEdit && handleUndoKey(event, document)}>
      <Page title={tune.title} width="wide" actions={actions}>
        <RefusedChart document={document} />
        {body ? (
          <TuneSheets body={body} document={document} canEdit={canEdit} />
        ) : (
          <p role="status" className="text-pencil">
            The chart is being fetched
          </p>
        )}
        {children}
      </Page>
    </div>
  )
}

/** Which text is being written: nothing, the whole chart, or one section. */
type Writing = { what: 'nothing' } | { what: 'chart' } | { what: 'section'; id: string }

function TuneSheets({ body, document, canEdit }: { body: ChartBody; document: LiveChart; canEdit: boolean }) {
  const [writing, setWriting] = useState<Writing>({ what: 'nothing' })
  const edit = canEdit ? (operations: ChartOperation[]) => document.edit(operations) : undefined
  return (
    <>
      <TuneFacts body={body} {...(edit ? { onEdit: edit } : {})} />
      <ChartPart body={body} document={document} edit={edit} writing={writing} onWriting={setWriting} />
      {edit && body.sections.length > 0 ? (
        <Sheet title="Form">
          <FormEditor body={body} onEdit={edit} onWrite={(id) => setWriting({ what: 'section', id })} />
        </Sheet>
      ) : null}
    </>
  )
}

interface ChartPartProps {
  body: ChartBody
  document: LiveChart
  edit: ((operations: ChartOperation[]) => void) | undefined
  writing: Writing
  onWriting(writing: Writing): void
}

function ChartPart({ body, document, edit, writing, onWriting }: ChartPartProps) {
  const [style] = useChordStyle()
  const [pitch, setPitch] = useState<InstrumentPitch>('C')
  const isWriting = edit !== undefined && writing.what !== 'nothing'
  const hasBars = body.sections.some(({ bars }) => bars.length > 0)
  return (
    <Sheet
      title="Chart"
      aside={
        <div className="flex flex-wrap items-center gap-1">
          {edit ? (
            <>
              <IconButton
                icon="undo"
                label="Undo the last change of the chart"
                keys="Ctrl Z"
                disabled={!document.canUndo}
                onClick={() => void document.undo()}
              />
              <IconButton
                icon="redo"
                label="Do it again"
                keys="Ctrl Shift Z"
                disabled={!document.canRedo}
                onClick={() => void document.redo()}
              />
              <Button
                look="quiet"
                icon="pencil"
                aria-pressed={isWriting}
                onClick={() => onWriting({ what: isWriting ? 'nothing' : 'chart' })}
              >
                Write it as text
              </Button>
            </>
          ) : null}
          <ChordStyleChoice />
        </div>
      }
    >
      {isWriting ? (
        <ChartTextEditor
          key={writing.what === 'section' ? writing.id : 'chart'}
          body={body}
          {...(writing.what === 'section' ? { sectionId: writing.id } : {})}
          onEdit={edit}
          onClose={() => onWriting({ what: 'nothing' })}
        />
      ) : hasBars ? (
        <div className="grid gap-4">
          <WrittenFor body={body} pitch={pitch} onPitch={setPitch} />
          <ChartSheet body={body} style={style} pitch={pitch} {...(edit ? { onEdit: edit } : {})} />
        </div>
      ) : (
        <Empty
          says="The chords of this tune stand here, bar by bar."
          how={edit ? 'Type them as text: | Dm7 | Em7b5 A7 | % | N.C. |' : 'Nobody has written them yet.'}
          action={edit ? <Button onClick={() => onWriting({ what: 'chart' })}>Write the chart</Button> : null}
        />
      )}
    </Sheet>
  )
}

const instruments: { value: InstrumentPitch; label: string }[] = [
  { value: 'C', label: 'as it sounds' },
  { value: 'B♭', label: 'for B♭ instruments' },
  { value: 'E♭', label: 'for E♭ instruments' }
]

function WrittenFor({
  body,
  pitch,
  onPitch
}: Pick<ChartPartProps, 'body'> & {
  pitch: InstrumentPitch
  onPitch(pitch: InstrumentPitch): void
}) {
  const key = readKey(body.key)
  const shown = key.ok ? keyText(transposeKey(key.value, INSTRUMENT_SEMITONES[pitch])) : null
  return (
    <Sentence label="Which pitch the chart is written in">
      {'Written '}
      <SentenceChoice label="written for" value={pitch} choices={instruments} onChange={onPitch} />
      {shown ? `, in ${shown}` : ''}
      {pitch === 'C' ? '.' : '. Bars are typed as they sound.'}
    </Sentence>
  )
}
