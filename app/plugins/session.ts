/** Reads who is signed in before the first page; field pages (/w) have their own, since they must open with no signal. */
export default defineNuxtPlugin(async () => {
  const { me, reload } = useSession()
  const path = useRequestURL().pathname
  // What the server rendered came with the page, also that nobody is signed in: asking again would only be refused again.
  if (import.meta.client && useNuxtApp().payload.serverRendered) return
  if (me.value === null && !/^\/(w|check)(\/|$)/.test(path)) await reload().catch(() => undefined)
})
