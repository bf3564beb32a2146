import { createServer, type Server } from 'node:http'
import type { AddressInfo } from 'node:net'

/** A store that speaks as much S3 as we use: PUT, GET, HEAD and DELETE of objects, path style. Keeps what it was given in memory. */
export async function startFakeS3(): Promise<{ endpoint: string, objects: Map<string, Buffer>, puts: () => number, refuse: (now: boolean) => void, stop: () => Promise<void> }> {
  const objects = new Map<string, Buffer>()
  let puts = 0
  let refusing = false
  const server: Server = createServer((request, response) => {
    const key = decodeURIComponent(new URL(request.url!, 'http://fake').pathname)
    const parts: Buffer[] = []
    request.on('data', part => parts.push(part as Buffer)).on('end', () => {
      if (refusing) return void response.writeHead(503).end()
      if (request.method === 'PUT') {
        puts++
        objects.set(key, unchunk(Buffer.concat(parts), request.headers['content-encoding']))
        return void response.writeHead(200, { etag: '"x"' }).end()
      }
      const bytes = objects.get(key)
      if (request.method === 'DELETE') {
        objects.delete(key)
        return void response.writeHead(204).end()
      }
      if (!bytes) return void response.writeHead(404, { 'content-type': 'application/xml' }).end(request.method === 'HEAD' ? undefined : '<Error><Code>NoSuchKey</Code></Error>')
      response.writeHead(200, { 'content-length': bytes.length, 'content-type': 'application/octet-stream' }).end(request.method === 'HEAD' ? undefined : bytes)
    })
  })
  await new Promise<void>(done => server.listen(0, '127.0.0.1', done))
  return {
    endpoint: `http://127.0.0.1:${(server.address() as AddressInfo).port}`, objects, puts: () => puts,
    refuse: (now) => { refusing = now },
    stop: () => new Promise(done => server.close(() => done())),
  }
}

/** The SDK may send its body in signed chunks (aws-chunked): size in hex, CR LF, bytes. */
function unchunk(body: Buffer, encoding: string | undefined): Buffer {
  if (encoding !== 'aws-chunked') return body
  const parts: Buffer[] = []
  for (let at = 0; at < body.length;) {
    const end = body.indexOf('\r\n', at)
    const size = Number.parseInt(body.subarray(at, end).toString('latin1'), 16)
    if (!size) break
    parts.push(body.subarray(end + 2, end + 2 + size))
    at = end + 2 + size + 2
  }
  return Buffer.concat(parts)
}
