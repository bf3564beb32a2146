// Free ports on loopback.
import net from 'node:net'

/** True when nothing listens on this loopback port (0 asks for any). Resolves to the port, or null when it is taken. */
function tryPort(port) {
  return new Promise((resolve, reject) => {
    const server = net.createServer()
    server.once('error', error => (error.code === 'EADDRINUSE' ? resolve(null) : reject(error)))
    server.listen({ port, host: '127.0.0.1', exclusive: true }, () => {
      const { port: taken } = server.address()
      server.close(() => resolve(taken))
    })
  })
}

/** @param {number} port @returns {Promise<boolean>} */
export const portIsFree = async port => (await tryPort(port)) !== null

/** The wished port when it is free, else any free one. @param {number} [wished] @returns {Promise<number>} */
export async function freePort(wished = 0) {
  return (wished ? await tryPort(wished) : null) ?? (await tryPort(0))
}
