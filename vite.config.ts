import { fileURLToPath } from 'node:url'
import tailwindcss from '@tailwindcss/vite'
import react from '@vitejs/plugin-react'
import type { ProxyOptions } from 'vite'
import { defineConfig } from 'vitest/config'

const here = (path: string) => fileURLToPath(new URL(path, import.meta.url))
const alias = [
  ...['shared', 'server', 'client'].map((room) => ({ find: `@${room}`, replacement: here(`./${room}`) })),
  // Only in the browser: tests run the package as the server does.
  ...(process.env['VITEST'] ? [] : [{ find: /^zod$/, replacement: here('./client/lib/zod.ts') }])
]

// Two files at a time, also on a machine of two cores: most tests wait for processes, and one PostgreSQL is behind them.
const twoAtATime = { maxWorkers: 2 }
/** Journeys that look at the clock of a sound: nothing else may run beside them. */
const alone = ['engine', 'session', 'over-recording'].map((name) => `tests/e2e/${name}.test.ts`)
const project = (name: string, extra: Record<string, unknown> = {}) => ({
  extends: true as const,
  test: { name, include: [`tests/${name}/**/*.test.{ts,tsx}`], ...extra }
})

/** Real processes, sockets and sound on a shared machine: what fails once by a hiccup is tried again, what fails always fails. */
const real = (groupOrder: number) => ({ ...twoAtATime, retry: 1, sequence: { groupOrder } })

// Given by `npm run dev`: where the server answers while Vite serves the page.
const api = process.env['PLUMBLINE_DEV_API']
// The host stays as the browser sent it: the server takes writes from its own origin only.
const proxy: Record<string, ProxyOptions> = api
  ? { '/api': { target: api }, '/healthz': { target: api }, '/socket.io': { target: api, ws: true } }
  : {}

export default defineConfig({
  server: { proxy },
  plugins: [react(), tailwindcss()],
  resolve: { alias },
  // The server puts a fresh nonce in its place for every page it sends.
  html: { cspNonce: '__PLUMBLINE_NONCE__' },
  publicDir: 'client/assets',
  optimizeDeps: { exclude: ['@ffmpeg/ffmpeg', '@ffmpeg/core'] },
  build: {
    outDir: 'storage/build',
    emptyOutDir: true,
    // A content security policy without data: addresses needs every asset as a file of its own.
    assetsInlineLimit: 0,
    target: 'es2022'
  },
  worker: { format: 'es' },
  test: {
    reporters: ['default'],
    projects: [
      // Reckoning on a busy machine may take its time; a test that hangs still ends.
      project('unit', { ...twoAtATime, testTimeout: 60_000 }),
      project('architecture', twoAtATime),
      project('client', {
        ...twoAtATime,
        environment: 'jsdom',
        setupFiles: ['tests/support/patience.ts'],
        testTimeout: 30_000
      }),
      project('setup', { ...real(1), testTimeout: 120_000, hookTimeout: 120_000 }),
      project('api', { ...real(1), testTimeout: 30_000, hookTimeout: 60_000 }),
      project('realtime', { ...real(1), testTimeout: 30_000, hookTimeout: 60_000 }),
      project('media', { ...real(1), testTimeout: 60_000, hookTimeout: 60_000 }),
      project('e2e', { ...real(2), retry: 2, exclude: alone, testTimeout: 300_000, hookTimeout: 300_000 }),
      project('e2e-alone', {
        include: alone,
        retry: 2,
        fileParallelism: false,
        testTimeout: 300_000,
        hookTimeout: 300_000
      })
    ]
  }
})
