// Ranges of a rendition through access checks, beside res.sendFile of the same file.
import { addressOf } from '@shared/contracts/route'
import { takeRoutes } from '@shared/contracts/takes'
import { get, mustGet } from './get.ts'
import { alone, compared, comparedAt, type Figure } from './report.ts'
import { join } from 'node:path'
import { renditionFile } from '@server/media/commands'
import { spending, type Stage } from './stage.ts'
import { inPairs } from './statistics.ts'

const sizes = { '64 kB': 64 * 1024, '1 MB': 1024 ** 2 }
const pairs = 100
const warmUp = 20
const atOnce = 8
const rounds = 8

export const rangeFigures = async (stage: Stage): Promise<Figure[]> => {
  const real = await stage.real()
  const bare = await stage.bare()
  const { takeId, folder, result, what } = await stage.longTake()
  await bare.ask({ ask: 'file', path: join(folder, renditionFile) })
  const url = real.url + addressOf(takeRoutes.audio, { params: { takeId } })
  const peerUrl = `${bare.url}/file`
  const total = result.rendition.bytes

  const figures: Figure[] = []
  for (const [name, bytes] of Object.entries(sizes)) {
    // The same place of the file for both, another one in every round.
    const rangeOf = (round: number) => {
      const first = Math.floor((round * 0.618034 * total) % (total - bytes))
      return { Range: `bytes=${first}-${first + bytes - 1}` }
    }
    const ours = (round: number) => mustGet(url, 206, { Cookie: real.cookie, ...rangeOf(round) })
    const peer = (round: number) => mustGet(peerUrl, 206, rangeOf(round))
    if (!(await ours(1)).body.equals((await peer(1)).body)) throw new Error('Both serve other bytes')
    await inPairs(
      warmUp,
      (n) => ours(n).then(({ ms }) => ms),
      (n) => peer(n).then(({ ms }) => ms)
    )
    const heads = { ours: [] as number[], peer: [] as number[] }
    const spent = await spending(real, bare)
    const whole = await inPairs(
      pairs,
      async (n) => {
        const { ms, headMs } = await ours(n)
        heads.ours.push(headMs)
        return ms
      },
      async (n) => {
        const { ms, headMs } = await peer(n)
        heads.peer.push(headMs)
        return ms
      }
    )
    const cpuMs = await spent()
    const together = async (one: (n: number) => Promise<unknown>, round: number): Promise<number> => {
      const began = performance.now()
      await Promise.all(Array.from({ length: atOnce }, (_, i) => one(round * atOnce + i)))
      return (atOnce * bytes) / 1e6 / ((performance.now() - began) / 1000)
    }
    const flow = await inPairs(
      rounds,
      (n) => together(ours, n),
      (n) => together(peer, n)
    )
    const how = `${what}: range of the rendition (${Math.round(total / 1e6)} MB) at ${pairs} places by turns; peer: res.sendFile of the same file`
    figures.push(
      compared(`${name}, p50`, 'ms', whole, how),
      comparedAt(0.95, `${name}, p95`, 'ms', whole, how),
      compared(`${name}, to the first byte`, 'ms', heads, how),
      compared(
        `${name}, the server's processor time`,
        'ms',
        { ours: [cpuMs.ours / pairs], peer: [cpuMs.peer / pairs] },
        `${how}; of the node process alone, which other load hardly moves`
      ),
      compared(`${name}, ${atOnce} at once`, 'MB/s', flow, `${how}; more is better`)
    )
  }
  await real.ask({ ask: 'count statements' })
  await get(url, { Cookie: real.cookie, Range: 'bytes=0-99' })
  const statements = await real.ask<string[]>({ ask: 'statements' })
  figures.push(alone('SQL statements a range', '', statements.length, 'counted in pg itself', statements))
  return figures
}
