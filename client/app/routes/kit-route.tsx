// Everything of client/ui on one page, to be looked at in both themes and at every width. Dev builds only.
import { useRef, useState } from 'react'
import type { ReactNode } from 'react'
import { readChord } from '@shared/music/chord'
import type { Chord } from '@shared/music/chord'
import { DEFAULT_CHORD_STYLE, typesetChord } from '@shared/music/chord-typeset'
import type { ChordStyle } from '@shared/music/chord-typeset'
import { useScope } from '@client/lib/scope'
import { AppShell } from '@client/ui/app-shell'
import { Button } from '@client/ui/button'
import { Checkbox } from '@client/ui/checkbox'
import { ChordSymbol } from '@client/ui/chord-symbol'
import { Dialog } from '@client/ui/dialog'
import { drawChord, measureChord } from '@client/ui/draw-chord'
import { DropZone } from '@client/ui/drop-zone'
import { Empty } from '@client/ui/empty'
import { Form } from '@client/ui/faults'
import { Figures } from '@client/ui/figures'
import { Icon, iconNames } from '@client/ui/icon'
import { IconButton } from '@client/ui/icon-button'
import { Initials } from '@client/ui/initials'
import { LiveLog, useSay } from '@client/ui/live-log'
import { Menu } from '@client/ui/menu'
import { Notice } from '@client/ui/notice'
import { Page, PageSection } from '@client/ui/page'
import { Popover } from '@client/ui/popover'
import { Progress } from '@client/ui/progress'
import { RadioGroup } from '@client/ui/radio-group'
import { RelativeTime } from '@client/ui/relative-time'
import { Select } from '@client/ui/select'
import { Sentence, SentenceChoice, SentenceNumber } from '@client/ui/sentence'
import { Sheet } from '@client/ui/sheet'
import { Slider } from '@client/ui/slider'
import { Tabs } from '@client/ui/tabs'
import { TextArea } from '@client/ui/text-area'
import { TextField } from '@client/ui/text-field'
import { useTheme } from '@client/ui/theme'
import type { ThemeChoice } from '@client/ui/theme'
import { Toasts, useToast } from '@client/ui/toasts'
import { useTokens, whenFontsReady } from '@client/ui/tokens'
import { Toolbar } from '@client/ui/toolbar'

const people = ['Mara Kessel', 'Inés Barro', 'Tomás Oyelaran', 'Jun Rask', 'Ada', 'Lio Fenn', 'Pia Orr', 'Sam Dray']

const handwriting: ChordStyle = { ...DEFAULT_CHORD_STYLE, majorSeventh: 'triangle', minor: 'minus' }

const chords: Chord[] = [
  'Cm7',
  'G7b9',
  'Bbmaj7#11',
  'F#m7b5',
  'Abdim7',
  'Ebmaj7/G',
  'D7#9b13',
  'Bbb13sus4',
  'F##+',
  'C6/9',
  'Cm(maj7)',
  'N.C.'
].flatMap((text) => {
  const read = readChord(text)
  return read.ok ? [read.value] : []
})

export function KitRoute() {
  return (
    <LiveLog>
      <Toasts>
        <AppShell
          crumbs={[
            { label: 'Harbour Street group', to: '/' },
            { label: 'Slack Tide', to: '/tunes' },
            { label: 'Inés, 24 November, second try' }
          ]}
          right={<People />}
        >
          <Page title="The kit" lead="Every piece of the interface, once." width="wide" actions={<Themes />}>
            <Buttons />
            <Chords />
            <Fields />
            <Sentences />
            <Layers />
            <States />
          </Page>
        </AppShell>
      </Toasts>
    </LiveLog>
  )
}

function People() {
  return (
    <>
      <span className="hidden text-pencil lg:inline">Listening together, Mara leads</span>
      <span className="flex gap-2">
        {people.slice(0, 4).map((name, index) => (
          <Initials key={name} id={`member-${name}`} name={name} leads={index === 0} />
        ))}
      </span>
      <Button>Step away</Button>
    </>
  )
}

function Themes() {
  const [theme, setTheme] = useTheme()
  return (
    <Select<ThemeChoice>
      label="Light"
      value={theme}
      onChange={setTheme}
      choices={[
        { value: 'system', label: 'as the system' },
        { value: 'light', label: 'daylight' },
        { value: 'dark', label: 'late set' }
      ]}
    />
  )
}

const Row = ({ children }: { children: ReactNode }) => (
  <div className="flex flex-wrap items-center gap-4">{children}</div>
)

function Buttons() {
  return (
    <PageSection title="Buttons and signs">
      <Row>
        <Button look="primary">Say it</Button>
        <Button>Step away</Button>
        <Button look="quiet" icon="pencil">
          Edit
        </Button>
        <Button disabled>Not now</Button>
        <Button busy>Sending</Button>
      </Row>
      <Row>
        <IconButton icon="play" label="Play" look="round" keys="Space" />
        <IconButton icon="pause" label="Pause" look="round" keys="Space" />
        <IconButton icon="loop" label="Loop the selection" look="plain" aria-pressed={true} />
        <IconButton icon="bin" label="Delete" disabled />
      </Row>
      <div className="flex flex-wrap gap-x-5 gap-y-3">
        {iconNames.map((name) => (
          <span key={name} className="grid w-18 justify-items-center gap-1 text-xs text-pencil">
            <span className="text-ink">
              <Icon name={name} />
            </span>
            {name}
          </span>
        ))}
      </div>
      <Row>
        {people.map((name) => (
          <Initials key={name} id={`member-${name}`} name={name} />
        ))}
        <Initials id="big" name="Mara Kessel" size={40} />
      </Row>
    </PageSection>
  )
}

function Chords() {
  const canvas = useRef<HTMLCanvasElement>(null)
  const tokens = useTokens()
  useScope(
    (scope) => {
      whenFontsReady(scope, () => {
        const ctx = canvas.current?.getContext('2d')
        if (!ctx || !canvas.current) return
        ctx.setTransform(devicePixelRatio, 0, 0, devicePixelRatio, 0, 0)
        ctx.clearRect(0, 0, 900, 40)
        let x = 0
        for (const chord of chords) {
          const set = typesetChord(chord)
          drawChord(ctx, set, x, 27, 20, tokens.ink)
          x += measureChord(ctx, set, 20) + 24
        }
      })
    },
    [tokens]
  )
  return (
    <PageSection title="Chords">
      <div className="flex flex-wrap gap-6">
        {chords.map((chord) => (
          <ChordSymbol key={JSON.stringify(chord)} chord={chord} size={20} />
        ))}
      </div>
      <div className="overflow-x-auto">
        <canvas ref={canvas} width={900 * devicePixelRatio} height={40 * devicePixelRatio} className="h-10 w-[900px]">
          The same chords, drawn.
        </canvas>
      </div>
      <Row>
        {chords.slice(0, 3).map((chord) => (
          <ChordSymbol key={JSON.stringify(chord)} chord={chord} size={20} faint />
        ))}
        {chords.slice(0, 3).map((chord) => (
          <ChordSymbol key={JSON.stringify(chord)} chord={chord} size={20} claim style={handwriting} />
        ))}
        <span>over B♭7♯11, F♯ø, E△ in a sentence</span>
      </Row>
      <p>
        Bars <Figures>111</Figures>, <Figures>188</Figures>, <Figures>117</Figures> · <Figures>2:03.4</Figures>
      </p>
    </PageSection>
  )
}

function Fields() {
  const [kind, setKind] = useState('question')
  const [reach, setReach] = useState('teachers')
  return (
    <PageSection title="Fields">
      <Form
        errors={[
          { in: 'body', path: 'title', message: 'A tune needs a title.' },
          { in: 'body', path: 'agreed', message: 'Say that those who play on it agree.' },
          { in: 'body', path: 'elsewhere', message: 'The group has no room for another tune.' }
        ]}
        onSubmit={() => undefined}
      >
        <div className="grid gap-5 sm:grid-cols-2">
          <TextField label="Title" name="title" hint="As you call it in the group." />
          <TextField label="E-mail" name="email" type="email" optional placeholder="you@harbour.example" />
          <TextArea label="Write about bars 17 to 20" name="text" placeholder="What do you hear?" />
          <Select
            label="Kind"
            value={kind}
            onChange={setKind}
            choices={[
              { value: 'question', label: 'question' },
              { value: 'fix', label: 'to fix' }
            ]}
          />
          <RadioGroup
            legend="Who may hear it"
            value={reach}
            onChange={setReach}
            choices={[
              { value: 'me', label: 'only me' },
              { value: 'teachers', label: 'me and my teachers', note: 'Mara Kessel' },
              { value: 'group', label: 'the group' }
            ]}
          />
          <div className="grid content-start gap-2">
            <Checkbox label="I play on this, or those who do have agreed" name="agreed" />
            <Checkbox label="octave up" defaultChecked />
            <Checkbox label="low focus" disabled />
          </div>
        </div>
      </Form>
    </PageSection>
  )
}

function Sentences() {
  const [speed, setSpeed] = useState(60)
  const [faster, setFaster] = useState({ from: 60, to: 100, up: 5, after: 4 })
  const [word, setWord] = useState('question')
  const change = (part: Partial<typeof faster>) => setFaster({ ...faster, ...part })
  return (
    <PageSection title="Transport parts">
      <Toolbar label="Transport">
        <IconButton icon="stepBack" label="To the start of the loop" />
        <IconButton icon="play" label="Play" look="round" />
        <IconButton icon="loop" label="Loop" aria-pressed={false} />
        <IconButton icon="undo" label="Undo" disabled />
        <IconButton icon="redo" label="Redo" />
        <div className="ml-4 w-44">
          <Slider
            label="Speed"
            says={`${speed} % · ${Math.round(speed * 1.4)} beats a minute`}
            min={20}
            max={150}
            value={speed}
            onChange={setSpeed}
          />
        </div>
      </Toolbar>
      <Sentence label="Faster">
        <SentenceNumber
          label="starting speed"
          unit=" %"
          min={20}
          max={150}
          step={5}
          value={faster.from}
          onChange={(from) => change({ from })}
        />
        {' to '}
        <SentenceNumber
          label="last speed"
          unit=" %"
          min={20}
          max={150}
          step={5}
          value={faster.to}
          onChange={(to) => change({ to })}
        />
        {', up '}
        <SentenceNumber label="step" min={1} max={50} value={faster.up} onChange={(up) => change({ up })} />
        {' after '}
        <SentenceNumber
          label="how often at one speed"
          unit=" times"
          min={1}
          max={32}
          value={faster.after}
          onChange={(after) => change({ after })}
        />
      </Sentence>
      <Sentence label="Kind of comment">
        {'Say it as a '}
        <SentenceChoice
          label="kind"
          value={word}
          onChange={setWord}
          choices={['question', 'observation', 'to fix', 'good'].map((value) => ({ value, label: value }))}
        />
      </Sentence>
    </PageSection>
  )
}

type Layer = 'none' | 'middle' | 'side'

function Layers() {
  const [open, setOpen] = useState<Layer>('none')
  const [tab, setTab] = useState<'comments' | 'changes' | 'people'>('comments')
  const toast = useToast()
  const say = useSay()
  return (
    <PageSection title="Layers">
      <Row>
        <Button onClick={() => setOpen('middle')}>Open a dialog</Button>
        <Button onClick={() => setOpen('side')}>Open at the side</Button>
        <Menu
          label="More"
          items={[
            { key: 'edit', label: 'Edit', icon: 'pencil', onChoose: () => setOpen('middle') },
            { key: 'loop', label: 'Loop it', icon: 'loop', disabled: true, onChoose: () => undefined },
            { key: 'delete', label: 'Delete', icon: 'bin', grave: true, onChoose: () => toast({ text: 'Deleted.' }) }
          ]}
        />
        <Popover
          label="Volume"
          renderTrigger={(props) => <IconButton {...props} icon="volume" label="Volume" look="plain" />}
        >
          {() => <Slider label="Volume" says="80 %" min={0} max={100} value={80} onChange={() => undefined} />}
        </Popover>
        <Button onClick={() => toast({ text: 'Comment deleted.', undo: () => say('The comment is back.') })}>
          Delete with a way back
        </Button>
      </Row>
      {open === 'none' ? null : (
        <Dialog
          title="Hand the lead to Inés?"
          place={open}
          onClose={() => setOpen('none')}
          actions={
            <>
              <Button onClick={() => setOpen('none')}>Keep it</Button>
              <Button look="primary" icon="handOver" onClick={() => setOpen('none')}>
                Hand over
              </Button>
            </>
          }
        >
          <p>Everybody will hear what Inés plays, from the place where you are now.</p>
        </Dialog>
      )}
      <Sheet title="Margin" aside={<Button look="quiet">all bars</Button>}>
        <Tabs
          label="Margin"
          chosen={tab}
          onChoose={setTab}
          tabs={[
            { key: 'comments', label: 'Comments', panel: <MarginNote /> },
            { key: 'changes', label: 'Implied changes', panel: <p>Nothing implied here.</p> },
            { key: 'people', label: 'People', panel: <p>Four people.</p> }
          ]}
        />
      </Sheet>
    </PageSection>
  )
}

function MarginNote() {
  const [at] = useState(() => new Date(Date.now() - 2 * 3_600_000).toISOString())
  return (
    <div className="grid gap-1">
      <p className="text-sm text-pencil">bars 17 to 18 · bridge, 2nd chorus · over Cm7</p>
      <p>You land on B natural over a plain C minor. Did you mean a G7 there, or is it a slip?</p>
      <p className="flex items-center gap-2 text-sm text-pencil">
        <Initials id="member-Mara Kessel" name="Mara Kessel" decorative /> Mara · question · <RelativeTime at={at} />
      </p>
    </div>
  )
}

function States() {
  const [names, setNames] = useState('')
  return (
    <PageSection title="States">
      <div className="grid gap-5 sm:grid-cols-2">
        <DropZone
          title="Drop a recording here"
          says={names || 'wav, flac, mp3, m4a, ogg, webm or aiff, up to 1 GB each. It plays before anything is asked.'}
          accept="audio/*"
          multiple
          onFiles={(files) => setNames(files.map(({ name }) => name).join(', '))}
        />
        <Sheet title="Slack Tide, first try">
          <div className="grid gap-4">
            <Progress
              stage="Listening for loudness"
              percent={42}
              note="You can play it already, and leave this page."
            />
            <Progress stage="Waiting for its turn" percent={null} action={<Button look="quiet">Cancel</Button>} />
          </div>
        </Sheet>
        <Notice title="You are back">Two comments came while you were away.</Notice>
        <Notice kind="fault" title="That file is a list, not a recording" next={<Button>Choose another</Button>}>
          It points to other files. Export the sound itself as wav or mp3 and drop that.
        </Notice>
        <Empty
          says="Comments on this take stand here, in bar order."
          how="Mark some bars in the form strip first."
          action={<Button icon="comment">Write about bar 1</Button>}
        />
      </div>
    </PageSection>
  )
}
