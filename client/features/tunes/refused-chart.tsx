import type { ChartOperation } from '@shared/music/chart-schema'
import type { ChartBody } from '@shared/music/types'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import type { LiveChart } from '@client/features/tunes/use-chart'

/** An edit that the server did not take: what was wanted beside what stands now, and both ways on. */
export function RefusedChart({ document }: { document: LiveChart }) {
  const { refused, body } = document
  if (!refused) return null
  const { operations } = refused.edit
  return (
    <Notice
      kind="fault"
      title={
        refused.isConflict ? 'Somebody changed the same place meanwhile' : 'That change of the chart was not taken'
      }
      next={
        <>
          <Button onClick={document.dismissRefused}>{refused.isConflict ? 'Leave theirs' : 'I see'}</Button>
          {refused.isConflict && operations.length > 0 ? (
            <Button
              onClick={() => {
                document.dismissRefused()
                document.edit(operations)
              }}
            >
              Put mine in after all
            </Button>
          ) : null}
        </>
      }
    >
      {refused.isConflict && operations.length > 0 && body ? (
        <dl className="grid gap-1">
          {operations.map((operation, i) => {
            const { place, mine, theirs } = sidesOf(operation, body)
            return (
              // oxlint-disable-next-line react/no-array-index-key -- the operations of one edit have no other name
              <div key={i}>
                <dt>{place}</dt>
                <dd>
                  You wrote {mine}. It now says {theirs}.
                </dd>
              </div>
            )
          })}
        </dl>
      ) : (
        <p>{refused.message}</p>
      )}
    </Notice>
  )
}

interface Sides {
  place: string
  mine: string
  theirs: string
}

const quoted = (text: string | undefined): string => (text ? `“${text}”` : 'nothing')
const orderText = (ids: readonly string[], { sections }: ChartBody): string =>
  quoted(ids.map((id) => sections.find((section) => section.id === id)?.name ?? '?').join(' '))
const tempoText = (tempo: ChartBody['tempo']): string => (tempo ? `“${tempo.min} to ${tempo.max}”` : 'nothing')

/** Both sides of a refused operation in words, against the chart as it is now. */
export const sidesOf = (operation: ChartOperation, body: ChartBody): Sides => {
  const section = 'sectionId' in operation ? body.sections.find(({ id }) => id === operation.sectionId) : undefined
  const name = section?.name ?? 'a section that is gone'
  switch (operation.kind) {
    case 'setKey':
      return { place: 'Key', mine: quoted(operation.key), theirs: quoted(body.key) }
    case 'setMeter':
      return { place: 'Meter', mine: quoted(operation.meter), theirs: quoted(body.meter) }
    case 'setTempo':
      return { place: 'Tempo', mine: tempoText(operation.tempo), theirs: tempoText(body.tempo) }
    case 'setCyclic': {
      const words = (cyclic: boolean) => (cyclic ? 'that it comes round' : 'that it ends')
      return { place: 'Form', mine: words(operation.cyclic), theirs: words(body.cyclic) }
    }
    case 'setBar':
      return {
        place: `Bar ${operation.index + 1} of ${name}`,
        mine: quoted(operation.text),
        theirs: quoted(section?.bars[operation.index])
      }
    case 'insertBar':
    case 'removeBar': {
      const way = operation.kind === 'insertBar' ? 'a bar more' : 'a bar less'
      return {
        place: `Bar ${operation.index + 1} of ${name}`,
        mine: way,
        theirs: quoted(section?.bars[operation.index])
      }
    }
    case 'setBars':
      return { place: name, mine: quoted(operation.bars.join(' | ')), theirs: quoted(section?.bars.join(' | ')) }
    case 'renameSection':
      return { place: 'Name of a section', mine: quoted(operation.name), theirs: quoted(section?.name) }
    case 'addSection':
    case 'removeSection':
    case 'moveSection':
      return {
        place: 'Sections',
        mine: operation.kind === 'addSection' ? quoted(operation.section.name) : `another place for ${name}`,
        theirs: quoted(body.sections.map((one) => one.name).join(' '))
      }
    case 'setOrder':
      return { place: 'Order', mine: orderText(operation.order, body), theirs: orderText(body.order, body) }
    case 'replaceChart':
      return {
        place: 'The whole chart',
        mine: 'another chart',
        theirs: quoted(body.sections.map((one) => one.name).join(' '))
      }
  }
}
