// The server process.
import { buildApp } from '@server/app'
import { configOrExit } from '@server/config'
import { createLogger } from '@server/logger'
import { onShutdown } from '@server/shutdown'

const config = configOrExit()
const log = createLogger((line) => process.stdout.write(line))
const { http, close } = await buildApp({ config, log, now: Date.now })

/** The address to tell a person: never a wildcard. */
const address = (): string => {
  const host =
    config.host === '0.0.0.0' || config.host === '::'
      ? 'localhost'
      : config.host.includes(':')
        ? `[${config.host}]`
        : config.host
  return `${config.tls ? 'https' : 'http'}://${host}:${config.port}`
}

http.on('error', (error: NodeJS.ErrnoException) => {
  const words =
    error.code === 'EADDRINUSE'
      ? `Port ${config.port} is taken by another program. Choose another with PORT.`
      : error.code === 'EACCES'
        ? `Port ${config.port} may not be used by this account. Choose another with PORT.`
        : `The server cannot listen on ${config.host}:${config.port} (${error.code ?? error.message}).`
  process.stderr.write(`${words}\n`)
  process.exit(78)
})
http.listen(config.port, config.host, () => {
  process.send?.({ type: 'listening', address: address() })
  log.info('http', 'listening', { address: address() })
})
onShutdown(log, close)
