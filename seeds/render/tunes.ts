// The three tunes of Harbour Street, made for the demo: forms and changes are ours, there is no melody.
import type { ChartSection } from '@shared/music/types'
import type { DemoTune } from './demo-types'
import { idFrom } from './random'

const section = (tune: string, name: string, bars: string): ChartSection => ({
  id: idFrom(`${tune} section ${name}`),
  name,
  bars: bars.split('|').map((bar) => bar.trim())
})

const tideA = section('slack-tide', 'A', 'Gm7 | % | % | % | % | % | % | %')
const tideB = section('slack-tide', 'B', 'Cm7 | % | % | % | % | % | % | %')

export const slackTide: DemoTune = {
  slug: 'slack-tide',
  title: 'Slack Tide',
  about: 'Eight bars to a chord. The chart stands still, so the line has to find its own way from one G to the next.',
  chart: {
    key: 'G minor',
    meter: '4/4',
    tempo: { min: 120, max: 160 },
    cyclic: true,
    sections: [tideA, tideB],
    order: [tideA.id, tideA.id, tideB.id, tideA.id]
  }
}

const blues = section(
  'ferry-money',
  'Blues',
  'F7 | Bb7 | F7 | Cm7 F7 | Bb7 | Bbm6 | F7 | D7b9 | Gm7 | C7 | F7 D7b9 | Gm7 C7'
)

export const ferryMoney: DemoTune = {
  slug: 'ferry-money',
  title: 'Ferry Money',
  about: 'Twelve bars of blues with a turnaround. The minor chord in bar 6 is where most lines go wrong.',
  chart: {
    key: 'F major',
    meter: '4/4',
    tempo: { min: 104, max: 132 },
    cyclic: true,
    sections: [blues],
    order: [blues.id]
  }
}

const quayA = section('quay-lantern', 'A', 'Gmaj7 | Em7 | Am7 | D7 | Bm7 | E7b9 | Am7 | Cm6')
const quayB = section('quay-lantern', 'B', 'Bm7b5 | E7b9 | Am7 | F7 | Bm7 | Bbdim7 | Am7 | D7')
const quayC = section('quay-lantern', 'C', 'Cmaj7 | Cm6 | Bm7 | E7b9 | Am7 | D7 | Gmaj7 | D7')

export const quayLantern: DemoTune = {
  slug: 'quay-lantern',
  title: 'Quay Lantern',
  about: 'A waltz. Play the first beat long and leave the other two to the room.',
  chart: {
    key: 'G major',
    meter: '3/4',
    tempo: { min: 112, max: 150 },
    cyclic: true,
    sections: [quayA, quayB, quayC],
    order: [quayA.id, quayB.id, quayA.id, quayC.id]
  }
}

export const tunes = [slackTide, ferryMoney, quayLantern]
