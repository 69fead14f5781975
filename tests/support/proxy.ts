import { connect, createServer, type Socket } from 'node:net'

/** A wire to the database that can be cut or held, as a restart, a lost network or a frozen server would. */
export interface DatabaseWire {
  /** The same address, through the wire. */
  urlOf: (url: string) => string
  /** Refuses new connections and drops those that are open. */
  cut: () => Promise<void>
  /** Lets nothing through any more, without dropping anything. */
  hold: () => void
  /** As at first. */
  mend: () => Promise<void>
  close: () => Promise<void>
}

export async function createDatabaseWire(url: string): Promise<DatabaseWire> {
  const { hostname, port } = new URL(url)
  const sockets = new Set<Socket>()
  let held = false
  const server = createServer((outer) => {
    const inner = connect(Number(port), hostname)
    for (const [from, to] of [
      [outer, inner],
      [inner, outer],
    ] as const) {
      sockets.add(from)
      from.on('data', (chunk) => {
        if (!held) to.write(chunk)
      })
      from.on('error', () => undefined)
      from.on('close', () => {
        sockets.delete(from)
        to.destroy()
      })
    }
  })
  const listen = (at: number) => new Promise<void>((resolve) => server.listen(at, '127.0.0.1', resolve))
  const drop = () => {
    for (const socket of sockets) socket.destroy()
  }
  const stop = () =>
    new Promise<void>((resolve) => {
      server.close(() => resolve())
      drop()
    })
  await listen(0)
  const address = server.address()
  if (address === null || typeof address === 'string') throw new Error('the wire has no port')
  return {
    urlOf: (target) => {
      const through = new URL(target)
      through.port = String(address.port)
      return through.href
    },
    cut: stop,
    hold: () => {
      held = true
    },
    mend: async () => {
      held = false
      drop()
      if (!server.listening) await listen(address.port)
    },
    close: async () => {
      if (server.listening) await stop()
    },
  }
}
