import { readdirSync } from 'node:fs'
import { join } from 'node:path'
import { brotliCompressSync, gzipSync } from 'node:zlib'
import { build } from 'vite'
import { root } from './processes.ts'

export interface Weight {
  raw: number
  gzip: number
  brotli: number
}

const entryId = '\0bench-entry'

/** One file that keeps everything its modules export. */
const weigh = async (modules: readonly string[]): Promise<Weight> => {
  const source = modules.map((path, i) => `export * as m${i} from ${JSON.stringify(path)}`).join('\n')
  const built = await build({
    root,
    configFile: false,
    logLevel: 'silent',
    resolve: { alias: { '@shared': join(root, 'shared') } },
    plugins: [
      {
        name: 'bench-entry',
        resolveId: (id) => (id.endsWith('bench-entry') ? entryId : null),
        load: (id) => (id === entryId ? source : null)
      }
    ],
    build: {
      write: false,
      minify: true,
      target: 'es2022',
      lib: { entry: 'bench-entry', formats: ['es'], fileName: 'music' }
    }
  })
  const outputs = (Array.isArray(built) ? built : [built]).flatMap((one) => ('output' in one ? one.output : []))
  const code = outputs.map((file) => (file.type === 'chunk' ? file.code : '')).join('')
  return { raw: code.length, gzip: gzipSync(code).length, brotli: brotliCompressSync(code).length }
}

/** The music code as a browser would get it, and the package within it alone. */
export const musicBundle = async (): Promise<{ ours: Weight; peer: Weight }> => {
  const folder = join(root, 'shared', 'music')
  const modules = readdirSync(folder).filter((name) => name.endsWith('.ts') && !name.endsWith('.d.ts'))
  return {
    ours: await weigh(modules.map((name) => join(folder, name))),
    peer: await weigh(['chord-symbol/lib/chord-symbol-esm.js'])
  }
}
