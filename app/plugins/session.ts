/** Reads who is signed in before the first page; field pages (/w) have their own, since they must open with no signal. */
export default defineNuxtPlugin(async () => {
  const { me, reload } = useSession()
  const path = useRequestURL().pathname
  if (me.value === null && !/^\/(w|check)(\/|$)/.test(path)) await reload().catch(() => undefined)
})
