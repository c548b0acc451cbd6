// The cases: material, speed and shift. Numbers and choice are ours.
import {
  bandMaterial,
  clickMaterial,
  clipMaterial,
  clipNames,
  type Material,
  mixMaterial,
  type PluckPlan,
  pluckMaterial,
  toneMaterial
} from './material.ts'

export type Group = 'tones' | 'plucks' | 'clicks' | 'mixes' | 'clips'

export interface Change {
  speed: number
  semitones: number
  cents: number
}

export interface Case extends Change {
  name: string
  group: Group
  make: () => Material
}

export const ratioOf = ({ semitones, cents }: Change): number => 2 ** ((semitones + cents / 100) / 12)

const named = (group: Group, what: string, change: Partial<Change>, make: () => Material): Case => {
  const { speed = 1, semitones = 0, cents = 0 } = change
  const shift = `${semitones > 0 ? '+' : ''}${semitones || ''}${cents ? `${cents > 0 ? '+' : ''}${cents}c` : ''}`
  return { name: `${what} x${speed}${shift && ` ${shift}`}`, group, speed, semitones, cents, make }
}

const tone = (hertz: number, change: Partial<Change>): Case =>
  named('tones', `tone ${hertz}`, change, () => toneMaterial(hertz))

const tones = (): Case[] => [
  ...[31, 41, 55, 62, 82, 98, 110, 147, 196, 262, 392].flatMap((hertz) =>
    [0.5, 0.25].map((speed) => tone(hertz, { speed }))
  ),
  ...[31, 41, 82, 196].map((hertz) => tone(hertz, { speed: 0.2 })),
  ...[41, 98].map((hertz) => tone(hertz, { speed: 0.75 })),
  ...[55, 110].map((hertz) => tone(hertz, { speed: 1.25 })),
  ...[41, 147].map((hertz) => tone(hertz, { speed: 1.5 })),
  tone(41, { semitones: 12 }),
  tone(41, { semitones: 24 }),
  tone(82, { speed: 0.5, semitones: 12 }),
  tone(55, { speed: 0.5, semitones: 24 }),
  tone(98, { speed: 0.5, semitones: -12 }),
  tone(196, { semitones: -12 }),
  tone(62, { speed: 0.75, semitones: 5 }),
  tone(110, { cents: 37 }),
  tone(82, { speed: 0.5, cents: -37 }),
  tone(262, { cents: -37 }),
  tone(31, { speed: 0.5, semitones: 12 }),
  tone(392, { speed: 0.25, semitones: 12 })
]

const pluck = (plan: PluckPlan, change: Partial<Change>): Case => {
  const kind = plan.isMelody ? 'melody' : plan.isRinging ? 'ringing' : 'pluck'
  return named('plucks', `${kind} ${plan.hertz}`, change, () => pluckMaterial(plan))
}

const plucks = (): Case[] => [
  ...[41, 55, 73, 98, 147, 196].flatMap((hertz) => [0.5, 0.25].map((speed) => pluck({ hertz }, { speed }))),
  pluck({ hertz: 41, isMelody: true }, { speed: 0.5 }),
  pluck({ hertz: 98, isMelody: true }, { speed: 0.5 }),
  pluck({ hertz: 55, isMelody: true, isRinging: true }, { speed: 0.25 }),
  pluck({ hertz: 41, isRinging: true }, { speed: 0.5 }),
  pluck({ hertz: 98, isRinging: true }, { speed: 0.5 }),
  pluck({ hertz: 55 }, { speed: 0.75 }),
  pluck({ hertz: 147 }, { speed: 0.75 }),
  pluck({ hertz: 41 }, { speed: 1.5 }),
  pluck({ hertz: 98 }, { speed: 1.5 }),
  pluck({ hertz: 41 }, { speed: 0.5, semitones: 12 }),
  pluck({ hertz: 98 }, { semitones: 12 }),
  pluck({ hertz: 55 }, { speed: 0.5, semitones: 24 }),
  pluck({ hertz: 147 }, { speed: 0.5, semitones: -12 })
]

const clicks = (): Case[] => [
  ...[0.5, 0.25, 0.75].map((speed) => named('clicks', 'bursts', { speed }, () => clickMaterial('bursts'))),
  ...[0.5, 0.25].map((speed) => named('clicks', 'blips', { speed }, () => clickMaterial('blips')))
]

const mixes = (): Case[] =>
  [true, false].flatMap((isHeld) =>
    [0.5, 0.75, 0.25].map((speed) =>
      named('mixes', isHeld ? 'mix held' : 'mix dying', { speed }, () => mixMaterial(isHeld))
    )
  )

const clips = (): Case[] => [
  ...[0.5, 0.38].flatMap((beat) =>
    [0.5, 0.25].map((speed) => named('clips', `band ${beat}`, { speed }, () => bandMaterial(beat)))
  ),
  ...clipNames().map((name, i) => named('clips', name, { speed: i % 3 === 2 ? 0.25 : 0.5 }, () => clipMaterial(name)))
]

export const allCases = (): Case[] => [...tones(), ...plucks(), ...clicks(), ...mixes(), ...clips()]
