import type { ReactNode } from 'react'
import { AccountMenu } from '@client/features/account/account-menu'
import { hearingNote } from '@client/transport/hearing'
import { KeyList } from '@client/transport/key-list'
import { defaultKeyMap } from '@client/transport/keys'
import { AppShell } from '@client/ui/app-shell'
import { Page, PageSection } from '@client/ui/page'

export function HelpRoute() {
  return (
    <AppShell crumbs={[{ label: 'Help' }]} right={<AccountMenu />}>
      <Page title="Help" lead="What Plumbline is for, its keys, and how to look after ears and hands.">
        <PageSection title="What it is">
          <Words>
            <p>
              Plumbline is a study room for recorded lines. You bring a recording: your own playing, a student’s, the
              band’s last rehearsal. It plays at once, and slows and loops without a change of pitch.
            </p>
            <p>
              Then you lay bars under it by tapping along, and write the chords of the tune. From there every moment of
              the recording has a place that people who play can talk about: bar 19, beat 3, over Gm7. The line that
              hangs through the screen shows where you are.
            </p>
            <p>
              Mark bars and say something about them: a question, an observation, something to fix, something good. The
              others answer in the margin. Or listen together: one person leads, everybody hears the same bar, and
              whoever likes steps away and comes back.
            </p>
          </Words>
        </PageSection>
        <PageSection title="Who hears what">
          <Words>
            <p>
              Nothing here is public. People come into a group by an invitation link only, and whoever uploads a take
              decides who hears it: only them, they and their teachers, people they name, or the group. A teacher is
              yours only when both of you have agreed.
            </p>
            <p>
              Who owns the group sees title, length and uploader of what was not shared with them. They cannot hear it;
              they can take it down.
            </p>
          </Words>
        </PageSection>
        <PageSection title="Keys and pedals">
          <KeyList map={defaultKeyMap} />
          <p className="max-w-prose text-sm text-pencil">
            They work on the screen of a take, and every one of them can be changed on the sheet that ? opens there,
            also to what your pedal sends. As they come, a pedal that sends page keys goes back a bar with one foot and
            plays or pauses with the other. Keys rest while you write, and can be switched off on the same sheet.
          </p>
        </PageSection>
        <PageSection title="Ears">
          <Words>
            <p>{hearingNote}</p>
            <p>
              Takes are brought to about the same loudness, so that you need not turn up for one and down for the next.
              How loud to listen is yours to set, and low is enough for most work. Ringing in the ears or dull hearing
              afterwards means that it was too much: rest them, and if it does not pass, see a doctor.
            </p>
          </Words>
        </PageSection>
        <PageSection title="Hands">
          <Words>
            <p>
              Build up playing time little by little, above all after a break or before a concert, and plan rests. Stop
              before it hurts, and never play through pain. If something hurts, tingles or goes numb and does not go
              away, see a medical professional.
            </p>
            <p>Plumbline gives no advice on treatment, and it keeps no score of how long you played without a rest.</p>
          </Words>
        </PageSection>
        <PageSection title="Parts made by others">
          <Words>
            <ul className="grid list-disc grid-cols-[minmax(0,1fr)] gap-1.5 pl-5">
              <li>
                Text is set in <b className="font-semibold">Lexend</b>; the musical signs are redrawn from{' '}
                <b className="font-semibold">Academico</b> and <b className="font-semibold">Bravura</b>. All three are
                under the SIL Open Font License 1.1: <Licence of="lexend" />, <Licence of="academico" />,{' '}
                <Licence of="bravura" />.
              </li>
              <li>
                The recordings of the demo group were made with the soundfont{' '}
                <b className="font-semibold">FluidR3_GM</b> by Frank Wen (MIT licence). The soundfont itself is not part
                of Plumbline; lines, tunes and people of the demo are invented.
              </li>
              <li>
                When you ask to trim or shrink a recording before sending it, Plumbline loads{' '}
                <b className="font-semibold">@ffmpeg/core</b> 0.12.10, a build of FFmpeg under the GNU General Public
                License 2 or later, as a file of its own. Its source is at{' '}
                <a href="https://github.com/ffmpegwasm/ffmpeg.wasm" rel="noreferrer">
                  github.com/ffmpegwasm/ffmpeg.wasm
                </a>
                .
              </li>
            </ul>
          </Words>
        </PageSection>
      </Page>
    </AppShell>
  )
}

const Words = ({ children }: { children: ReactNode }) => (
  <div className="grid max-w-prose grid-cols-[minmax(0,1fr)] gap-3 break-words">{children}</div>
)

const Licence = ({ of }: { of: 'lexend' | 'academico' | 'bravura' }) => (
  <a href={`/fonts/OFL-${of}.txt`}>licence of {of[0]?.toUpperCase() + of.slice(1)}</a>
)
