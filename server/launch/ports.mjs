import { connect, createServer } from 'node:net'

/** @returns {Promise<boolean>} whether a server could listen there now */
export function isFree(port, host = '127.0.0.1') {
  return new Promise((done) => {
    const probe = createServer()
    probe.once('error', () => done(false))
    probe.listen({ port, host, exclusive: true }, () => probe.close(() => done(true)))
  })
}

/** A port that the system says is free. */
export function freePort(host = '127.0.0.1') {
  return new Promise((done, fail) => {
    const probe = createServer()
    probe.once('error', fail)
    probe.listen({ port: 0, host }, () => {
      const { port } = probe.address()
      probe.close(() => done(port))
    })
  })
}

const GREETING_VERSION_BYTE = 4
const PROTOCOL_10 = 0x0a

/** Whether a MariaDB greets on this port: its server speaks first, the fifth byte is 0x0a. */
export function greetsAsMariadb(port, host = '127.0.0.1') {
  return new Promise((done) => {
    const socket = connect({ port, host })
    const answer = (value) => {
      socket.destroy()
      done(value)
    }
    socket.setTimeout(1000, () => answer(false))
    socket.once('error', () => answer(false))
    socket.once('close', () => answer(false))
    socket.once('data', (bytes) => answer(bytes[GREETING_VERSION_BYTE] === PROTOCOL_10))
  })
}
