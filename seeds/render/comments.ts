// What Harbour Street wrote beside the bars. Every claim about the playing is true of the recording; the tests hold the
// ones that can be counted. Bars count through the take.
import type { Position } from '@shared/timing/types'
import type { DemoComment, Persona } from './demo-types'
import { ferryMoneyBand } from './takes/ferry-money-band'
import { ferryMoneyTomas } from './takes/ferry-money-tomas'
import { quayLanternPell } from './takes/quay-lantern-pell'
import { quayLanternWren } from './takes/quay-lantern-wren'
import { slackTideInes } from './takes/slack-tide-ines'
import { slackTideMara } from './takes/slack-tide-mara'

const at = (bar: number, beat = 1): Position => ({ bar, beat: { n: beat, d: 1 } })
/** Whole bars, both ends included. */
const bars = (first: number, last = first) => ({ from: at(first), to: at(last + 1) })
const beats = (bar: number, first: number, end: number) => ({ from: at(bar, first), to: at(bar, end) })
const reply = (author: Persona, agoHours: number, text: string) => ({ author, agoHours, text })

const onInes: DemoComment[] = [
  {
    take: slackTideInes.slug,
    author: 'mara',
    kind: 'observation',
    ...bars(1, 4),
    text: 'I dragged across four cells of the strip and wrote this, so it belongs to bars 1 to 4. Press the place above these words: the four bars play and come round again. A good, plain start, by the way.',
    state: null,
    agoHours: 52,
    replies: []
  },
  {
    take: slackTideInes.slug,
    author: 'mara',
    kind: 'to fix',
    ...bars(11, 13),
    text: 'You fall behind the brushes here, about 80 ms in bars 11 and 12, and still late in 13. Loop from bar 10 at 80 %, with the click on 2 and 4 only, until you stop thinking about it. Then bring it back up.',
    state: 'open',
    agoHours: 51,
    replies: [
      reply('ines', 30, 'It is the reach down from the G. I look at my left hand and the time goes.'),
      reply('mara', 29, 'Then look at the wall. Ten minutes a day is plenty.')
    ]
  },
  {
    take: slackTideInes.slug,
    author: 'tomas',
    kind: 'good',
    from: at(16),
    to: at(17, 2),
    text: 'G, A, B flat, B and there is the C. I knew the bridge was coming a whole bar early.',
    state: null,
    agoHours: 47,
    replies: []
  },
  {
    take: slackTideInes.slug,
    author: 'mara',
    kind: 'to fix',
    ...beats(41, 2, 3),
    text: 'B natural on beat 2. The chord is G minor: B flat. A slip of one fret, I think.',
    state: 'settled',
    settledBy: 'ines',
    settledAgoHours: 26,
    agoHours: 50,
    replies: [
      reply('ines', 27, 'Yes, one fret. I have played it right every day since, so I am settling this.'),
      reply('mara', 25, 'Good. Settled ones stay here, folded away, in case it comes back.')
    ]
  },
  {
    take: slackTideInes.slug,
    author: 'jory',
    kind: 'observation',
    ...bars(45),
    text: 'You lost it for beats 2 and 3 and came back in on 4. That is the right way to be lost: the drums went on, you listened, and bar 46 is exactly where it should be.',
    state: null,
    agoHours: 44,
    replies: [reply('ines', 43, 'It felt like a year.')]
  },
  {
    take: slackTideInes.slug,
    author: 'ines',
    kind: 'question',
    ...bars(50, 52),
    text: 'Second bridge. I play B, D, F, A flat in bar 50, and the same with B flat in bar 52, over a C minor that never moves. Is bar 50 a G7 with a flat 9, or is it just B diminished?',
    state: 'open',
    agoHours: 28,
    replies: [
      reply(
        'mara',
        25,
        'G7 flat 9 for me. It goes up to a G and down to an E flat in 51, and that is C minor again. You only left the root out.'
      ),
      reply('jory', 22, 'I hear B diminished, passing. Nobody plays a G in bar 50: not you, not the drums.'),
      reply('tomas', 6, 'Loop 49 to 51 and sing a low G under it. It fits. So does a low B. I am no help.')
    ]
  }
]

const onMara: DemoComment[] = [
  {
    take: slackTideMara.slug,
    author: 'wren',
    kind: 'question',
    from: at(0, 3),
    to: at(1),
    text: 'Why does this begin before bar 1?',
    state: 'settled',
    settledBy: 'wren',
    settledAgoHours: 92,
    agoHours: 96,
    replies: [
      reply('jory', 94, 'Those are pick-up notes. The first full bar is bar 1, so what leads into it is bar 0.')
    ]
  },
  {
    take: slackTideMara.slug,
    author: 'aude',
    kind: 'good',
    ...bars(15),
    text: 'Four quick notes down and then nothing at all for a beat. I waited with you.',
    state: null,
    agoHours: 80,
    replies: []
  },
  {
    take: slackTideMara.slug,
    author: 'pell',
    kind: 'question',
    from: at(50),
    to: at(51, 2),
    text: 'The chart says C minor for eight bars, and here you play G, B, A flat, F. Where does the B natural come from?',
    state: 'settled',
    settledBy: 'pell',
    settledAgoHours: 70,
    agoHours: 76,
    replies: [
      reply(
        'mara',
        74,
        'From G7 flat 9, the five of the chord you are standing on. Root, third, flat nine, seventh, and it lands on the E flat in 51. The chart stands still, the line does not have to.'
      ),
      reply('pell', 70, 'Heard it once I slowed it to half and an octave up. Thank you.')
    ]
  },
  {
    take: slackTideMara.slug,
    author: 'ines',
    kind: 'observation',
    ...bars(52),
    text: 'D, F, B flat, A flat: B flat 7, a whole step below the C, and the A flat drops to G in the next bar. This is the one I took for my own try.',
    state: null,
    agoHours: 60,
    replies: []
  },
  {
    take: slackTideMara.slug,
    author: 'jory',
    kind: 'question',
    ...bars(54),
    text: 'A flat, F, D, B. Two chords in this bar, D half-diminished then G7? Or is it one G7 flat 9 from beat 1? The piano is silent here, so the line has to say it alone.',
    state: 'open',
    agoHours: 33,
    replies: [
      reply('mara', 31, 'I was thinking two. But I only played four notes, so I may not be the one to ask.'),
      reply('ines', 12, 'One, for me. The B at the end makes the whole bar lean.')
    ]
  }
]

const onFerryMoney: DemoComment[] = [
  {
    take: ferryMoneyTomas.slug,
    author: 'mara',
    kind: 'to fix',
    ...bars(25, 36),
    text: 'It creeps. You count in at just over 119 and the last chorus is near 123. Record it again with the click on 2 and 4, and for one chorus with no click at all.',
    state: 'open',
    agoHours: 20,
    replies: [reply('tomas', 18, 'I thought the second chorus was the fast one. Will do.')]
  },
  {
    take: ferryMoneyTomas.slug,
    author: 'tomas',
    kind: 'question',
    ...beats(30, 3, 4),
    text: 'Something is sour on beat 3 and I cannot say what.',
    state: 'settled',
    settledBy: 'tomas',
    settledAgoHours: 38,
    agoHours: 42,
    replies: [
      reply(
        'mara',
        40,
        'D natural. The chord is B flat minor 6, so D flat. You had it in bar 6 and in bar 18: listen to those two and then to this one.'
      )
    ]
  },
  {
    take: ferryMoneyTomas.slug,
    author: 'pell',
    kind: 'good',
    from: at(36, 4),
    to: at(37, 2),
    text: 'G flat into the last F. I am taking that home with me.',
    state: null,
    agoHours: 36,
    replies: []
  },
  {
    take: ferryMoneyBand.slug,
    author: 'aude',
    kind: 'good',
    ...bars(13, 16),
    text: 'The moment you go from two to four. The whole room gets up.',
    state: null,
    agoHours: 100,
    replies: []
  },
  {
    take: ferryMoneyBand.slug,
    author: 'jory',
    kind: 'observation',
    ...bars(37, 38),
    text: 'We play the turnaround once more and stop. So the third chorus is two bars longer than the form, and the strip shows bars 11 and 12 a second time.',
    state: null,
    agoHours: 98,
    replies: [reply('tomas', 90, 'Same again on Thursday?')]
  }
]

const onQuayLantern: DemoComment[] = [
  {
    take: quayLanternWren.slug,
    author: 'wren',
    kind: 'question',
    ...bars(22),
    text: 'I stopped because I could not find the G sharp. Do I have to record it all again?',
    state: 'settled',
    settledBy: 'wren',
    settledAgoHours: 14,
    agoHours: 17,
    replies: [
      reply(
        'mara',
        15,
        'No. You waited, you found it, and the next bar is in time. Loop bars 21 to 23 slowly until your finger knows the way, and leave this take as it is.'
      )
    ]
  },
  {
    take: quayLanternWren.slug,
    author: 'mara',
    kind: 'to fix',
    ...beats(24, 2, 3),
    text: 'E here, and the chord is C minor 6: E flat. You played it right in bar 8.',
    state: 'open',
    agoHours: 15,
    replies: []
  },
  {
    take: quayLanternWren.slug,
    author: 'ines',
    kind: 'good',
    ...bars(25, 28),
    text: 'This is where it begins to dance.',
    state: null,
    agoHours: 9,
    replies: [reply('wren', 8, 'Thank you. That was my favourite bit to play.')]
  },
  {
    take: quayLanternPell.slug,
    author: 'pell',
    kind: 'observation',
    ...bars(1, 4),
    text: 'Free, no time, so it is not part of the form: the strip gives it a row of its own. The tune begins in bar 5.',
    state: null,
    agoHours: 66,
    replies: [
      reply('jory', 64, 'The tenths in the first three bars ring beautifully. Let the last one ring longer still.')
    ]
  }
]

export const comments = [...onInes, ...onMara, ...onFerryMoney, ...onQuayLantern]
