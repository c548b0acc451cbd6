// What the built page weighs on the wire as it is served, beside the same files packed beforehand as well as can be.
import { readdirSync, readFileSync } from 'node:fs'
import { extname, join } from 'node:path'
import { brotliCompressSync, constants, gzipSync } from 'node:zlib'
import { get, mustGet } from './get.ts'
import { alone, compared, type Figure } from './report.ts'
import type { Stage } from './stage.ts'
import { inPairs } from './statistics.ts'

const browserAsks = { 'Accept-Encoding': 'gzip, deflate, br, zstd' }
const best = (bytes: Buffer): Buffer => brotliCompressSync(bytes, { params: { [constants.BROTLI_PARAM_QUALITY]: 11 } })

export const assetFigures = async (stage: Stage, rounds: number): Promise<Figure[]> => {
  const { folder } = await stage.room()
  const { url } = await stage.real()
  const assets = join(folder, 'build', 'assets')
  const files = readdirSync(assets)
  const figures: Figure[] = []
  for (const kind of ['.js', '.css']) {
    const names = files.filter((name) => extname(name) === kind)
    let [raw, wire, gzip, brotli] = [0, 0, 0, 0]
    const encodings = new Set<string>()
    for (const name of names) {
      const bytes = readFileSync(join(assets, name))
      const got = await mustGet(`${url}/assets/${name}`, 200, browserAsks)
      encodings.add(String(got.headers['content-encoding'] ?? 'none'))
      raw += bytes.length
      wire += got.body.length
      gzip += gzipSync(bytes, { level: 9 }).length
      brotli += best(bytes).length
    }
    figures.push({
      ...alone(
        `all ${kind.slice(1)} as served`,
        'kB',
        wire / 1000,
        `${names.length} files of the build, asked for as a browser does; peer: brotli 11 made beforehand`,
        { raw, wire, gzip9: gzip, brotli11: brotli, encodings: [...encodings] }
      ),
      peer: brotli / 1000,
      ratio: wire / brotli
    })
  }
  const size = (name: string) => readFileSync(join(assets, name)).length
  const [largest = ''] = files.filter((name) => name.endsWith('.js')).sort((a, b) => size(b) - size(a))
  const fetched = (headers: Record<string, string>) => async () => (await get(`${url}/assets/${largest}`, headers)).ms
  const pairs = await inPairs(Math.max(10, rounds), fetched(browserAsks), fetched({}))
  figures.push(
    compared(
      'largest js, packed while asked',
      'ms',
      pairs,
      `${largest}, ${Math.round(size(largest) / 1000)} kB, over loopback; peer: the same without packing`
    )
  )
  return figures
}
