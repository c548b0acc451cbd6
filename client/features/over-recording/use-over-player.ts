import { useRef } from 'react'
import type { Player } from '@client/transport/player'
import { clicksFor } from '@shared/practice/click-pattern'
import { countInFor } from '@shared/practice/count-in'
import type { Sec } from '@shared/units'
import type { HeadphoneChoice } from './headphones-form'
import type { OverRecordingProps } from './over-recording'

/** Silence, for the take that is not wanted in the headphones. */
const silentDb = -120

export interface OverPlayer {
  /** The take alone, at this rate, for listening to a try beside it. */
  forListening(choice: HeadphoneChoice, rate: number): Promise<Player>
  /** Everything as chosen, standing at `startSec`. */
  forRecording(choice: HeadphoneChoice, startSec: Sec): Promise<Player>
  /** The player holds something else now. */
  forget(): void
}

/** Puts into the headphones' player what is to be heard: the take as loud as chosen, with the desk's speed, pitch and aids. */
export const useOverPlayer = (
  heard: Player,
  { source, player: desk, barMap, click }: Pick<OverRecordingProps, 'source' | 'player' | 'barMap' | 'click'>
): OverPlayer => {
  /** With which gain the player holds the take; null while it does not. */
  const loaded = useRef<number | null>(null)
  const prepare = async (gainDb: number, rate: number): Promise<void> => {
    const whole = (source.gainDb ?? 0) + gainDb
    if (loaded.current !== whole) {
      loaded.current = whole
      await heard.load({ ...source, gainDb: whole })
    }
    heard.setLoop(null)
    heard.setAids(desk.aids)
    heard.setPitch(desk.semitones)
    heard.setRate(rate)
    heard.setVolume(desk.volume)
  }
  const levelDb = ({ takeLevel }: HeadphoneChoice): number => 20 * Math.log10(takeLevel)
  return {
    forListening: async (choice, rate) => {
      await prepare(levelDb(choice), rate)
      heard.setClicks(null)
      heard.setCountIn(null)
      return heard
    },
    forRecording: async (choice, startSec) => {
      await prepare(choice.hasTake ? levelDb(choice) : silentDb, desk.rate)
      const whole = { startSec: 0, endSec: source.durationSec }
      heard.setClicks(barMap && choice.hasClick ? clicksFor(barMap, click, whole) : null, click.level)
      heard.setCountIn((sec, rate) => countInFor(barMap, sec, rate, choice.countIn))
      heard.seek(startSec)
      return heard
    },
    forget: () => {
      loaded.current = null
    }
  }
}
