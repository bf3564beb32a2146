import { defineEventHandler } from 'h3'
import recordFile from '../routes/records/files/[recordFile].get'

/** GET /records/:recordId.pdf is a file and GET /records/:recordId a page: the router cannot tell the two apart by a route, so the file is answered before it. */
export default defineEventHandler((event) => {
  const file = /^\/records\/([0-9a-f-]{36}\.pdf)(?:\?|$)/.exec(event.path)?.[1]
  if (!file || (event.method !== 'GET' && event.method !== 'HEAD')) return
  event.context.params = { recordFile: file }
  return recordFile(event)
})
