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

// Journeys and database tests share two cores and one PostgreSQL, so only pure tests run file-parallel.
const project = (name: string, extra: Record<string, unknown> = {}) => ({
  extends: true as const,
  test: { name, include: [`tests/${name}/**/*.test.{ts,tsx}`], ...extra }
})

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
      project('unit'),
      project('architecture'),
      project('client', { environment: 'jsdom' }),
      // Real processes, sockets and sound on a shared machine: what fails once by a hiccup is tried again, what fails always fails.
      project('setup', { retry: 1, fileParallelism: false, testTimeout: 120_000, hookTimeout: 120_000 }),
      project('api', { retry: 1, fileParallelism: false, testTimeout: 30_000, hookTimeout: 60_000 }),
      project('realtime', { retry: 1, fileParallelism: false, testTimeout: 30_000, hookTimeout: 60_000 }),
      project('media', { retry: 1, fileParallelism: false, testTimeout: 60_000, hookTimeout: 60_000 }),
      project('e2e', { retry: 2, fileParallelism: false, testTimeout: 300_000, hookTimeout: 300_000 })
    ]
  }
})
