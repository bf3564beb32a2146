import { defineEventHandler, setResponseStatus } from 'h3'
import { readHealth } from '../../services/health'

/** Everything that a request may need is there; 503 with the name of what is not. */
export default defineEventHandler(async (event) => {
  const health = await readHealth()
  if (!health.ready) setResponseStatus(event, 503)
  return health
})
