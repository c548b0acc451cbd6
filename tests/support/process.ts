// The real server and worker as processes of their own, to be killed.
import { type ChildProcess, spawn } from 'node:child_process'
import { once } from 'node:events'
import { createServer, type AddressInfo } from 'node:net'
import { fileURLToPath } from 'node:url'

const root = fileURLToPath(new URL('../../', import.meta.url))

export const freePort = async (): Promise<number> => {
  const server = createServer()
  await new Promise<void>((listening) => server.listen(0, '127.0.0.1', listening))
  const { port } = server.address() as AddressInfo
  await new Promise((closed) => server.close(closed))
  return port
}

export interface Running {
  child: ChildProcess
  /** What it wrote, as it came. */
  output: () => string
  kill(signal?: NodeJS.Signals): Promise<void>
}

export const run = (entry: 'server/main.ts' | 'server/worker.ts', env: Record<string, string>): Running => {
  const child = spawn(process.execPath, ['--import', 'tsx', entry], {
    cwd: root,
    stdio: ['ignore', 'pipe', 'pipe'],
    // In a group of its own, so that what it started dies with it.
    detached: true,
    env: { ...process.env, SESSION_SECRET: 'a secret for tests only, long enough for it', ...env }
  })
  let output = ''
  child.stdout.on('data', (chunk: Buffer) => (output += chunk.toString()))
  child.stderr.on('data', (chunk: Buffer) => (output += chunk.toString()))
  const exit = once(child, 'exit')
  return {
    child,
    output: () => output,
    kill: async (signal = 'SIGKILL') => {
      if (child.exitCode === null && child.signalCode === null && child.pid) process.kill(-child.pid, signal)
      await exit
    }
  }
}
