import { createServer } from 'node:net'

/** The preferred loopback port when nothing listens on it, otherwise one the system says is free. */
export async function freePort(preferred?: number): Promise<number> {
  if (preferred && (await canListen(preferred))) return preferred
  return listenOnce(0)
}

function canListen(port: number): Promise<boolean> {
  return listenOnce(port).then(
    () => true,
    () => false,
  )
}

function listenOnce(port: number): Promise<number> {
  return new Promise((resolve, reject) => {
    const server = createServer()
    server.once('error', reject)
    server.listen(port, '127.0.0.1', () => {
      const address = server.address()
      server.close(() => resolve(typeof address === 'object' && address ? address.port : port))
    })
  })
}
