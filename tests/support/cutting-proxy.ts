// A way to the server that cuts every connection after a random while, as bad networks do.
import net, { type AddressInfo } from 'node:net'

export interface CuttingProxy {
  url: string
  /** How many connections were cut so far. */
  cuts(): number
  /** From now on nothing is cut any more. */
  heal(): void
  close(): Promise<void>
}

export const startCuttingProxy = async (targetPort: () => number, cutAfterMs: () => number): Promise<CuttingProxy> => {
  let cuts = 0
  let isHealed = false
  const open = new Set<net.Socket>()
  const server = net.createServer((from) => {
    const to = net.connect(targetPort(), '127.0.0.1')
    for (const end of [from, to]) {
      open.add(end)
      end.on('error', () => undefined)
      end.on('close', () => {
        open.delete(end)
        from.destroy()
        to.destroy()
      })
    }
    from.pipe(to).pipe(from)
    if (isHealed) return
    const timer = setTimeout(() => {
      if (isHealed) return
      cuts += 1
      from.resetAndDestroy()
      to.destroy()
    }, cutAfterMs())
    from.on('close', () => clearTimeout(timer))
  })
  await new Promise<void>((listening) => server.listen(0, '127.0.0.1', listening))
  return {
    url: `http://127.0.0.1:${(server.address() as AddressInfo).port}`,
    cuts: () => cuts,
    heal: () => {
      isHealed = true
    },
    close: () => {
      for (const end of open) end.destroy()
      return new Promise((closed) => server.close(() => closed()))
    }
  }
}
