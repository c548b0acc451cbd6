// Takes as large as somebody who studies for years would make them. Everything in them is invented.
import { randomUUID } from 'node:crypto'
import { mkdirSync, symlinkSync } from 'node:fs'
import { join } from 'node:path'
import type { CommentKind } from '@shared/contracts/comments'
import { chartDocument } from '@shared/music/chart-document'
import type { ChartBody } from '@shared/music/types'
import { barMapDocument } from '@shared/timing/bar-map-document'
import type { BarMapBody } from '@shared/timing/types'
import type { App } from '@server/app'
import { buildTake, buildTune } from '../support/build.ts'
import { idOf, type PersonKey } from '../support/people.ts'
import type { LongTake } from './sound.ts'

type Place = Pick<App, 'db'> & { storageDir: string }

const chorusBars = 32

/** 0-1, the same in every run. */
const wobble = (n: number): number => (((n * 2654435761) >>> 0) % 1000) / 1000

/** A line for every bar, none quite even, and a mark for every pass of 32 bars. */
export const barMapOf = (bars: number, durationSec: number): BarMapBody => {
  const barSec = durationSec / bars
  return {
    anchors: Array.from({ length: bars }, (_, i) => ({
      id: `a${i}`,
      sec: i * barSec + wobble(i) * barSec * 0.05,
      position: { bar: i + 1, beat: { n: 1, d: 1 } }
    })),
    meters: [{ bar: 1, meter: { upper: 4, lower: 4, pulse: 1 } }],
    marks: Array.from({ length: Math.ceil(bars / chorusBars) }, (_, i) => ({
      bar: i * chorusBars + 1,
      formBar: 1,
      newPass: true
    }))
  }
}

const chart: ChartBody = {
  key: 'F major',
  meter: '4/4',
  tempo: { min: 120, max: 140 },
  cyclic: true,
  sections: [
    { id: 'a', name: 'A', bars: ['Fmaj7', 'Gm7 C7', 'Am7 D7b9', 'Gm7 C7', 'F7', 'Bbmaj7', 'Bbm6', 'F6 C7'] },
    { id: 'b', name: 'B', bars: ['Bbmaj7', '%', 'Ebm7', 'Ab7', 'Dbmaj7', '%', 'Gm7b5', 'C7alt'] }
  ],
  order: ['a', 'a', 'b', 'a']
}

const kinds: CommentKind[] = ['question', 'observation', 'to fix', 'good']
const authors: PersonKey[] = ['mara', 'jory', 'ines', 'tomas', 'pell']
const sentences = [
  'The line walks down to the third here, and the drummer hears it.',
  'Is this the ninth or a passing note?',
  'Late on two, every time the bridge comes round.',
  'Good: the long note leaves room.',
  'Try the same shape a string lower, so that the shift falls between the bars and not inside one.',
  'The open string rings over the change.'
]

/** Comments all along a take, a third of them with answers, a few settled. */
export const addComments = async (
  { db }: Pick<Place, 'db'>,
  takeId: string,
  count: number,
  durationSec: number
): Promise<void> => {
  const began = Date.UTC(2026, 0, 5, 18)
  const comments = Array.from({ length: count }, (_, i) => {
    const startSec = (i + wobble(i)) * (durationSec / (count + 1))
    const kind = kinds[i % kinds.length] as CommentKind
    const isSettled = (kind === 'question' || kind === 'to fix') && i % 5 === 0
    const at = new Date(began + i * 61_000)
    return {
      id: randomUUID(),
      take_id: takeId,
      author_id: idOf(authors[i % authors.length] as PersonKey),
      kind,
      text: `${sentences[i % sentences.length]} ${sentences[(i * 7 + 3) % sentences.length]}`,
      start_sec: startSec,
      end_sec: startSec + 2 + wobble(i + 1) * 6,
      settled_at: isSettled ? at : null,
      settled_by: isSettled ? idOf('mara') : null,
      created_at: at,
      updated_at: at
    }
  })
  const replies = comments.flatMap(({ id }, i) =>
    Array.from({ length: i % 3 === 0 ? 2 : 0 }, (_, n) => {
      const at = new Date(began + i * 61_000 + (n + 1) * 3600_000)
      return {
        id: randomUUID(),
        comment_id: id,
        author_id: idOf(authors[(i + n + 1) % authors.length] as PersonKey),
        text: sentences[(i + n) % sentences.length] as string,
        created_at: at,
        updated_at: at
      }
    })
  )
  await db('comments').insert(comments)
  await db('replies').insert(replies)
}

const addDocument = async (
  { db }: Pick<Place, 'db'>,
  kind: string,
  home: { take_id: string } | { tune_id: string },
  body: object
): Promise<void> => {
  await db('documents').insert({ id: randomUUID(), kind, revision: 0, body: JSON.stringify(body), ...home })
}

/** A take that is heard and drawn for real, with a tune of 32 bars, bars laid from end to end, and comments. */
export const addLongTake = async (
  place: Place,
  { folder, result }: LongTake,
  size: { bars: number; comments: number }
): Promise<string> => {
  const tuneId = await buildTune(place, { title: 'Slack Tide' })
  await addDocument(place, chartDocument.name, { tune_id: tuneId }, chart)
  const takeId = await buildTake(place, { title: 'A whole evening', tuneId })
  mkdirSync(join(place.storageDir, 'takes', takeId), { recursive: true })
  symlinkSync(folder, join(place.storageDir, 'takes', takeId, 'media'))
  await place
    .db('takes')
    .where({ id: takeId })
    .update({
      duration_sec: result.durationSec,
      sample_rate: result.sampleRate,
      channels: result.channels,
      loudness_lufs: result.loudness.integratedLufs,
      gain_db: result.loudness.gainDb,
      tuning_cents: result.tuningCents,
      rendition_mime: result.rendition.mime,
      manifest: JSON.stringify(result.manifest) as unknown as object
    })
  await addDocument(place, barMapDocument.name, { take_id: takeId }, barMapOf(size.bars, result.durationSec))
  await addComments(place, takeId, size.comments, result.durationSec)
  return takeId
}
