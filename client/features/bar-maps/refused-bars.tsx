import type { BarMapOperation } from '@shared/timing/bar-map-schema'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import { timeWords } from '@shared/timing/time-words'
import type { LiveBarMap } from '@client/features/bar-maps/use-bar-map'

/** An edit that the server did not take: what was wanted, what stands now, and both ways on. */
export function RefusedBars({ document }: { document: LiveBarMap }) {
  const { refused } = document
  if (!refused) return null
  const { operations } = refused.edit
  const wanted = operations.map((operation) => operationWords(operation)).join('; ')
  return (
    <Notice
      kind="fault"
      title={refused.isConflict ? 'Somebody changed the same bars meanwhile' : 'That change of the bars was not taken'}
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
      {refused.isConflict ? (
        <>
          {wanted ? <p>You wanted: {wanted}.</p> : <p>{refused.message}</p>}
          <p>The timeline shows the bars as they are now.</p>
        </>
      ) : (
        <p>{refused.message}</p>
      )}
    </Notice>
  )
}

const placeOf = ({ bar, beat }: { bar: number; beat: { n: number; d: number } }): string =>
  beat.n === beat.d ? `the line of bar ${bar}` : `a beat of bar ${bar}`

export const operationWords = (operation: BarMapOperation): string => {
  switch (operation.kind) {
    case 'setAnchor':
      return `${placeOf(operation.anchor.position)} at ${timeWords(operation.anchor.sec)}`
    case 'moveAnchor':
      return `a line at ${timeWords(operation.sec)}`
    case 'removeAnchor':
      return 'a line let go'
    case 'replaceAnchors':
      return operation.anchors.length > 0
        ? `bars from ${timeWords(operation.anchors[0]?.sec ?? 0)} to ${timeWords(operation.anchors.at(-1)?.sec ?? 0)}`
        : 'bars taken out'
    case 'shiftBeats':
      return '1 on another beat'
    case 'halve':
      return 'half as many beats'
    case 'double':
      return 'twice as many beats'
    case 'setBarOne':
      return 'bar 1 in another place'
    case 'setMeter':
      return `${operation.meter.upper}/${operation.meter.lower} from bar ${operation.bar}`
    case 'removeMeter':
      return `no change of meter at bar ${operation.bar}`
    case 'setMark':
      return operation.mark.formBar === null
        ? `outside the form from bar ${operation.mark.bar}`
        : `bar ${operation.mark.bar} as bar ${operation.mark.formBar} of the form`
    case 'removeMark':
      return `no mark of the form at bar ${operation.bar}`
    case 'insertBar':
      return `a bar more at bar ${operation.bar}`
    case 'removeBar':
      return `bar ${operation.bar} taken out`
    case 'setAll':
      return operation.body.anchors.length === 0 ? 'all bars cleared' : 'all bars replaced'
  }
}
