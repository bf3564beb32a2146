import { defineEventHandler, getRequestHeader, getRequestURL } from 'h3'
import { Failure } from '../services/failure'
import { useSettings } from '../settings'

/**
 * Unsafe methods need our Origin. Browsers always send one; a program that is no browser sends neither Origin nor Sec-Fetch-Site and carries nobody's
 * cookie but its own, so it may pass.
 */
export default defineEventHandler((event) => {
  if (['GET', 'HEAD', 'OPTIONS'].includes(event.method)) return
  const origin = getRequestHeader(event, 'origin')
  const site = getRequestHeader(event, 'sec-fetch-site')
  const ours = [useSettings().origin, getRequestURL(event).origin]
  if (origin ? !ours.includes(origin) : site && site !== 'same-origin' && site !== 'none') throw new Failure('foreignOrigin', 'This came from another site and was not carried out. Open Smoothside itself and do it there.')
})
