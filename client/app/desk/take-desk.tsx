import { useCallback, useRef, useState } from 'react'
import type { Me } from '@shared/contracts/account'
import type { Take } from '@shared/contracts/takes'
import { AccountMenu } from '@client/features/account/account-menu'
import { useCommentNews } from '@client/features/comments/use-comment-news'
import type { ShownComment } from '@client/features/comments/changes'
import type { SpanEdge } from '@client/features/comments/move-row'
import { useTakeProgress } from '@client/features/takes/api'
import { PutToTune } from '@client/features/takes/put-to-tune'
import { ReadingState } from '@client/features/takes/reading-state'
import { TakeSettings } from '@client/features/takes/take-settings'
import { paths } from '@client/lib/paths'
import { useNarrow } from '@client/lib/use-narrow'
import type { TimelineHandle } from '@client/timeline/timeline'
import type { Player } from '@client/transport/player'
import { AppShell } from '@client/ui/app-shell'
import { Button } from '@client/ui/button'
import { useSay } from '@client/ui/live-log'
import { useToast } from '@client/ui/toasts'
import { nudgeSec, type Snap } from '@shared/timing/snap'
import type { Span } from '@shared/timing/types'
import { BarsPanel } from './bars-panel'
import { BarsTable } from './bars-table'
import { ChartPanel } from './chart-panel'
import { DeskActions, type DeskPanel } from './desk-actions'
import { DeskClip } from './desk-clip'
import { DeskLanes } from './desk-lanes'
import { DeskMargin } from './desk-margin'
import { againBefore, DeskTransport } from './desk-transport'
import { OverPanel } from './over-panel'
import { PanelBoundary } from './panel-boundary'
import { PeoplePanel } from './people-panel'
import type { PlaceAddress } from './place-address'
import { SelectionLine } from './selection-line'
import { useDeskKeys } from './use-desk-keys'
import { useDeskPractice } from './use-desk-practice'
import { useHearing } from './use-hearing'
import { deskAddress, usePlaceAddress } from './use-place-address'
import { useStickyFoot } from './use-sticky-foot'
import { useTakeMaterial } from './use-take-material'

export interface TakeDeskProps {
  me: Me
  take: Take
  player: Player
  /** What the sound cannot do here, in words. */
  missing: string | null
  onGone: () => void
}

const phonePx = 640
const sideBySidePx = 1024

/** The desk: strip, lanes, transport and margin around one selection and one sound. */
export function TakeDesk({ me, take, player, missing, onGone }: TakeDeskProps) {
  const toast = useToast()
  const say = useSay()
  const material = useTakeMaterial(take, me)
  const { model, comments, letters, tune, bars } = material
  const [selection, setSelection] = useState<Span | null>(null)
  const practice = useDeskPractice(player, model, take.tuningCents)
  const hearing = useHearing({ me, take, player, selection, ways: practice.manner.ways })
  const { controls } = hearing
  const [panel, setPanel] = useState<DeskPanel | null>(null)
  const [selectedId, setSelectedId] = useState<string | null>(null)
  const [snap, setSnap] = useState<Snap>('bar')
  const [isFollowing, setFollowing] = useState(true)
  const [open, setOpen] = useState<'keys' | 'table' | 'tune' | 'clip' | 'settings' | null>(null)
  const [writeCount, setWriteCount] = useState(0)
  const [isRecording, setRecording] = useState(false)
  const timeline = useRef<TimelineHandle>(null)
  const foot = useRef<HTMLDivElement>(null)
  /** The last deletion, while it can be taken back. */
  const lastRemoval = useRef<(() => boolean) | null>(null)
  const isPhone = useNarrow(phonePx)
  const isStacked = useNarrow(sideBySidePx)
  const isReady = take.state === 'ready'
  const can = (ability: string) => take.abilities.includes(ability)

  useTakeProgress(take.id)
  useStickyFoot(foot, isStacked)
  const sayPlace = useCallback((span: Span) => model.placeOf(span).place, [model])
  useCommentNews({ ...comments, memberId: me.id, placeOf: sayPlace, say })

  const select = (span: Span | null) => {
    setSelection(span)
    // A loop that is on goes where the selection goes.
    if (player.loop) controls.setLoop(span && span.endSec > span.startSec ? span : null)
  }
  const selectBars = (span: Span | null) => {
    setSelection(span)
    controls.setLoop(span)
  }
  const listenTo = (comment: ShownComment) => {
    const span = { startSec: comment.startSec, endSec: comment.endSec }
    setSelectedId(comment.id)
    const hasLength = span.endSec > span.startSec
    setSelection(hasLength ? span : null)
    controls.setLoop(hasLength ? span : null)
    controls.seek(span.startSec)
    timeline.current?.show(span.startSec)
  }
  const copyAddress = async () => {
    const address = deskAddress({ model, player, selection, commentId: selectedId })
    try {
      await navigator.clipboard.writeText(window.location.origin + address)
      toast({ text: 'Address copied.' })
    } catch {
      toast({ text: `Your browser keeps the clipboard shut. The address is ${window.location.origin}${address}` })
    }
  }
  const openAddress = ({ comment, speed, loop }: PlaceAddress, span: Span | null) => {
    const said = comment ? comments.comments.find(({ id }) => id === comment) : undefined
    const at = span ?? (said ? { startSec: said.startSec, endSec: said.endSec } : null)
    if (said) setSelectedId(said.id)
    if (speed !== null) controls.setRate(speed / 100)
    if (!at) return
    const hasLength = at.endSec > at.startSec
    setSelection(hasLength ? at : null)
    if (loop && hasLength) controls.setLoop(at)
    controls.seek(at.startSec)
    timeline.current?.show(at.startSec)
  }
  const nudged = (span: Span, edge: SpanEdge, steps: number): Span => {
    const sec = nudgeSec(edge === 'start' ? span.startSec : span.endSec, 'beat', steps, model)
    const moved = edge === 'start' ? { ...span, startSec: sec } : { ...span, endSec: sec }
    return moved.endSec > moved.startSec ? moved : span
  }
  const undo = () => {
    const bringBack = lastRemoval.current
    lastRemoval.current = null
    if (bringBack?.()) say('The comment is back.')
    else if (can('take:edit-bars')) void bars.undo()
  }

  usePlaceAddress({
    model,
    player,
    isSettled: material.isSettled && isReady,
    selection,
    commentId: selectedId,
    onOpen: openAddress
  })
  useDeskKeys({
    player,
    controls,
    model,
    selection,
    snap,
    practice: isRecording ? { ...practice, keys: { ...practice.keys, areOff: true } } : practice,
    timeline,
    onSelect: select,
    onFollow: () => setFollowing(!isFollowing),
    onWrite: () => setWriteCount(writeCount + 1),
    onUndo: undo,
    ...(can('take:edit-bars') ? { onRedo: () => void bars.redo() } : {}),
    onAgainBefore: () => againBefore({ player, controls, model }),
    onKeySheet: () => setOpen('keys'),
    say
  })

  const groupName = me.memberships.find(({ groupId }) => groupId === take.groupId)?.groupName ?? 'Group'
  const crumbs = [
    { label: groupName, to: paths.group(take.groupId) },
    ...(tune ? [{ label: tune.title, to: paths.tune(tune.id) }] : []),
    { label: take.title }
  ]

  const margin = (
    <DeskMargin
      player={player}
      model={model}
      fill={!isStacked}
      people={<PeoplePanel take={take}>{hearing.people}</PeoplePanel>}
      comments={comments}
      letters={letters}
      canComment={can('take:comment') && isReady}
      selection={selection}
      selectedId={selectedId}
      placeOf={model.placeOf}
      nudged={nudged}
      focusCount={writeCount}
      onListen={listenTo}
      onSaid={setSelectedId}
      onRemoved={(bringBack) => {
        lastRemoval.current = bringBack
      }}
    />
  )

  return (
    <AppShell
      crumbs={crumbs}
      right={
        <>
          {hearing.header}
          <AccountMenu />
        </>
      }
      fill
    >
      <title>{`${take.title} · Plumbline`}</title>
      <h1 className="sr-only">{take.title}</h1>
      <div className="grid min-h-0 flex-1 grid-cols-1 gap-2 px-2 sm:gap-3 sm:px-5 lg:grid-cols-[minmax(0,1fr)_20rem] xl:grid-cols-[minmax(0,1fr)_23.5rem]">
        <div className="min-w-0 border border-rule bg-sheet lg:min-h-0 lg:overflow-y-auto">
          {isReady ? (
            <DeskLanes
              player={player}
              gainDb={take.gainDb ?? 0}
              material={material}
              hearing={hearing}
              timeline={timeline}
              selection={selection}
              onSelect={select}
              onSelectBars={selectBars}
              selectedId={selectedId}
              onSelectComment={listenTo}
              snap={snap}
              onSnap={setSnap}
              isFollowing={isFollowing}
              onFollow={setFollowing}
              isEditingBars={panel === 'bars'}
              isNarrow={isPhone}
              layBars={
                can('take:edit-bars') && panel !== 'bars' ? (
                  <Button onClick={() => setPanel('bars')}>Lay the bars</Button>
                ) : null
              }
              panel={
                panel === 'bars' ? (
                  <BarsPanel
                    me={me}
                    material={material}
                    player={player}
                    controls={controls}
                    selection={selection}
                    onClose={() => setPanel(null)}
                  />
                ) : panel === 'over' && hearing.isShared ? (
                  <p className="px-4 py-3 text-pencil">
                    Step away from the session first: recording over the take stops the sound, and that would stop it
                    for everybody.
                  </p>
                ) : panel === 'over' ? (
                  <OverPanel
                    me={me}
                    take={take}
                    player={player}
                    model={model}
                    selection={selection}
                    preferences={{ click: practice.click.settings, countIn: practice.click.countIn }}
                    onBegin={() => player.state === 'playing' && controls.pause()}
                    onRunning={setRecording}
                    onClose={() => setPanel(null)}
                  />
                ) : panel === 'chart' && tune ? (
                  <ChartPanel
                    tune={tune}
                    memberId={me.id}
                    style={material.chordStyle}
                    onBody={material.previewChart}
                    onClose={() => setPanel(null)}
                  />
                ) : null
              }
            >
              <div className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1">
                <SelectionLine
                  model={model}
                  selection={selection}
                  onCopy={() => void copyAddress()}
                  onClear={isPhone ? () => select(null) : undefined}
                />
                <DeskActions
                  take={take}
                  tune={tune}
                  panel={panel}
                  onPanel={setPanel}
                  onTune={() => setOpen('tune')}
                  onTable={() => setOpen('table')}
                  onClip={() => setOpen('clip')}
                  onSettings={() => setOpen('settings')}
                />
              </div>
              {hearing.pointed.map(({ name, span }) => (
                <p key={name} className="text-sm text-pencil">
                  {name} points at{' '}
                  <button
                    type="button"
                    className="min-h-6 underline decoration-dotted underline-offset-2"
                    onClick={() => select(span)}
                  >
                    {model.placeOf(span).place}
                  </button>
                </p>
              ))}
            </DeskLanes>
          ) : (
            <div className="px-4 py-6 sm:px-6">
              <ReadingState take={take} onRemoved={onGone} />
            </div>
          )}
        </div>
        <div className="min-w-0 border border-rule bg-sheet px-4 lg:min-h-0 lg:pb-4">{margin}</div>
      </div>
      <div ref={foot} className="sticky bottom-0 z-10 flex-none bg-paper px-2 pt-2 pb-2 sm:px-5 sm:pt-3 sm:pb-3">
        <PanelBoundary name="the transport">
          <DeskTransport
            takeId={take.id}
            player={player}
            controls={controls}
            model={model}
            practice={practice}
            selection={selection}
            isShared={hearing.isShared}
            missing={missing}
            isKeySheetOpen={open === 'keys'}
            onKeySheet={(isOpen) => setOpen(isOpen ? 'keys' : null)}
            onKeptLoop={(span) => {
              selectBars(span)
              controls.seek(span.startSec)
              timeline.current?.show(span.startSec)
            }}
          />
        </PanelBoundary>
      </div>
      {open === 'table' ? (
        <BarsTable
          title={take.title}
          model={model}
          comments={comments.comments}
          letters={letters}
          onGoTo={(sec) => {
            controls.seek(sec)
            timeline.current?.show(sec)
          }}
          onClose={() => setOpen(null)}
        />
      ) : null}
      {open === 'clip' ? (
        <DeskClip
          takeId={take.id}
          player={player}
          model={model}
          practice={practice}
          selection={selection}
          onClose={() => setOpen(null)}
        />
      ) : null}
      {open === 'settings' ? <TakeSettings take={take} onClose={() => setOpen(null)} onRemoved={onGone} /> : null}
      {open === 'tune' ? <PutToTune take={take} onClose={() => setOpen(null)} /> : null}
    </AppShell>
  )
}
